package inspect_test

import (
	"context"
	"math"
	"os"
	"path/filepath"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/samples"
)

// open reads one of the open matrices with b = ones.
func open(t *testing.T, name string) linear.System {
	t.Helper()
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("DWINDLE_OPEN does not name the folder of open matrices")
	}
	s, err := load.File(context.Background(), filepath.Join(dir, name), nil)
	if err != nil {
		t.Fatal(err)
	}
	s.B, s.RHS = ones(s.Matrix(), 17).B, linear.Ones
	return s
}

// Orders, entries, zeros on the diagonal, singletons and definiteness as
// computed once with dense eigenvalues (NumPy) from the same files; the
// matrices are from the Harwell–Boeing and SuiteSparse collections.
func TestOpenMatrices(t *testing.T) {
	for _, c := range []struct {
		file           string
		n, entries     int
		noDiagonal     int // zero or missing
		singletons     int
		explicitZeros  int
		symmetric      inspect.Answer
		definite       inspect.Answer
		singularAnswer inspect.Answer
	}{
		{"494_bus.mtx", 494, 1666, 0, 0, 0, inspect.Yes, inspect.Yes, inspect.No},
		{"LFAT5.mtx", 14, 46, 0, 0, 0, inspect.Yes, inspect.Yes, inspect.No},
		{"bcsstk01.rsa", 48, 400, 0, 0, 0, inspect.Yes, inspect.Yes, inspect.No},
		{"bcsstk13.mtx.gz", 2003, 83883, 0, 0, 0, inspect.Yes, inspect.Yes, inspect.No},
		{"bcsstk16.mtx.gz", 4884, 290378, 0, 74, 0, inspect.Yes, inspect.Yes, inspect.No},
		{"bcsstk24.rsa", 3562, 159910, 0, 0, 0, inspect.Yes, inspect.Yes, inspect.No},
		{"pts5ldd03.mtx", 161, 745, 0, 0, 0, inspect.Yes, inspect.Yes, inspect.No},
		{"hangGlider_2.mtx", 1647, 14754, 733, 0, 0, inspect.Yes, inspect.No, inspect.Unknown},
		{"ex14.rua", 3251, 66775, 900, 0, 900, inspect.Yes, inspect.No, inspect.Unknown},
		{"can_24.psa", 24, 160, 0, 0, 0, inspect.Yes, inspect.No, inspect.Unknown},
		{"jagmesh7.mtx", 1138, 7450, 0, 0, 0, inspect.Yes, inspect.No, inspect.Unknown},
		{"reorientation_1.mtx", 677, 7326, 281, 0, 0, inspect.Yes, inspect.No, inspect.Unknown},
		{"arc130.rua", 130, 1282, 0, 0, 245, inspect.No, inspect.Unknown, inspect.Unknown},
		{"west0479.mtx", 479, 1910, 471, 0, 22, inspect.No, inspect.No, inspect.Unknown},
		{"west0067.rua", 67, 294, 65, 0, 0, inspect.No, inspect.No, inspect.Unknown},
		{"fs_183_1.mtx", 183, 1069, 0, 0, 71, inspect.No, inspect.Unknown, inspect.Unknown},
		{"bfwa62.mtx", 62, 450, 0, 0, 0, inspect.No, inspect.Unknown, inspect.Unknown},
	} {
		t.Run(c.file, func(t *testing.T) {
			f := inspected(t, open(t, c.file))
			if f.N != c.n || f.Entries != c.entries || f.DiagZero+f.DiagMissing != c.noDiagonal || f.Singletons != c.singletons || f.ExplicitZeros != c.explicitZeros {
				t.Errorf("n %d, entries %d, zeros on the diagonal %d, singletons %d, explicit zeros %d",
					f.N, f.Entries, f.DiagZero+f.DiagMissing, f.Singletons, f.ExplicitZeros)
			}
			expect(t, "symmetric", f.Symmetric, c.symmetric, inspect.Proved)
			expect(t, "singular", f.Singular, c.singularAnswer, "")
			sure := inspect.Proved
			if c.definite == inspect.Unknown {
				sure = inspect.Measured
			}
			expect(t, "definite", f.PositiveDefinite, c.definite, sure)
			expect(t, "negative definite", f.NegativeDefinite, inspect.No, inspect.Proved)
			expect(t, "triangle only", f.TriangleOnly, inspect.No, inspect.Proved)
			if f.Unreachable.Answer == inspect.Yes {
				t.Errorf("part of b called unreachable: %s", f.Unreachable.Why)
			}
		})
	}
}

// bcsstk16 without its 74 decoupled rows of stiffness 1 has its smallest
// eigenvalue at 1.59e6 and its largest at 4.943e9 (dense, NumPy).
func TestSingletonsOfBcsstk16(t *testing.T) {
	f := inspected(t, open(t, "bcsstk16.mtx.gz"))
	if f.SingletonDiag.Min != 1 || f.SingletonDiag.Max != 1 || f.Components != 75 {
		t.Errorf("values %+v, %d components", f.SingletonDiag, f.Components)
	}
	if f.RestGershgorin.Max < 4.94316563e9 || f.RestDiag.Min < 1.59e6 {
		t.Errorf("the rest: %+v, %+v", f.RestGershgorin, f.RestDiag)
	}
}

