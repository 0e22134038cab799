package run

import (
	"testing"
	"time"

	"dwindle/engine/linear"
)

// counting counts the products with it.
type counting struct {
	*linear.CSR
	products int
}

func (c *counting) Apply(dst, x []float64) {
	c.products++
	c.CSR.Apply(dst, x)
}

func (c *counting) ApplyDot(dst, x []float64) float64 {
	c.Apply(dst, x)
	return linear.Dot(x, dst)
}

// Before the first trial the system is multiplied with, on nobody's account.
func TestWarmingUpIsChargedToNobody(t *testing.T) {
	s := sample(t, "plate:10")
	a := &counting{CSR: s.Matrix()}
	s.A = a
	list := finish(t, s, limits(1e-8, 500), ticking(time.Millisecond), "cg+none", "cg+none")
	first, second := list[0], list[1]
	if first.Products != second.Products || first.SetupTime != second.SetupTime || first.OwnTime != second.OwnTime ||
		first.TrueResidual != second.TrueResidual {
		t.Errorf("first %+v, second %+v", first, second)
	}
	b := NewBench(s, limits(1e-8, 500), 0, ticking(time.Millisecond))
	m, err := Parse("cg+none")
	if err != nil {
		t.Fatal(err)
	}
	b.Add(m)
	before := a.products
	b.warm(t.Context())
	if got := a.products - before; got < warmSteps {
		t.Errorf("%d products to warm up", got)
	}
}
