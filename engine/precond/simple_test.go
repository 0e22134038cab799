package precond

import (
	"context"
	"errors"
	"slices"
	"strconv"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

func formatted(x float64) string { return strconv.FormatFloat(x, 'f', -1, 64) }

// M = (D+ωL) D⁻¹ (D+ωU) / (ω(2−ω)), multiplied out densely.
func TestSSOR(t *testing.T) {
	for _, omega := range []float64{0.3, 1, 1.7} {
		a := unsymmetric(30)
		m, _ := made(t, a, "ssor:"+formatted(omega))
		d := dense(a)
		low, up, inv := mat.NewDense(30, 30, nil), mat.NewDense(30, 30, nil), mat.NewDense(30, 30, nil)
		for i := 0; i < 30; i++ {
			low.Set(i, i, d.At(i, i))
			up.Set(i, i, d.At(i, i))
			inv.Set(i, i, 1/d.At(i, i)/omega/(2-omega))
			for j := 0; j < i; j++ {
				low.Set(i, j, omega*d.At(i, j))
				up.Set(j, i, omega*d.At(j, i))
			}
		}
		var p mat.Dense
		p.Product(low, inv, up, inverse(m, 30))
		for i := 0; i < 30; i++ {
			p.Set(i, i, p.At(i, i)-1)
		}
		near(t, "‖M·M⁻¹ − I‖", mat.Norm(&p, 2), 0, 1e-13)
	}
}

func TestJacobi(t *testing.T) {
	m, notes := made(t, fromRows([][]float64{{2, 1}, {1, -4}}), "jacobi")
	y := make([]float64, 2)
	m.Apply(y, []float64{2, 2})
	if y[0] != 1 || y[1] != -0.5 || notes.Definite || notes.MinPivot != 2 || notes.MaxPivot != 4 {
		t.Errorf("y %v, notes %+v", y, notes)
	}
	_, _, err := tryMake(t, fromRows([][]float64{{2, 1}, {1, 0}}), "jacobi")
	broke(t, err, 1)
	_, _, err = tryMake(t, fromRows([][]float64{{2, 1}, {1, 0}}), "ssor")
	broke(t, err, 1)
	if _, _, err := tryMake(t, linear.Func{N: 2}, "jacobi"); err == nil {
		t.Error("a matrix-free operator has no diagonal")
	}
}

func TestNone(t *testing.T) {
	m, _ := made(t, plate(2), "none")
	if _, ok := linear.As[linear.Identity](m); !ok {
		t.Error("none is not the identity")
	}
}

// Every entry: memory as estimated, rᵀz as the plain dot product, M⁻¹ as
// symmetric as claimed, and a build that can be cancelled.
func TestCatalogue(t *testing.T) {
	a := plate(70)
	for _, e := range Catalogue {
		if e.InUserUnits {
			continue // needs files: see the session's tests
		}
		for _, name := range forms(e) {
			t.Run(name, func(t *testing.T) { conforms(t, e, name, a) })
		}
	}
}

// forms are an entry at its defaults and, where it has them, with factors in
// single precision.
func forms(e Entry) []string {
	if slices.ContainsFunc(e.Params, func(p linear.Param) bool { return p.Name == storeParam.Name }) {
		return []string{e.Name, e.Name + ":store=single"}
	}
	return []string{e.Name}
}

func conforms(t *testing.T, e Entry, name string, a *linear.CSR) {
	_, v := lookup(t, name)
	m, notes := made(t, a, name)
	if bytes, exact := e.Estimate(a, v); exact && bytes != notes.Bytes {
		t.Errorf("estimate %d bytes, notes %d", bytes, notes.Bytes)
	}
	checkDot(t, m, a.NRows)
	checkSymmetry(t, m, a.NRows, notes.Symmetric, notes.Definite)
	if e.Needs&linear.NeedsEntries == 0 {
		return
	}
	ctx, cancel := context.WithCancel(context.Background())
	cancel()
	if _, _, err := e.Build(ctx, parted(a), v, nil); !errors.Is(err, context.Canceled) {
		t.Errorf("a cancelled build gives %v", err)
	}
	seen := -1.0
	_, _, err := e.Build(context.Background(), parted(a), v, func(f float64) { seen = max(seen, f) })
	if err != nil || seen <= 0 || seen >= 1 {
		t.Errorf("progress reached %g, error %v", seen, err)
	}
	if _, _, err := e.Build(context.Background(), linear.System{A: linear.Func{N: 3}}, v, nil); err == nil {
		t.Error("a matrix-free operator is accepted")
	}
}

func checkDot(t *testing.T, m linear.Applier, n int) {
	t.Helper()
	x, y, z := make([]float64, n), make([]float64, n), make([]float64, n)
	linear.Uniform(x, 3)
	m.Apply(y, x)
	near(t, "ApplyDot", linear.ApplyDot(m, z, x), linear.Dot(x, y), 1e-14)
	for i := range y {
		if y[i] != z[i] {
			t.Fatalf("ApplyDot gives another vector at %d", i)
		}
	}
}

func checkSymmetry(t *testing.T, m linear.Applier, n int, symmetric, definite bool) {
	t.Helper()
	u, v, mu, mv := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	linear.Uniform(u, 1)
	linear.Uniform(v, 2)
	m.Apply(mu, u)
	m.Apply(mv, v)
	if symmetric {
		near(t, "vᵀM⁻¹u", linear.Dot(v, mu), linear.Dot(u, mv), 1e-12)
	}
	if definite && !(linear.Dot(u, mu) > 0) {
		t.Error("uᵀM⁻¹u is not positive")
	}
}

func TestSymmetric(t *testing.T) {
	if !symmetric(plate(6)) || !symmetric(kershaw()) {
		t.Error("a symmetric matrix is called unsymmetric")
	}
	for _, rows := range [][][]float64{
		{{1, 2}, {3, 1}}, {{1, 2}, {0, 1}}, {{1, 0}, {2, 1}}, {{1, 0, 2}, {2, 1, 0}, {0, 0, 1}},
	} {
		if symmetric(fromRows(rows)) {
			t.Errorf("%v is called symmetric", rows)
		}
	}
}

func TestLookup(t *testing.T) {
	if _, ok := Lookup("no-such"); ok {
		t.Error("found what is not there")
	}
}
