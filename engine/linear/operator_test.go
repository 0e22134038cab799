package linear

import (
	"slices"
	"testing"
)

// counted is a wrapper that counts products; it shows what it wraps only
// through Unwrap.
type counted struct {
	op       Operator
	products int
}

func (c *counted) Apply(dst, x []float64)  { c.products++; c.op.Apply(dst, x) }
func (c *counted) Dims() (rows, cols int)  { return c.op.Dims() }
func (c *counted) Unwrap() any             { return c.op }
func (c *counted) Diagonal(dst []float64)  { c.op.(Diagonaler).Diagonal(dst) }
func doubled(dst, x []float64)             { Scale(dst, 2, x) }
func dims(op Operator) (rows, columns int) { return op.Dims() }

func TestAsLooksThroughWrappers(t *testing.T) {
	a := plateMatrix(3)
	c := &counted{op: a}
	if d, ok := As[Diagonaler](c); !ok || d != Diagonaler(c) {
		t.Error("the wrapper's own ability is not preferred")
	}
	if r, ok := As[Rower](c); !ok || r != Rower(a) {
		t.Error("the ability of what is wrapped is not found")
	}
	if _, ok := As[Rower](Func{N: 3, Do: doubled}); ok {
		t.Error("a matrix-free operator has no rows")
	}
}

func TestApplyDotWithoutFusion(t *testing.T) {
	f := Func{N: 3, Do: doubled}
	dst := make([]float64, 3)
	if s := ApplyDot(f, dst, []float64{1, 2, 3}); s != 28 || !slices.Equal(dst, []float64{2, 4, 6}) {
		t.Errorf("%g, %v", s, dst)
	}
	if s := ApplyDot(Identity{}, dst, []float64{1, 2, 3}); s != 14 || !slices.Equal(dst, []float64{1, 2, 3}) {
		t.Errorf("identity: %g, %v", s, dst)
	}
	if r, c := dims(f); r != 3 || c != 3 {
		t.Errorf("%d x %d", r, c)
	}
}

func TestSystem(t *testing.T) {
	a := plateMatrix(2)
	if s := (System{A: a}); s.Matrix() != a || s.N() != 4 || s.Delta() != 0 {
		t.Errorf("%+v", s)
	}
	if s := (System{A: Func{N: 2, Do: doubled}, Digits: 6}); s.Matrix() != nil || s.Delta() != 5e-6 {
		t.Errorf("matrix-free: %v, digits leave %g", s.Matrix(), s.Delta()) // half a unit of the sixth digit
	}
	if s := (System{A: a, Digits: 17}); s.Delta() != 0 {
		t.Error("17 digits determine a double")
	}
}

// gated wraps an operator and denies one of its abilities.
type gated struct{ counted }

func (g *gated) Lacks(ability any) bool { _, ok := ability.(*Rower); return ok }

func TestAsAsksTheGate(t *testing.T) {
	g := &gated{counted{op: plateMatrix(3)}}
	if _, ok := As[Rower](g); ok {
		t.Error("an ability that the wrapper denies was found")
	}
	if _, ok := As[Transposer](g); !ok {
		t.Error("an ability that the wrapper does not deny was not found")
	}
}