// The spectrum of a matrix lies in its Gershgorin discs: the extreme
// eigenvalues of the symmetric ones (dense, NumPy) must be inside.
func TestGershgorinHoldsSpectrum(t *testing.T) {
	for file, w := range map[string][2]float64{
		"bcsstk01.rsa": {3417.267563, 3.015179090e9}, "494_bus.mtx": {0.01242237513, 30005.14176},
		"LFAT5.mtx": {0.149918935, 2.145218666e7}, "pts5ldd03.mtx": {9.693162214, 502.3068378}, "can_24.psa": {-2.0995, 7.33557},
	} {
		if f := inspected(t, open(t, file)); f.Gershgorin.Min > w[0] || f.Gershgorin.Max < w[1] {
			t.Errorf("%s: %+v", file, f.Gershgorin)
		}
	}
}

// Laplacians of the open pattern matrices are singular with constants as null
// vectors, exactly, and never called indefinite.
func TestLaplaciansOfOpenPatterns(t *testing.T) {
	for _, file := range []string{"jagmesh7.mtx", "can_24.psa"} {
		p := open(t, file).Matrix()
		var out []linear.Entry
		for i := range p.NRows {
			cols, _ := p.Row(i)
			for _, j := range cols {
				if int(j) != i {
					out = append(out, e(i, int(j), -1), e(i, i, 1))
				}
			}
		}
		f := inspected(t, ones(linear.FromEntries(p.NRows, p.NRows, out), 17))
		expect(t, file+" singular", f.Singular, inspect.Yes, inspect.Proved)
		expect(t, file+" semidefinite", f.Semidefinite, inspect.Yes, inspect.Proved)
	}
}

// The samples say what is known of them; the facts must agree.
func TestSamples(t *testing.T) {
	type want struct {
		symmetric, definite, singular inspect.Answer
	}
	for name, w := range map[string]want{
		"plate": {inspect.Yes, inspect.Yes, inspect.No}, "plate:30,jump=1e4": {inspect.Yes, inspect.Yes, inspect.No},
		"frame": {inspect.Yes, inspect.Yes, inspect.No}, "seepage": {inspect.Yes, inspect.No, inspect.Yes},
		"duct": {inspect.No, inspect.Unknown, inspect.No}, "acoustics": {inspect.Yes, inspect.No, inspect.Unknown},
		"strut": {inspect.Yes, inspect.No, inspect.Unknown}, "feeder": {inspect.Yes, inspect.Yes, inspect.No},
		"strakos": {inspect.Yes, inspect.Yes, inspect.No}, "shift": {inspect.No, inspect.No, inspect.Unknown},
		"kershaw": {inspect.Yes, inspect.Yes, inspect.No}, "line": {inspect.Yes, inspect.Yes, inspect.No},
	} {
		s, err := samples.Build(name)
		if err != nil {
			t.Fatal(err)
		}
		f := inspected(t, s)
		expect(t, name+" symmetric", f.Symmetric, w.symmetric, inspect.Proved)
		expect(t, name+" definite", f.PositiveDefinite, w.definite, "")
		expect(t, name+" singular", f.Singular, w.singular, "")
		if w.definite != inspect.Unknown && f.PositiveDefinite.Certainty != inspect.Proved {
			t.Errorf("%s: %s is only %s", name, w.definite, f.PositiveDefinite.Certainty)
		}
	}
}

// A million unknowns: every fact in a moment, and no overflow of the picture.
func TestLarge(t *testing.T) {
	if testing.Short() {
		t.Skip("a million unknowns")
	}
	s, err := samples.Build("plate:1000")
	if err != nil {
		t.Fatal(err)
	}
	f := inspected(t, s)
	expect(t, "definite", f.PositiveDefinite, inspect.Yes, inspect.Proved)
	if f.N != 1e6 || f.StrictlyDominant != 4*1000-4 || math.IsNaN(f.RHSNorm) {
		t.Errorf("n %d, strict rows %d", f.N, f.StrictlyDominant)
	}
}

// Negative eigenvalues of open matrices, counted densely in NumPy (check
// values of the project).
func TestNegativeCountsOnOpenMatrices(t *testing.T) {
	for name, want := range map[string]float64{"hangGlider_2.mtx": 733, "ex14.rua": 900, "can_24.psa": 10, "bcsstk01.rsa": 0} {
		f := inspected(t, open(t, name))
		if f.NegativeCount.Value != want || (f.NegativeCount.Answer == inspect.Yes) != (want > 0) {
			t.Errorf("%s: %s, %g negative eigenvalues (%s), want %g", name, f.NegativeCount.Answer, f.NegativeCount.Value, f.NegativeCount.Why, want)
		}
	}
}
