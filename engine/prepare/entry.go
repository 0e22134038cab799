// Package prepare turns a system into another one that is easier to solve,
// with the way back: scaling, projection, and later reordering and matching.
package prepare

import (
	"context"

	"dwindle/engine/linear"
)

// Back is the way from a prepared system to the one it was made from.
// All slices have length n.
type Back interface {
	// Solution turns a solution of the prepared system into one of the
	// original: dst and x do not overlap.
	Solution(dst, x []float64)
	// Guess turns a guess for the original system into one for the prepared.
	Guess(dst, x []float64)
	// Row returns the original row of a prepared row.
	Row(i int) int
}

// Entry is one preparation of the catalogue.
type Entry struct {
	Name, Title string
	Source      string
	Params      []linear.Param
	Needs       linear.Has
	Scales      bool // residuals of the prepared system are in other units
	Projects    bool // the right-hand side is changed to its reachable part
	Rounds      bool // A or b is rounded anew: the solution moves in its last places
	// Estimate returns the memory the prepared system takes.
	Estimate func(a *linear.CSR, v linear.Values) int64
	Apply    func(ctx context.Context, s linear.System, v linear.Values) (linear.System, Back, error)
}
