package precond

import (
	"context"
	"slices"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var spaiEntry = Entry{
	Name: "spai", Title: "sparse approximate inverse on the pattern of A",
	Source: "Grote and Huckle, SIAM J. Sci. Comput. 18 (1997) 838–853; Chow, SIAM J. Sci. Comput. 21 (2000) 1804–1822",
	Needs:  linear.NeedsEntries,
	Fixed:  true, Transposes: true,
	Estimate: func(a *linear.CSR, _ linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		return triangleBytes(a.NRows, a.Entries()), true
	},
	Build: buildSPAI,
}

// buildSPAI finds M⁻¹ on the pattern of A with least ‖M⁻¹A − I‖_F, row by row:
// row m_i with pattern J solves min ‖m_i A_J − e_i‖₂ over the rows J of A.
func buildSPAI(ctx context.Context, s linear.System, _ linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	const name = "spai"
	var notes trace.BuildNotes
	a, err := entriesOf(s, name)
	if err != nil {
		return nil, notes, err
	}
	n := a.NRows
	m := &linear.CSR{NRows: n, NCols: n, Ptr: a.Ptr, Col: a.Col, Val: linear.Bulk[float64](a.Entries())}
	w := &spaiWork{ctx: ctx, a: a, place: linear.Bulk[int32](n)}
	for i := 0; i < n; i++ {
		if err := look(ctx, progress, i, n); err != nil {
			return nil, notes, err
		}
		_, dst := m.Row(i)
		if !w.row(i, dst) {
			if err := ctx.Err(); err != nil {
				return nil, notes, err
			}
			return nil, notes, &Breakdown{Method: name, Row: i, Why: "the pattern of the row cannot reach its unit vector"}
		}
	}
	notes.Entries, notes.Fill = int64(m.Entries()), 1
	notes.Bytes = m.Bytes()
	return m, notes, nil
}

// spaiWork holds the least squares problem of one row.
type spaiWork struct {
	ctx   context.Context // of the set-up: one dense row may take long
	a     *linear.CSR
	place []int32 // where column c stands among those met, +1; length n
	met   []int32
	b, c  []float64
}

// row writes row i of M⁻¹ to dst; false where that row is zero, or the set-up
// has been cancelled.
func (w *spaiWork) row(i int, dst []float64) bool {
	j, _ := w.a.Row(i)
	w.met = w.met[:0]
	for _, r := range j {
		cols, _ := w.a.Row(int(r))
		for _, c := range cols {
			if w.place[c] == 0 {
				w.met = append(w.met, c)
				w.place[c] = int32(len(w.met))
			}
		}
	}
	reached := w.place[i] > 0
	if reached {
		reached = w.solve(i, j, dst)
	}
	for _, c := range w.met {
		w.place[c] = 0
	}
	return reached && norm2(dst) > 0
}

// solve solves min ‖A_Jᵀ x − e_i‖₂; false where the set-up has been cancelled.
func (w *spaiWork) solve(i int, j []int32, dst []float64) bool {
	rows, cols := max(len(w.met), len(j)), len(j)
	w.b, w.c = slices.Grow(w.b[:0], rows*cols)[:rows*cols], slices.Grow(w.c[:0], rows)[:rows]
	clear(w.b)
	clear(w.c)
	for k, r := range j {
		rc, rv := w.a.Row(int(r))
		for q, c := range rc {
			w.b[k*rows+int(w.place[c])-1] = rv[q]
		}
	}
	w.c[w.place[i]-1] = 1
	if !leastSquares(w.ctx, w.b, rows, cols, w.c) {
		return false
	}
	copy(dst, w.c)
	return true
}
