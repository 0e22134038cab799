package inspect

import (
	"dwindle/engine/linear"
	"dwindle/engine/prepare"
)

// Guess is what is known of a starting guess x₀ before any trial.
type Guess struct {
	Residual float64 // ‖b−Ax₀‖₂/‖b‖₂
	Scale    float64 // the multiple of x₀ with the smallest residual
	Scaled   float64 // that residual, relative to ‖b‖₂
}

// guess measures the starting guess, where there is one and b is not zero.
func (l *look) guess() error {
	if l.s.Guess == nil || l.f.ZeroRHS {
		return nil
	}
	r := make([]float64, l.s.N())
	g := Guess{Residual: linear.Residual(r, l.s.A, l.s.Guess, l.s.B) / l.f.RHSNorm}
	g.Scale, g.Scaled = prepare.BestMultiple(l.s)
	l.f.Guess = &g
	return nil
}
