package spectrum

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// springPlate is the 5-point operator on an m×m grid with one spring of the
// given stiffness between unknowns i and j.
func springPlate(m, i, j int, k float64) *linear.CSR {
	var e []linear.Entry
	for r := range m {
		for c := range m {
			p := r*m + c
			e = append(e, linear.Entry{I: p, J: p, V: 4})
			if c+1 < m {
				e = append(e, linear.Entry{I: p, J: p + 1, V: -1}, linear.Entry{I: p + 1, J: p, V: -1})
			}
			if r+1 < m {
				e = append(e, linear.Entry{I: p, J: p + m, V: -1}, linear.Entry{I: p + m, J: p, V: -1})
			}
		}
	}
	e = append(e, linear.Entry{I: i, J: i, V: k}, linear.Entry{I: j, J: j, V: k},
		linear.Entry{I: i, J: j, V: -k}, linear.Entry{I: j, J: i, V: -k})
	return linear.FromEntries(m*m, m*m, e)
}

// The spring of −2.3 between unknowns 211 and 212 of the 20×20 plate gives
// one negative eigenvalue; gonum's dense solver is the oracle, and rows 211
// and 212 carry most of its vector.
func TestRefineNegativeFindsTheSpring(t *testing.T) {
	a := springPlate(20, 210, 211, -2.3)
	n, _ := a.Dims()
	d := mat.NewSymDense(n, nil)
	for i := range n {
		cols, vals := a.Row(i)
		for k, c := range cols {
			d.SetSym(i, int(c), vals[k])
		}
	}
	var e mat.EigenSym
	e.Factorize(d, true)
	want := e.Values(nil)[0]
	p := make([]float64, n)
	for i := range p {
		p[i] = .02 * math.Sin(float64(i*i))
	}
	p[210], p[211] = 1, -.4
	start := a.ApplyDot(make([]float64, n), p) / linear.Dot(p, p)
	v, q := RefineNegative(context.Background(), a, p, 50)
	t.Logf("smallest eigenvalue %.6f, start %.6f, refined %.6f", want, start, q)
	if math.Abs(q-want) > 1e-5*math.Abs(want) || q < want*(1+1e-12) {
		t.Errorf("quotient %.9f, dense %.9f", q, want)
	}
	if s := v[210]*v[210] + v[211]*v[211]; s < .5 {
		t.Errorf("rows 211 and 212 carry %.2f of the vector", s)
	}
}

func TestRefineNegativeOddInput(t *testing.T) {
	a := springPlate(4, 5, 6, -2.3)
	if v, q := RefineNegative(context.Background(), a, make([]float64, 16), 5); v != nil || !math.IsNaN(q) {
		t.Error("zero direction")
	}
	bad := make([]float64, 16)
	bad[3] = math.NaN()
	if v, _ := RefineNegative(context.Background(), a, bad, 5); v != nil {
		t.Error("direction that is not finite")
	}
	ended, cancel := context.WithCancel(context.Background())
	cancel()
	p := make([]float64, 16)
	p[5], p[6] = 3, -3
	v, q := RefineNegative(ended, a, p, 5) // unit vector (e_5 − e_6)/√2, by hand
	if want := (4 + 4 + 2 + 4*-2.3) / 2; math.Abs(q-want) > 1e-14 || math.Abs(v[5]-math.Sqrt(.5)) > 1e-15 {
		t.Errorf("ended context: %g, want %g", q, want)
	}
	// An exact eigenvector has nothing to improve: diag(−1, 2).
	d := linear.FromEntries(2, 2, []linear.Entry{{V: -1}, {I: 1, J: 1, V: 2}})
	if v, q := RefineNegative(context.Background(), d, []float64{7, 0}, 9); q != -1 || v[0] != 1 {
		t.Errorf("eigenvector moved: %v %g", v, q)
	}
	// Two dimensions: the third direction always depends on the others.
	if _, q := RefineNegative(context.Background(), d, []float64{1, 1}, 9); math.Abs(q+1) > 1e-12 {
		t.Errorf("two dimensions: %g", q)
	}
}
