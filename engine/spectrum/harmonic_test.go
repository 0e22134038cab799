package spectrum_test

import (
	"math"
	"math/cmplx"
	"math/rand/v2"
	"sort"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/spectrum"
)

// hessenberg returns a random (m+1) x m upper Hessenberg matrix by rows.
func hessenberg(m int, seed uint64) []float64 {
	r := rand.New(rand.NewPCG(seed, 1))
	h := make([]float64, (m+1)*m)
	for i := range m + 1 {
		for j := max(0, i-1); j < m; j++ {
			h[i*m+j] = r.NormFloat64()
		}
	}
	return h
}

// harmonicValues returns the harmonic Ritz values, by rising magnitude, from
// their other definition: the eigenvalues of H_m + h² H_m⁻ᵀe_m e_mᵀ with
// h = h_{m+1,m} (Morgan 2002), by gonum.
func harmonicValues(hbar []float64, m int) []complex128 {
	g := mat.NewDense(m, m, append([]float64(nil), hbar[:m*m]...))
	e, f := mat.NewVecDense(m, nil), mat.NewVecDense(m, nil)
	last := hbar[m*m+m-1]
	e.SetVec(m-1, last*last)
	if err := f.SolveVec(g.T(), e); err != nil {
		panic(err)
	}
	for i := range m {
		g.Set(i, m-1, g.At(i, m-1)+f.AtVec(i))
	}
	var eig mat.Eigen
	eig.Factorize(g, mat.EigenNone)
	values := eig.Values(nil)
	sort.SliceStable(values, func(i, j int) bool { return cmplx.Abs(values[i]) < cmplx.Abs(values[j]) })
	return values
}

// The vectors are orthonormal, span an invariant space of the harmonic
// problem, H̄ᵀH̄ P = H_mᵀ P T, and T has the values of least magnitude; a
// conjugate pair is never cut.
func TestHarmonicSmallest(t *testing.T) {
	const m = 12
	cut := 0
	for seed := range uint64(40) {
		hbar := hessenberg(m, seed)
		want := harmonicValues(hbar, m)
		solver := spectrum.NewHarmonic(m)
		for k := 1; k <= 5; k++ {
			columns := make([][]float64, k+1)
			for i := range columns {
				columns[i] = make([]float64, m)
			}
			got := solver.Smallest(hbar, k, k+1, columns)
			expect := k
			if math.Abs(imag(want[k-1])) > 1e-9 && cmplx.Abs(want[k-1]-cmplx.Conj(want[k])) < 1e-9 {
				expect, cut = k+1, cut+1
			}
			if got != expect {
				t.Fatalf("seed %d: %d vectors, want %d", seed, got, expect)
			}
			checkInvariant(t, hbar, m, columns[:got], want[:got])
		}
	}
	if cut == 0 {
		t.Error("no pair was ever at the cut")
	}
}

func checkInvariant(t *testing.T, hbar []float64, m int, columns [][]float64, want []complex128) {
	t.Helper()
	k := len(columns)
	p := mat.NewDense(m, k, nil)
	for j, c := range columns {
		p.SetCol(j, c)
	}
	var gram mat.Dense
	gram.Mul(p.T(), p)
	for i := range k {
		gram.Set(i, i, gram.At(i, i)-1)
	}
	if mat.Norm(&gram, 2) > 1e-13 {
		t.Errorf("not orthonormal: %g", mat.Norm(&gram, 2))
	}
	full := mat.NewDense(m+1, m, append([]float64(nil), hbar...))
	var image, right, left, theta, rest mat.Dense
	right.Mul(full.Slice(0, m, 0, m).T(), p) // H_mᵀ P
	image.Mul(full, p)
	left.Mul(full.T(), &image) // H̄ᵀH̄ P
	if err := theta.Solve(&right, &left); err != nil {
		t.Fatal(err)
	}
	rest.Mul(&right, &theta)
	rest.Sub(&left, &rest)
	if off := mat.Norm(&rest, 2) / mat.Norm(&left, 2); off > 1e-8 {
		t.Errorf("not invariant: %g", off)
	}
	var eig mat.Eigen
	eig.Factorize(&theta, mat.EigenNone)
	for _, v := range eig.Values(nil) {
		best := math.Inf(1)
		for _, w := range want {
			best = math.Min(best, cmplx.Abs(v-w)/cmplx.Abs(w))
		}
		if best > 1e-6 {
			t.Errorf("value %v is none of %v", v, want)
		}
	}
}

// With no room for both of a pair, neither is kept.
func TestHarmonicLimit(t *testing.T) {
	// H_m turns the plane, the last row is small: the values are near ±i.
	hbar := []float64{0, -1, 1, 0, 0, 1e-3}
	columns := [][]float64{make([]float64, 2), make([]float64, 2)}
	h := spectrum.NewHarmonic(2)
	if got := h.Smallest(hbar, 1, 1, columns); got != 0 {
		t.Errorf("%d vectors of a pair", got)
	}
	if got := h.Smallest(hbar, 1, 2, columns); got != 2 {
		t.Errorf("%d vectors, want the pair", got)
	}
}

// The values are those of the other definition; those at infinity are left
// out.
func TestHarmonicValues(t *testing.T) {
	const m = 9
	for seed := range uint64(20) {
		hbar := hessenberg(m, seed)
		want := harmonicValues(hbar, m)
		got := spectrum.NewHarmonic(m).Values(hbar)
		if len(got) != m {
			t.Fatalf("seed %d: %d values", seed, len(got))
		}
		for i, v := range got {
			best := math.Inf(1)
			for _, w := range want {
				best = math.Min(best, cmplx.Abs(v-w)/cmplx.Abs(w))
			}
			if best > 1e-8 || i > 0 && cmplx.Abs(v) < cmplx.Abs(got[i-1])*(1-1e-12) {
				t.Errorf("seed %d: value %v of %v, known %v", seed, v, got, want)
			}
		}
	}
	// A shift by one: H_m is nilpotent, and the residual stands still.
	if got := spectrum.NewHarmonic(2).Values([]float64{0, 0, 1, 0, 0, 1}); len(got) != 0 {
		t.Errorf("values of a shift: %v", got)
	}
}
