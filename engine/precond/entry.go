// Package precond holds the preconditioners, one file each, and their
// catalogue. Each is built once, can be cancelled, and reports on itself.
package precond

import (
	"context"
	"fmt"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// Entry is one preconditioner of the catalogue.
type Entry struct {
	Name, Title string
	Source      string // the paper or book
	Params      []linear.Param
	Needs       linear.Has
	Assumes     linear.Assume // of A
	Fixed       bool          // one linear operator; false: only flexible solvers may use it
	Symmetric   bool          // M is symmetric if A is
	InUserUnits bool          // M is the user's own, for A as it stands: no preparations
	Exact       bool          // a direct solve
	Transposes  bool          // what Build returns is a linear.Transposer: M⁻ᵀ x
	// Estimate returns the memory M takes before anything is allocated, and
	// whether that is exact or an upper estimate.
	Estimate func(a *linear.CSR, v linear.Values) (bytes int64, exact bool)
	// Build builds M. It returns early with ctx.Err() when cancelled, and a
	// *Breakdown when M cannot be built; the notes are filled in either case.
	Build func(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error)
}

// Breakdown is the error of a factorisation that cannot go on.
type Breakdown struct {
	Method string  // such as "ilu:0"
	Row    int     // from 0; below 0 where it is no row of A
	Pivot  float64 // its value
	Why    string  // such as "zero pivot" or "missing diagonal entry"
}

// Error names the method, the row counted from 1 as files do, and the cause.
func (b *Breakdown) Error() string { return b.In(fmt.Sprintf("row %d", b.Row+1)) }

// In is Error with the row as its owner names it.
func (b *Breakdown) In(row string) string {
	if b.Row < 0 {
		return fmt.Sprintf("%s breaks down: %s (%.6g)", b.Method, b.Why, b.Pivot)
	}
	return fmt.Sprintf("%s breaks down in %s: %s (%.6g)", b.Method, row, b.Why, b.Pivot)
}
