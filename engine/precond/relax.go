package precond

import (
	"context"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// pivots finds the diagonal of A for a relaxation: the positions of a_ii among
// A's entries and ω/a_ii, both of length n. It fails on a diagonal entry that
// is missing or has no inverse.
func pivots(ctx context.Context, a *linear.CSR, name string, omega float64, notes *trace.BuildNotes, progress func(float64)) (at []int, inverse []float64, err error) {
	n := a.NRows
	at, inverse = linear.Bulk[int](n), linear.Bulk[float64](n)
	for i := 0; i < n; i++ {
		if err := look(ctx, progress, i, n); err != nil {
			return nil, nil, err
		}
		k, ok := diagonal(a, i)
		if !ok {
			return nil, nil, &Breakdown{Method: name, Row: i, Why: "missing diagonal entry"}
		}
		d := a.Val[k]
		w := omega / d
		if d == 0 || math.IsInf(w, 0) || math.IsNaN(w) {
			return nil, nil, &Breakdown{Method: name, Row: i, Pivot: d, Why: "the diagonal entry has no inverse"}
		}
		pivot(notes, d)
		at[i], inverse[i] = k, w
	}
	return at, inverse, nil
}

// positive says whether every number is above zero.
func positive(v []float64) bool {
	for _, x := range v {
		if !(x > 0) {
			return false
		}
	}
	return true
}
