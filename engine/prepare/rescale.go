package prepare

import (
	"context"
	"errors"

	"dwindle/engine/linear"
)

var rescaleEntry = Entry{
	Name:     "rescale",
	Title:    "start from the best multiple of the starting guess",
	Source:   "the least-squares multiple of one vector: b'Ax0/||Ax0||^2",
	Estimate: func(a *linear.CSR, _ linear.Values) int64 { return 16 * int64(a.NRows) },
	Apply:    applyRescale,
}

// applyRescale replaces the starting guess x₀ by ξ x₀ with the smallest
// residual. A and b are not changed.
func applyRescale(ctx context.Context, s linear.System, _ linear.Values) (linear.System, Back, error) {
	if s.Guess == nil {
		return s, nil, errors.New("rescale needs a starting guess: --guess FILE")
	}
	scale, _ := BestMultiple(s)
	guess := make([]float64, len(s.Guess))
	for i, x := range s.Guess {
		guess[i] = scale * x
	}
	s.Guess = guess
	return s, same{}, ctx.Err()
}

// BestMultiple returns ξ = bᵀAx₀/‖Ax₀‖² of a system with a starting guess, and
// ‖b − ξAx₀‖/‖b‖, which is never above 1; 0 and 1 where A x₀ = 0.
func BestMultiple(s linear.System) (scale, residual float64) {
	ax := make([]float64, s.N())
	s.A.Apply(ax, s.Guess)
	size, b := linear.Dot(ax, ax), linear.Norm2(s.B)
	if size == 0 || b == 0 {
		return 0, 1
	}
	scale = linear.Dot(s.B, ax) / size
	linear.Lin(ax, 1, s.B, -scale, ax)
	return scale, linear.Norm2(ax) / b
}
