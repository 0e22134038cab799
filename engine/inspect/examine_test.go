package inspect_test

import (
	"context"
	"math"
	"reflect"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/samples"
)

// studied takes both looks at a system, the second within the budget.
func studied(t *testing.T, s linear.System, b inspect.Budget) *inspect.Facts {
	t.Helper()
	f, err := inspect.Examine(context.Background(), s, inspected(t, s), b, nil)
	if err != nil {
		t.Fatal(err)
	}
	if f.Study == nil {
		t.Fatal("no study")
	}
	return f
}

func studiedSample(t *testing.T, spec string) *inspect.Study {
	t.Helper()
	s, err := samples.Build(spec)
	if err != nil {
		t.Fatal(err)
	}
	if s.B == nil {
		s.B = ones(s.Matrix(), 17).B
	}
	return studied(t, s, inspect.Quick).Study
}

func within(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Abs(want)) {
		t.Errorf("%s: %.8g, want %.8g within %g", what, got, want, tol)
	}
}

// Conditions of A, of A equilibrated and of A scaled by its diagonal, computed
// once densely (NumPy) from the same files; 0: none is given. reorientation_1
// raw is only known to exceed 1e18.
func TestConditionsOfOpenMatrices(t *testing.T) {
	for _, c := range []struct {
		file             string
		raw, equil, diag float64
	}{
		{"494_bus.mtx", 2.415411017e6, 78952.6, 78952.6},
		{"bcsstk13.mtx.gz", 1.0954810e10, 0, 5.63637e5},
		{"bcsstk16.mtx.gz", 4.943165634e9, 0, 802.049},
		{"bcsstk01.rsa", 8.823362627e5, 0, 1360.707},
		{"LFAT5.mtx", 1.430919093e8, 0, 151.3146},
		{"arc130.rua", 6.054211e10, 22.96, 0},
		{"fs_183_1.mtx", 2.1931e13, 0, 0},
		{"bfwa62.mtx", 553.0615, 0, 0},
		{"west0067.rua", 130.217, 0, 0},
		{"west0479.mtx", 3.2524e11, 1.75e6, 0},
		{"olm1000.mtx", 1.487221882e6, 0, 0},
	} {
		s := studied(t, open(t, c.file), inspect.Quick).Study
		for _, x := range []struct {
			of   *inspect.Spectrum
			want float64
		}{{s.Raw, c.raw}, {s.Equilibrated, c.equil}, {s.Jacobi, c.diag}} {
			if x.want == 0 {
				continue
			}
			if x.of == nil || x.of.Certainty != inspect.Measured {
				t.Errorf("%s: not measured: %+v", c.file, x.of)
				continue
			}
			within(t, c.file+", condition of "+x.of.Of, x.of.Condition, x.want, 0.05)
		}
	}
}

// The parts of the study that single systems are known for.
func TestReorientationIsScaling(t *testing.T) {
	s := studied(t, open(t, "reorientation_1.mtx"), inspect.Quick).Study
	if !(s.Raw.Condition > 1e18) || s.Equilibrated.Condition < 1e6 || s.Equilibrated.Condition > 4e6 {
		t.Errorf("condition %g, equilibrated %g; raw above 1e18, about 2e6 (NumPy)", s.Raw.Condition, s.Equilibrated.Condition)
	}
}

// bcsstk16 without its 74 decoupled rows: 1.58947088e6 to 4.94316563e9 (dense,
// NumPy).
func TestBcsstk16WithoutSingletons(t *testing.T) {
	s := studied(t, open(t, "bcsstk16.mtx.gz"), inspect.Quick).Study
	within(t, "smallest", s.Rest.Smallest, 1.58947088e6, 1e-4)
	within(t, "largest", s.Rest.Largest, 4.94316563e9, 1e-3)
	within(t, "condition", s.Rest.Condition, 3109.944, 0.01)
	if s.Block == nil || s.Block.Size != 3 {
		t.Errorf("block %+v: nodes have 3 unknowns", s.Block)
	}
	for _, l := range s.Lines {
		if l.Kind != "singleton" || l.Count != 74 || l.Value != 1 {
			t.Errorf("single rows %+v", l)
		}
	}
}

