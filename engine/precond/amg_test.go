package precond

import (
	"context"
	"errors"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// kinds are the hierarchies every property is tested on.
var kinds = []string{"amg", "amg:classical", "amg:aggregation,cycle=v", "amg:classical,cycle=w", "amg:sweeps=2", "amg:classical,sweeps=3"}

// The counts stay level as the mesh is refined, and low where coefficients
// jump or couplings differ by direction.
func TestAMGCounts(t *testing.T) {
	for _, kind := range kinds[:2] {
		for _, c := range []struct {
			spec string
			most int
		}{
			{"sample:plate:64", 12}, {"sample:plate:128", 12}, {"sample:plate:256", 12},
			{"sample:plate:300,jump=1e6", 24}, {"sample:plate:150,jump=1e-6", 24},
			{"sample:plate:300,aniso=1000", 15}, {"sample:plate:150,aniso=1e-3", 15},
			{"sample:seepage:100", 20},
		} {
			a, b := sampled(t, c.spec)
			m, _ := made(t, a, kind)
			if k := steps(m, a, b, 1e-8); k > c.most {
				t.Errorf("%s on %s: %d iterations, want at most %d", kind, c.spec, k, c.most)
			}
		}
		a := cube(30)
		m, _ := made(t, a, kind)
		if k := steps(m, a, constants(a.NRows), 1e-8); k > 13 {
			t.Errorf("%s on a cube: %d iterations", kind, k)
		}
	}
}

// A symmetric cycle around a coarse correction that is a projection never
// overshoots: M⁻¹ is symmetric and the eigenvalues of M⁻¹A lie in (0, 1]
// (Xu and Zikatanov, J. Amer. Math. Soc. 15 (2002) 573–597). Symmetry is held
// to 1e-12 of the largest entry.
func TestAMGSpectrum(t *testing.T) {
	jump, _ := sampled(t, "sample:plate:18,jump=1e4")
	aniso, _ := sampled(t, "sample:plate:18,aniso=50")
	feeder, _ := sampled(t, "sample:feeder:320")
	for k, a := range []*linear.CSR{plate(18), cube(7), jump, aniso, feeder} {
		some := kinds
		if k > 0 {
			some = kinds[:2]
		}
		for _, kind := range some {
			m, notes := made(t, a, kind)
			if len(notes.Levels) < 2 || !notes.Symmetric {
				t.Errorf("%s: %d levels", kind, len(notes.Levels))
			}
			inv := inverse(m, a.NRows)
			var skew mat.Dense
			skew.Sub(inv, inv.T())
			if s := mat.Max(&skew); !(s <= 1e-12*mat.Max(inv)) {
				t.Errorf("%s: M⁻¹ is unsymmetric by %g of %g", kind, s, mat.Max(inv))
			}
			low, high := pencil(t, inv, dense(a))
			if !(low > 0.02 && high <= 1+1e-10) {
				t.Errorf("%s: eigenvalues of M⁻¹A from %g to %.15g", kind, low, high)
			}
		}
	}
}

// Every coarse operator is Pᵀ A P, and R is Pᵀ; gonum's dense product is the
// oracle.
func TestAMGGalerkin(t *testing.T) {
	for _, kind := range kinds[:2] {
		m, _ := made(t, plate(26), kind)
		levels := m.(*cycle).levels
		if len(levels) < 2 {
			t.Fatalf("%s: %d levels", kind, len(levels))
		}
		for k, l := range levels[:len(levels)-1] {
			p := dense(l.p)
			var want, diff mat.Dense
			want.Product(p.T(), dense(l.a), p)
			diff.Sub(dense(levels[k+1].a), &want)
			if e := mat.Norm(&diff, 2); !(e <= 1e-13*mat.Norm(&want, 2)) {
				t.Errorf("%s, level %d: ‖A_c − PᵀAP‖ = %g", kind, k, e)
			}
			diff.Reset()
			diff.Sub(dense(l.r).T(), p)
			if mat.Norm(&diff, 2) != 0 {
				t.Errorf("%s, level %d: R is not Pᵀ", kind, k)
			}
		}
	}
}

// The cycle is the same bits for any number of threads, over several blocks
// and levels.
func TestAMGThreads(t *testing.T) {
	defer linear.SetThreads(1)
	a, b := sampled(t, "sample:plate:150,jump=1e3")
	for _, kind := range kinds[:2] {
		var want []float64
		for _, threads := range []int{1, 2, 3} {
			linear.SetThreads(threads)
			m, _ := made(t, a, kind)
			x := make([]float64, len(b))
			m.Apply(x, b)
			if got := testing.AllocsPerRun(3, func() { m.Apply(x, b) }); got > 0 {
				t.Errorf("%s, %d threads: a cycle allocates %g times", kind, threads, got)
			}
			if want == nil {
				want = x
			}
			for i := range x {
				if math.Float64bits(x[i]) != math.Float64bits(want[i]) {
					t.Fatalf("%s: %d threads give %v in row %d, one gives %v", kind, threads, x[i], i, want[i])
				}
			}
		}
	}
}

// A singular, consistent system keeps its null vector through the levels; the
// one zero pivot is told.
func TestAMGSemidefinite(t *testing.T) {
	a, b := sampled(t, "sample:seepage:40")
	for _, kind := range kinds[:2] {
		m, notes := made(t, a, kind)
		if notes.Replaced != 1 || len(notes.Remarks) != 1 {
			t.Errorf("%s: %d pivots replaced, remarks %q", kind, notes.Replaced, notes.Remarks)
		}
		if k := steps(m, a, b, 1e-10); k > 22 {
			t.Errorf("%s: %d iterations", kind, k)
		}
	}
}

// The estimate bounds the memory that the notes tell.
func TestAMGEstimate(t *testing.T) {
	for _, spec := range []string{"sample:plate:100", "sample:plate:100,aniso=1000", "sample:plate:100,aniso=12",
		"sample:seepage:64", "sample:feeder:5000", "sample:line:5000"} {
		a, _ := sampled(t, spec)
		checkEstimate(t, spec, a)
	}
	checkEstimate(t, "cube", cube(20))
}

func checkEstimate(t *testing.T, what string, a *linear.CSR) {
	t.Helper()
	for _, kind := range kinds[:2] {
		e, v := lookup(t, kind)
		_, notes := made(t, a, kind)
		if most, exact := e.Estimate(a, v); exact || notes.Bytes > most {
			t.Errorf("%s on %s: %d bytes, estimated %d", kind, what, notes.Bytes, most)
		}
		entries := int64(0)
		for _, l := range notes.Levels {
			entries += l.Entries
		}
		if entries != notes.Entries || math.Abs(notes.Fill*float64(a.Entries())-float64(entries)) > 0.5 {
			t.Errorf("%s on %s: %d entries, fill %g, levels %v", kind, what, notes.Entries, notes.Fill, notes.Levels)
		}
	}
}

// What is not definite is refused with the reason; what is not symmetric is
// replaced by its symmetric part.
func TestAMGOutsideItsTheory(t *testing.T) {
	var b *Breakdown
	wave, _ := sampled(t, "sample:acoustics:60")
	for _, kind := range kinds[:2] {
		if _, _, err := tryMake(t, wave, kind); !errors.As(err, &b) || !(b.Pivot < 0) {
			t.Errorf("%s on an indefinite matrix: %v", kind, err)
		}
		_, _, err := tryMake(t, fromRows([][]float64{{1, 0}, {0, -1}}), kind)
		broke(t, err, 1)
		duct, _ := sampled(t, "sample:duct")
		m, notes := made(t, duct, kind)
		part, plain := made(t, symmetricPart(duct), kind)
		if len(notes.Remarks) != 1 || len(plain.Remarks) != 0 {
			t.Errorf("%s: remarks %q and %q", kind, notes.Remarks, plain.Remarks)
		}
		x, y, z := constants(duct.NRows), make([]float64, duct.NRows), make([]float64, duct.NRows)
		m.Apply(y, x)
		part.Apply(z, x)
		for i := range y {
			if y[i] != z[i] {
				t.Fatalf("%s: M is not that of the symmetric part", kind)
			}
		}
	}
}

// Rows that couple to nothing, and matrices that cannot be coarsened, are
// left to the smoother.
func TestAMGWithoutCouplings(t *testing.T) {
	var e []linear.Entry
	for i := 0; i < 900; i++ {
		e = append(e, linear.Entry{I: i, J: i, V: float64(i + 1)})
	}
	a := linear.FromEntries(900, 900, e)
	for _, kind := range kinds[:2] {
		m, notes := made(t, a, kind)
		if k := steps(m, a, constants(900), 1e-12); k > 1 || len(notes.Remarks) != 1 {
			t.Errorf("%s: %d iterations on a diagonal matrix, remarks %q", kind, k, notes.Remarks)
		}
	}
}

// A diagonal entry that its weak couplings eat up does not spoil the
// prolongation. The two hubs alone are coupled strongly.
func TestAMGWeakTogether(t *testing.T) {
	const n = 402
	e := []linear.Entry{{I: 0, J: 0, V: 1e6}, {I: 1, J: 1, V: 1e6}, {I: 0, J: 1, V: -5e5}, {I: 1, J: 0, V: -5e5}}
	for i := 2; i < n; i++ {
		e = append(e, linear.Entry{I: i, J: i, V: 1})
		for hub := 0; hub < 2; hub++ {
			e = append(e, linear.Entry{I: i, J: hub, V: -0.5}, linear.Entry{I: hub, J: i, V: -0.5})
		}
	}
	a := linear.FromEntries(n, n, e)
	for _, kind := range kinds[:2] {
		m, _ := made(t, a, kind)
		if k := steps(m, a, constants(n), 1e-8); k > 12 {
			t.Errorf("%s: %d iterations", kind, k)
		}
	}
}

// A build is cancelled between levels, too.
func TestAMGCancelled(t *testing.T) {
	e, v := lookup(t, "amg")
	ctx, cancel := context.WithCancel(context.Background())
	_, _, err := e.Build(ctx, linear.System{A: plate(60)}, v, func(float64) { cancel() })
	if !errors.Is(err, context.Canceled) {
		t.Errorf("cancelled on the way: %v", err)
	}
}
