package samples

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"
)

// eigenvalues returns those of a symmetric sample, ascending, by gonum's
// dense solver.
func eigenvalues(t *testing.T, spec string) []float64 {
	t.Helper()
	_, a := build(t, spec)
	d := mat.NewSymDense(a.NRows, nil)
	for i := 0; i < a.NRows; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			if int(c) >= i {
				d.SetSym(i, int(c), vals[k])
			}
		}
	}
	var e mat.EigenSym
	if !e.Factorize(d, false) {
		t.Fatal("no eigenvalues")
	}
	return e.Values(nil)
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Max(1, math.Abs(want))) {
		t.Errorf("%s: %.15g, want %.15g", what, got, want)
	}
}

func compare(t *testing.T, spec string, got, want []float64) {
	t.Helper()
	if len(got) != len(want) {
		t.Fatalf("%s: %d eigenvalues, want %d", spec, len(got), len(want))
	}
	slices.Sort(want)
	for k := range want {
		near(t, spec, got[k], want[k], 1e-12)
	}
}

func grid(n int, value func(x, y float64) float64) []float64 {
	var out []float64
	for p := 1; p <= n; p++ {
		for q := 1; q <= n; q++ {
			h := math.Pi / float64(n+1)
			out = append(out, value(math.Cos(float64(p)*h), math.Cos(float64(q)*h)))
		}
	}
	return out
}

// TestClosedForms holds the spectra against their closed forms, and a few
// ends against values computed once by another library (NumPy 1.24).
func TestClosedForms(t *testing.T) {
	got := eigenvalues(t, "plate:8")
	compare(t, "plate:8", got, grid(8, func(x, y float64) float64 { return 4 - 2*x - 2*y }))
	near(t, "plate:8 smallest (NumPy)", got[0], 0.241229516856366, 1e-13)
	near(t, "plate:8 largest (NumPy)", got[63], 7.75877048314363, 1e-13)
	near(t, "plate:8 condition", got[63]/got[0], 32.1634374775264, 1e-12)

	s := math.Pow(2*math.Pi*1.3/10, 2)
	compare(t, "acoustics", eigenvalues(t, "acoustics:9,wave=1.3"),
		grid(9, func(x, y float64) float64 { return 4 - 2*x - 2*y - s }))

	var want []float64
	for k := 1; k <= 10; k++ {
		want = append(want, 4*math.Pow(math.Sin(float64(k)*math.Pi/22), 2))
	}
	got = eigenvalues(t, "line:10")
	compare(t, "line:10", got, want)
	near(t, "line:10 smallest (NumPy)", got[0], 0.0810140527710052, 1e-13)
	near(t, "line:10 largest (NumPy)", got[9], 3.91898594722899, 1e-13)

	r := 2 * math.Sqrt2
	compare(t, "kershaw", eigenvalues(t, "kershaw"), []float64{3 - r, 3 - r, 3 + r, 3 + r})
}

// TestDuctSpectrum: the eigenvalues are real and known; they are those of the
// symmetric matrix with -sqrt(1+q) beside the diagonal along rows, to which a
// diagonal similarity leads (checked entry by entry through a_ij a_ji).
func TestDuctSpectrum(t *testing.T) {
	const n, peclet = 6, 3.5
	_, a := build(t, "duct:6,peclet=3.5")
	q := peclet / float64(n+1)
	d := mat.NewDense(n*n, n*n, nil)
	for i := 0; i < n*n; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			d.Set(i, int(c), vals[k])
		}
	}
	var e mat.Eigen
	if !e.Factorize(d, mat.EigenNone) {
		t.Fatal("no eigenvalues")
	}
	var got []float64
	for _, v := range e.Values(nil) {
		near(t, "imaginary part", imag(v), 0, 1e-9)
		got = append(got, real(v))
	}
	slices.Sort(got)
	want := grid(n, func(x, y float64) float64 { return 4 + q - 2*math.Sqrt(1+q)*x - 2*y })
	slices.Sort(want)
	for k := range want {
		near(t, "duct", got[k], want[k], 1e-9)
	}
}

// TestAcousticsNegative: the default hall has the negative eigenvalues its
// closed form counts, and none close to zero.
func TestAcousticsNegative(t *testing.T) {
	_, v, _ := Parse("acoustics")
	s := math.Pow(2*math.Pi*v.Real("wave")/float64(v.Int("n")+1), 2)
	negative, closest := 0, math.Inf(1)
	for _, l := range grid(v.Int("n"), func(x, y float64) float64 { return 4 - 2*x - 2*y - s }) {
		if l < 0 {
			negative++
		}
		closest = math.Min(closest, math.Abs(l))
	}
	if negative < 5 || closest < 1e-3 {
		t.Errorf("%d negative, closest to zero %g", negative, closest)
	}
}

// TestStrakosDiagonal: second eigenvalues, recomputed with NumPy from the
// formula of the 1991 paper.
func TestStrakosDiagonal(t *testing.T) {
	for spec, want := range map[string]float64{
		"strakos:24,0.6":           0.1000571696,
		"strakos:24,0.7":           0.1016982223,
		"strakos:24,0.8":           0.1320492127,
		"strakos:24,0.9":           0.5277331006,
		"strakos:24,1":             4.443478261,
		"strakos:48,0.8,high=1000": 0.1007413070,
		"strakos:48,0.9,high=1000": 0.2671145041,
	} {
		sys, a := build(t, spec)
		n := a.NRows
		near(t, spec, a.At(1, 1), want, 1e-9)
		near(t, spec+" first", a.At(0, 0), 0.1, 1e-15)
		s := 0.0
		for _, b := range sys.B {
			s += b * b
		}
		near(t, spec+" norm of b", s, 1, 1e-14)
		if a.Entries() != n {
			t.Errorf("%s: not diagonal", spec)
		}
	}
}

// TestShift: A e_i = e_(i+1), A e_n = e_1.
func TestShift(t *testing.T) {
	sys, a := build(t, "shift:5")
	x, y := []float64{1, 2, 3, 4, 5}, make([]float64, 5)
	a.Apply(y, x)
	if !slices.Equal(y, []float64{5, 1, 2, 3, 4}) || !slices.Equal(sys.B, []float64{1, 0, 0, 0, 0}) {
		t.Errorf("A x = %v, b = %v", y, sys.B)
	}
}

// TestSeepageSpectrum: one zero eigenvalue, the rest clearly positive.
func TestSeepageSpectrum(t *testing.T) {
	l := eigenvalues(t, "seepage:12")
	scale := l[len(l)-1]
	if math.Abs(l[0]) > 1e-13*scale || l[1] < 1e-5*scale {
		t.Errorf("smallest %g, %g, largest %g", l[0], l[1], scale)
	}
}

// TestFeederDefinite: positive definite, and far from well conditioned.
func TestFeederDefinite(t *testing.T) {
	l := eigenvalues(t, "feeder")
	if k := l[len(l)-1] / l[0]; l[0] <= 0 || k < 1e6 || k > 1e12 {
		t.Errorf("eigenvalues %g to %g, ratio %g", l[0], l[len(l)-1], k)
	}
}
