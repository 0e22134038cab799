package inspect_test

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/samples"
)

// What the first look leaves open the second one answers: the frame on a hinge
// has one free motion, which b does not push along; the unsupported one has
// three, which it does.
func TestTheStudySettlesFacts(t *testing.T) {
	pin := studied(t, sample(t, "frame:pin"), inspect.Quick)
	expect(t, "singular", pin.Singular, inspect.Yes, inspect.Measured)
	expect(t, "definite", pin.PositiveDefinite, inspect.No, inspect.Measured)
	expect(t, "semi-definite", pin.Semidefinite, inspect.Yes, inspect.Measured)
	expect(t, "unreachable", pin.Unreachable, inspect.No, inspect.Measured)
	if pin.SingularAtSight() {
		t.Error("nothing in pattern or sums shows it")
	}
	loose := sample(t, "frame:unsupported")
	f := studied(t, loose, inspect.Quick)
	expect(t, "unreachable", f.Unreachable, inspect.Yes, inspect.Measured)
	if want := alongNull(loose); math.Abs(f.Unreachable.Value-want) > 1e-7*want {
		t.Errorf("the part of b out of reach is %.10g, that along the null space %.10g", f.Unreachable.Value, want)
	}
	clamped := studied(t, sample(t, "frame"), inspect.Quick)
	expect(t, "singular", clamped.Singular, inspect.No, "")
	expect(t, "unreachable", clamped.Unreachable, inspect.No, "")
}

// alongNull is the norm of the part of b in the span of the eigenvectors to the
// three smallest eigenvalues, by gonum, relative to that of b.
func alongNull(s linear.System) float64 {
	n := s.N()
	m := mat.NewSymDense(n, nil)
	for i := range n {
		cols, vals := s.Matrix().Row(i)
		for k, j := range cols {
			m.SetSym(i, int(j), vals[k])
		}
	}
	var d mat.EigenSym
	var v mat.Dense
	d.Factorize(m, true)
	d.VectorsTo(&v)
	sum := 0.0
	for k := range 3 {
		dot := linear.Dot(mat.Col(nil, k, &v), s.B)
		sum += dot * dot
	}
	return math.Sqrt(sum) / linear.Norm2(s.B)
}

// sample builds a sample that has a right-hand side.
func sample(t *testing.T, spec string) linear.System {
	t.Helper()
	s, err := samples.Build(spec)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// The eigenvalue that the row sums prove to be zero is no measured number: of
// the path of n points the next is 4 sin²(π/2n).
func TestProvedZeroOfASpectrum(t *testing.T) {
	const n = 30
	var path []linear.Entry
	for i := range n - 1 {
		path = append(path, e(i, i, 1), e(i+1, i+1, 1), e(i, i+1, -1), e(i+1, i, -1))
	}
	x := studied(t, ones(linear.FromEntries(n, n, path), 17), inspect.Quick).Study.Raw
	sin := math.Sin(math.Pi / (2 * n))
	if x.Zeros != 1 || x.Smallest != 0 || x.Low[0] != 0 || math.Abs(x.Low[1]-4*sin*sin) > 1e-13 {
		t.Errorf("%d zeros, low end %g: %g", x.Zeros, x.Smallest, x.Low[:2])
	}
}

// (A+Aᵀ)/2 of [2 c; −c 2] is 2I whatever c is, that of [1 3; 0 1] has the
// eigenvalues −1/2 and 5/2.
func TestSymmetricPart(t *testing.T) {
	f := studied(t, ones(dense([]float64{2, 5}, []float64{-5, 2}), 17), inspect.Quick)
	expect(t, "turning", f.SymmetricPart, inspect.Yes, inspect.Proved)
	f = studied(t, ones(dense([]float64{1, 3}, []float64{0, 1}), 17), inspect.Quick)
	expect(t, "shear", f.SymmetricPart, inspect.No, inspect.Measured)
	if math.Abs(f.SymmetricPart.Value+0.5) > 1e-12 {
		t.Errorf("smallest eigenvalue %g, want -1/2", f.SymmetricPart.Value)
	}
	f = studied(t, ones(dense([]float64{1, 2}, []float64{2, 1}), 17), inspect.Quick)
	if f.SymmetricPart.Answer != "" {
		t.Error("asked of a symmetric A")
	}
}

// watt_2 is factorised, so that it is not said to be left open; its six digits
// leave room for a singular one.
func TestWattIsRegularByItsFactor(t *testing.T) {
	f := studied(t, open(t, "watt_2.mtx"), inspect.Quick)
	expect(t, "singular", f.Singular, inspect.No, inspect.Measured)
	expect(t, "unreachable", f.Unreachable, inspect.No, inspect.Measured)
}