// Condition numbers in the 1-norm: the estimate by Hager and Higham is exact
// on these (inverses computed in NumPy).
func TestOneNormConditions(t *testing.T) {
	for file, want := range map[string]float64{"bcsstk01.rsa": 1.597600876e6, "arc130.rua": 1.079870808e10, "west0479.mtx": 1.4222240e12} {
		within(t, file, studied(t, open(t, file), inspect.Quick).Study.Raw.Condition1, want, 1e-4)
	}
}

// cryg2500 has one direction that stands apart by five orders or more, and is
// Departures from normality, from dense eigenvalues (NumPy): olm1000 0.994,
// by balancing alone; arc130 about 1.
func TestDeparturesFromNormality(t *testing.T) {
	for file, want := range map[string]float64{"olm1000.mtx": 0.994, "arc130.rua": 1} {
		s := studied(t, open(t, file), inspect.Quick).Study
		within(t, file, s.Normality.Henrici, want, 0.002)
		if !s.Normality.FieldHoldsZero {
			t.Errorf("%s: field %g to %g", file, s.Normality.FieldMin, s.Normality.FieldMax)
		}
	}
	s := studied(t, open(t, "bfwa62.mtx"), inspect.Quick).Study
	within(t, "bfwa62, smallest eigenvalue of (A+A')/2 (NumPy)", s.Normality.FieldMin, -0.4397, 1e-3)
}

// The plate's spectrum is closed form: condition cot²(π/(2(n+1))); its
// iterations grow as the root of the unknowns, and its pattern is a plane's.
func TestStudyOfThePlate(t *testing.T) {
	for _, spec := range []string{"plate", "plate:200"} {
		n := map[string]float64{"plate": 60, "plate:200": 200}[spec]
		s := studiedSample(t, spec)
		within(t, spec, s.Raw.Condition, math.Pow(math.Tan(math.Pi/(2*(n+1))), -2), 0.05)
		within(t, spec+" scaled", s.Jacobi.Condition, math.Pow(math.Tan(math.Pi/(2*(n+1))), -2), 0.05)
		if !s.Couplings.Mesh || math.Abs(s.Couplings.Dimension-2) > 0.15 || s.Couplings.OneWay > 0 || s.Couplings.Jump != 1 {
			t.Errorf("%s: couplings %+v", spec, s.Couplings)
		}
		if s.Growth == nil || math.Abs(s.Growth.Exponent-0.5) > 0.05 || len(s.Growth.Unknowns) < 3 {
			t.Errorf("%s: growth %+v", spec, s.Growth)
		}
	}
	if c := studiedSample(t, "plate:60,aniso=1e3").Couplings; c.OneWay < 0.95 || math.Abs(c.Ratio-1000) > 1 {
		t.Errorf("anisotropy %+v", c)
	}
	if c := studiedSample(t, "plate:60,jump=1e4").Couplings; c.Jump < 1e3 || c.OneWay > 0.05 || len(c.JumpRows) != 2 {
		t.Errorf("jump %+v", c)
	}
}

// All eigenvalues are counted, and the estimate of their density agrees with
// the closed form: 4 sin² + 4 sin² below a value, on a grid of 60 x 60.
func TestDensityOfThePlate(t *testing.T) {
	s := studiedSample(t, "plate")
	all, below, want := 0.0, 0.0, 0.0
	for _, b := range s.Density {
		all += b.Count
		if b.To <= 1 {
			below += b.Count
		}
	}
	edge := 0.0
	for _, b := range s.Density {
		if b.To <= 1 {
			edge = b.To
		}
	}
	for p := 1; p <= 60; p++ {
		for q := 1; q <= 60; q++ {
			if 4-2*math.Cos(float64(p)*math.Pi/61)-2*math.Cos(float64(q)*math.Pi/61) < edge {
				want++
			}
		}
	}
	within(t, "all", all, 3600, 1e-9)
	within(t, "below the edge", below, want, 0.1)
}

