package precond

import (
	"context"
	"errors"
	"fmt"
	"math"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
)

// exactParams are the parameters of the complete factorisations.
var exactParams = []linear.Param{
	{Name: "order", Kind: linear.Choice, Quiet: true, Choices: direct.Orderings, Meaning: "elimination order: best takes the cheaper of amd and nd"},
	{Name: "refine", Kind: linear.Int, Quiet: true, Default: 1, Min: 0, Max: 3, Meaning: "steps of iterative refinement in every solve"},
}

func ordering(v linear.Values) direct.Ordering { return direct.Ordering(v.Choice("order")) }

// refineBytes is the memory of refinement.
func refineBytes(n int, v linear.Values) int64 {
	if v.Int("refine") == 0 {
		return 0
	}
	return 16 * int64(n)
}

// predictRows is how many rows are ordered for a prediction of memory alone;
// more take longer than an answer may.
const predictRows = 3_000_000

// meshBytes is the memory of the factor of a plane mesh of n points in nested
// dissection, 31/4·n·log₂n entries (George 1973): a stand-in for the
// prediction where ordering takes too long.
func meshBytes(n int) int64 {
	return int64(8 * 7.75 * float64(n) * math.Log2(float64(n)))
}

// exact applies A⁻¹, and A⁻ᵀ.
type exact struct{ solver, transposed direct.Solver }

// newExact wraps the solvers with A and Aᵀ in their refinement. They may be
// the same.
func newExact(a *linear.CSR, solver, transposed direct.Solver, v linear.Values) *exact {
	steps := v.Int("refine")
	if steps == 0 {
		return &exact{solver, transposed}
	}
	fine := direct.Refine(a, solver, a.NRows, steps)
	if solver == transposed {
		return &exact{fine, fine}
	}
	return &exact{fine, fine.Beside(turned{a}, transposed)}
}

// turned applies the transpose.
type turned struct{ a *linear.CSR }

// Apply computes dst = Aᵀ x.
func (t turned) Apply(dst, x []float64) { t.a.ApplyT(dst, x) }

// Apply computes dst = A⁻¹ x.
func (e *exact) Apply(dst, x []float64) { e.solver.Solve(dst, x) }

// ApplyT computes dst = A⁻ᵀ x.
func (e *exact) ApplyT(dst, x []float64) { e.transposed.Solve(dst, x) }

// ApplyDot computes dst = A⁻¹ x and returns xᵀ dst.
func (e *exact) ApplyDot(dst, x []float64) float64 {
	e.Apply(dst, x)
	return linear.Dot(x, dst)
}

// broken turns the error of a factorisation into a *Breakdown where a pivot is
// at fault.
func broken(method string, err error) error {
	var p *direct.PivotError
	if errors.As(err, &p) {
		return &Breakdown{Method: method, Row: p.Row, Pivot: p.Pivot, Why: p.Why}
	}
	return err
}

// symmetricOf returns the matrix of a system for a method that reads one
// triangle of it, and refuses one that is not symmetric to rounding: a factor
// of half of it would be of another matrix.
func symmetricOf(ctx context.Context, s linear.System, method string) (*linear.CSR, error) {
	a, err := entriesOf(s, method)
	if err != nil {
		return nil, err
	}
	if err := ctx.Err(); err != nil || a.ExactlySymmetric() {
		return a, err
	}
	same := linear.NewMirror(a)
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			v, w := vals[k], a.At(int(j), i)
			if !same.Same(i, int(j), v, w) {
				return nil, fmt.Errorf("%s needs a symmetric matrix: entries (%d,%d) and (%d,%d) are %.6g and %.6g",
					method, i+1, j+1, j+1, i+1, v, w)
			}
		}
	}
	return a, nil
}
