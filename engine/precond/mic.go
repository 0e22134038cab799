package precond

import (
	"context"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var micEntry = Entry{
	Name: "mic", Title: "modified incomplete Cholesky, no fill",
	Source:  "Gustafsson, BIT 18 (1978) 142–156; shift: Manteuffel, Math. Comp. 34 (1980) 473–497",
	Params:  []linear.Param{noFillParam, storeParam},
	Needs:   linear.NeedsEntries | linear.NeedsDiagonal,
	Assumes: linear.AssumesSymmetric | linear.AssumesDefinite,
	Fixed:   true, Symmetric: true, Transposes: true,
	Estimate: icEntry.Estimate,
	Build:    buildMIC,
}

// micWork factors A + α diag(A) = L D Lᵀ on the pattern of A with the row sums
// kept: for a symmetric A the modified LU factorisation is L D Lᵀ.
type micWork struct {
	iluWork
	a      *linear.CSR // A without shift
	pivots []float64   // D, length n
	diag   []int       // position of a_ii among A's entries, length n
}

// factor factors with shift alpha; see shiftable.
func (k *micWork) factor(ctx context.Context, alpha float64, progress func(float64)) (broke int, err error) {
	n := k.a.NRows
	k.restart()
	for _, at := range k.diag {
		k.iluWork.a.Val[at] = k.a.Val[at] * (1 + alpha)
	}
	for i := 0; i < n; i++ {
		if err := look(ctx, progress, i, n); err != nil {
			return -1, err
		}
		d, err := k.row(i)
		k.pivots[i] = d
		if err != nil || !(d > least*k.iluWork.a.Val[k.diag[i]]) || math.IsInf(d, 0) {
			return i, nil
		}
	}
	return -1, nil
}

func (k *micWork) pivot(i int) float64 { return k.pivots[i] }

func buildMIC(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	const name = "mic:0"
	var notes trace.BuildNotes
	a, err := entriesOf(s, name)
	if err != nil {
		return nil, notes, err
	}
	if err := positiveDiagonal(a, name); err != nil {
		return nil, notes, err
	}
	shifted := *a
	shifted.Val = append([]float64(nil), a.Val...)
	w := &micWork{iluWork: *newILUWork(&shifted, name, true), a: a, pivots: linear.Bulk[float64](a.NRows), diag: linear.Bulk[int](a.NRows)}
	for i := range w.diag {
		w.diag[i], _ = diagonal(a, i)
	}
	if err := leastShift(ctx, w, name, &notes, progress); err != nil {
		return nil, notes, err
	}
	for _, d := range w.pivots {
		pivot(&notes, d)
	}
	f := w.f
	f.upper, f.self = nil, true
	if err := f.settleAs(v, name); err != nil {
		return nil, notes, err
	}
	factorNotes(&notes, f, a)
	return built(f, notes, nil)
}
