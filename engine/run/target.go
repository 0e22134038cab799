package run

import "math"

// StopRule names the rule that decides what converged means.
type StopRule string

// The rules: ‖r‖₂ ≤ tol·‖b‖₂, ≤ tol·‖r₀‖₂, backward error ≤ tol, ‖r‖₂ ≤ tol.
const (
	StopRHS      StopRule = "rhs"
	StopInitial  StopRule = "initial"
	StopBackward StopRule = "backward"
	StopAbsolute StopRule = "absolute"
)

// Target is the rule with its tolerance.
type Target struct {
	Rule StopRule
	Tol  float64
}

// scales are the sizes a residual is held against.
type scales struct {
	b, r0   float64 // ‖b‖₂, ‖r₀‖₂, in the norm at hand
	a, x    float64 // ‖A‖, ‖x‖ for the backward error, in the maximum norm
	bMax, r float64 // ‖b‖∞ and ‖r‖∞
}

// relative returns the number that is held against the tolerance, for a
// residual norm r.
func (t Target) relative(r float64, s scales) float64 {
	switch t.Rule {
	case StopInitial:
		return over(r, s.r0)
	case StopAbsolute:
		return r
	case StopBackward:
		return over(s.r, s.a*s.x+s.bMax)
	}
	return over(r, s.b)
}

// over is a/b with 0/0 = 0.
func over(a, b float64) float64 {
	if a == 0 {
		return 0
	}
	if b == 0 {
		return math.Inf(1)
	}
	return a / b
}
