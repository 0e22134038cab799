package inspect

import (
	"math"

	"dwindle/engine/spectrum"
)

// restore finds the smallest shift of the diagonal that makes an indefinite
// symmetric A with a positive diagonal positive definite, and the rows that
// carry the direction which needs it.
func (e *exam) restore() error {
	f := e.f
	if !e.symmetric || e.scaled == nil || f.PositiveDefinite.Answer != No || f.Semidefinite.Answer == Yes ||
		f.NegativeCount.Answer != Yes {
		return nil
	}
	d := byDiagonal(e.a)
	if d == nil {
		return nil
	}
	p, ok, err := e.mostNegative(e.see("", d, d, nil))
	if err != nil || !ok || !(p.Value < 0) {
		return err
	}
	r := &Restore{Shift: -p.Value, Bound: p.Bound, Of: "diag A"}
	var t top
	for i, x := range p.Vector {
		t.add(i, x*x)
	}
	for k, row := range t.rows {
		if t.values[k] >= 0.01*t.values[0] {
			r.Rows, r.Shares = append(r.Rows, row), append(r.Shares, t.values[k])
		}
	}
	e.out.Restore = r
	return nil
}

// mostNegative is the lowest eigenpair of a view: by the inverse where only a
// few eigenvalues are negative, so that even a tiny one is sharp; else by
// products.
func (e *exam) mostNegative(v *view) (spectrum.Pair, bool, error) {
	if k := int(e.f.NegativeCount.Value); v.invertible() && k <= 4 {
		out, err := e.ends(v.order(), v.inverse, k, 0, e.solveWork(), endProducts)
		if err != nil || len(out.Low) < k || !out.Settled {
			return spectrum.Pair{}, false, err
		}
		p := out.Low[k-1]
		p.Value, p.Bound = inverted(p)
		return p, p.Value < 0, nil
	}
	out, err := e.ends(v.order(), v.m.Apply, 1, 0, e.product(), bareProducts)
	if err != nil || len(out.Low) == 0 {
		return spectrum.Pair{}, false, err
	}
	p := out.Low[0]
	return p, p.Bound <= 0.1*math.Abs(p.Value), nil
}
