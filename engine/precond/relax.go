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

// relaxDown computes y_i = w_i (s x_i − Σ_{j<i} a_ij y_j) for the rows in turn;
// at and w are what pivots returns. The coupling nearest to the diagonal comes
// last and is scaled before, so that a row waits for the one before it through
// one product and one difference alone.
func relaxDown(a *linear.CSR, at []int, w, y, x []float64, s float64) {
	cols := a.Col
	vals := a.Val[:len(cols)]
	starts := a.Ptr[:len(at)]
	w, y, x = w[:len(at)], y[:len(at)], x[:len(at)]
	for i, end := range at {
		k, end := starts[i], min(end, len(cols)) // no change; it spares the compiler a check an entry
		t, v := s*x[i], w[i]
		for ; k < end-1; k++ {
			t -= vals[k] * y[uint32(cols[k])]
		}
		t *= v
		if k < end {
			t -= (vals[k] * v) * y[uint32(cols[k])]
		}
		y[i] = t
	}
}

// relaxUp computes z_i −= w_i Σ_{j>i} a_ij z_j for the rows from the last to
// the first; the nearest coupling comes last as in relaxDown.
func relaxUp(a *linear.CSR, at []int, w, z []float64) {
	cols := a.Col
	vals := a.Val[:len(cols)]
	ends := a.Ptr[1 : len(at)+1]
	w, z = w[:len(at)], z[:len(at)]
	for i := len(at) - 1; i >= 0; i-- {
		k, first := min(ends[i], len(cols))-1, max(at[i]+1, 0)
		t, v := 0.0, w[i]
		for ; k > first; k-- {
			t += vals[k] * z[uint32(cols[k])]
		}
		t = z[i] - t*v
		if k == first {
			t -= (vals[k] * v) * z[uint32(cols[k])]
		}
		z[i] = t
	}
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
