package samples

import (
	"math"

	"dwindle/engine/linear"
)

var strakos = Sample{
	Name:  "strakos",
	Title: "vibration sensor, channels spread over decades",
	Shows: "rounding delays cg: in exact arithmetic n steps suffice, in double precision many more are needed",
	Source: "Z. Strakos, On the real convergence rate of the conjugate gradient method, " +
		"Linear Algebra Appl. 154-156 (1991) 535-549; b = 1/sqrt(n)",
	Spectrum: "the diagonal: low + (i-1)/(n-1) (high-low) rho^(n-i), i = 1..n",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 48, Min: 2, Max: 1000000, Meaning: "unknowns"},
		{Name: "rho", Kind: linear.Real, Default: 0.8, Min: 0.01, Max: 1, Meaning: "how the eigenvalues crowd at the low end; 1 is even"},
		{Name: "low", Kind: linear.Real, Default: 0.1, Min: 1e-12, Max: 1e12, Meaning: "smallest eigenvalue"},
		{Name: "high", Kind: linear.Real, Default: 100, Min: 1e-12, Max: 1e12, Meaning: "largest eigenvalue"},
	},
	Size: func(v linear.Values) (int, int) { return v.Int("n"), v.Int("n") },
	Make: makeStrakos,

	Expect: []string{"diagonal", "lost-orthogonality"},
}

func makeStrakos(v linear.Values) (linear.System, error) {
	n, rho, low, high := v.Int("n"), v.Real("rho"), v.Real("low"), v.Real("high")
	d, b := make([]float64, n), make([]float64, n)
	for i := range d {
		d[i] = low + float64(i)/float64(n-1)*(high-low)*math.Pow(rho, float64(n-1-i))
		b[i] = 1 / math.Sqrt(float64(n))
	}
	return linear.System{A: diagonal(d), B: b}, nil
}

// diagonal is diag(d), keeping d.
func diagonal(d []float64) *linear.CSR {
	n := len(d)
	a := &linear.CSR{NRows: n, NCols: n, Ptr: make([]int, n+1), Col: make([]int32, n), Val: d}
	for i := range d {
		a.Col[i], a.Ptr[i+1] = int32(i), i+1
	}
	return a
}