// The frame without supports has the three motions of a plane; with its hanger
// With coordinates the motions are named: two translations and a rotation of
// Values fixed by replacing rows are located, and nothing else is asymmetric.
func TestReplacedRowsAreLocated(t *testing.T) {
	s, err := samples.Build("plate:12")
	if err != nil {
		t.Fatal(err)
	}
	var out []linear.Entry
	a := s.Matrix()
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if i >= 5 || int(j) == i {
				out = append(out, e(i, int(j), vals[k]))
			}
		}
	}
	l := studied(t, ones(linear.FromEntries(144, 144, out), 17), inspect.Quick).Study.Lopsided
	if l == nil || l.Identity != 5 || !l.OnlyThem || !reflect.DeepEqual(l.IdentityRows, []int{0, 1, 2, 3, 4}) {
		t.Errorf("%+v", l)
	}
	if l := studiedSample(t, "duct").Lopsided; l == nil || l.OnlyThem || l.Identity != 0 || l.Count != 1600 {
		t.Errorf("duct: %+v", l)
	}
}

// The shift that makes A + s·diag A definite is the smallest eigenvalue of the
// scaled matrix, turned round: of the closed form for acoustics, and found to
// the last digits where it is tiny.
func TestRestoringShift(t *testing.T) {
	s, err := samples.Build("strut")
	if err != nil {
		t.Fatal(err)
	}
	f := studied(t, s, inspect.Quick)
	shift := f.Study.Restore.Shift
	for by, want := range map[float64]inspect.Answer{1.001: inspect.Yes, 0.999: inspect.No} {
		a := s.Matrix()
		d := make([]float64, a.NRows)
		a.Diagonal(d)
		var out []linear.Entry
		for i := range a.NRows {
			cols, vals := a.Row(i)
			for k, j := range cols {
				out = append(out, e(i, int(j), vals[k]))
			}
			out = append(out, e(i, i, by*shift*d[i]))
		}
		g := inspected(t, ones(linear.FromEntries(a.NRows, a.NRows, out), 17))
		expect(t, "shifted", g.PositiveDefinite, want, inspect.Proved)
	}
	if s := studiedSample(t, "plate"); s.Restore != nil {
		t.Errorf("a definite system needs no shift: %+v", s.Restore)
	}
}

// The study of one system is the same bit by bit for any number of threads,
// keeps to its budget of work, and does not change the facts it is given.
func TestStudyRepeats(t *testing.T) {
	defer linear.SetThreads(linear.Threads())
	linear.SetThreads(1)
	one := studiedSample(t, "plate:40,jump=1e3")
	linear.SetThreads(2)
	if two := studiedSample(t, "plate:40,jump=1e3"); one.Raw.Condition != two.Raw.Condition || !reflect.DeepEqual(one.Growth, two.Growth) {
		t.Errorf("condition %g and %g, growth %+v and %+v", one.Raw.Condition, two.Raw.Condition, one.Growth, two.Growth)
	}
	s, _ := samples.Build("duct")
	f := inspected(t, s)
	if g, err := inspect.Examine(context.Background(), s, f, inspect.Budget{}, nil); err != nil || f.Study != nil || g.Study == nil || g.Study.Raw != nil {
		t.Errorf("a budget of nothing: %v, %+v", err, g.Study)
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, err := inspect.Examine(ctx, s, f, inspect.Quick, nil); err == nil {
		t.Error("a cancelled study is no error")
	}
}

// The free directions of a singular nonsymmetric matrix are as many as its rank

// Rows that stand alone in the middle of the numbering do not stop growth from
// being measured on the mesh about them.
func TestGrowthBesideSingletons(t *testing.T) {
	s, err := samples.Build("plate:40")
	if err != nil {
		t.Fatal(err)
	}
	a := s.Matrix()
	moved := func(i int) int {
		if i < 800 {
			return i
		}
		return i + 5
	}
	var out []linear.Entry
	for i := range 5 {
		out = append(out, e(800+i, 800+i, 1))
	}
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			out = append(out, e(moved(i), moved(int(j)), vals[k]))
		}
	}
	g := studied(t, ones(linear.FromEntries(1605, 1605, out), 17), inspect.Quick).Study.Growth
	if g == nil || math.Abs(g.Exponent-0.5) > 0.08 {
		t.Errorf("%+v", g)
	}
}
