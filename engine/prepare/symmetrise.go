package prepare

import (
	"context"
	"errors"
	"fmt"

	"dwindle/engine/linear"
)

var symmetriseEntry = Entry{
	Name:     "symmetrise",
	Title:    "take (A + Aᵀ)/2 where A is symmetric to rounding",
	Source:   "the orthogonal projection onto the symmetric matrices",
	Needs:    linear.NeedsEntries,
	Rounds:   true,
	Estimate: func(a *linear.CSR, _ linear.Values) int64 { return a.Bytes() },
	Apply:    applySymmetrise,
}

// applySymmetrise replaces A by (A + Aᵀ)/2, which is another matrix and so
// another system. It is refused unless each entry moves by rounding only; the
// residual is audited with the original A in any case.
func applySymmetrise(ctx context.Context, s linear.System, _ linear.Values) (linear.System, Back, error) {
	a := s.Matrix()
	if a == nil {
		return s, nil, errors.New("symmetrise needs the entries of the matrix")
	}
	if err := ctx.Err(); err != nil {
		return s, nil, err
	}
	mirror, at := linear.NewMirror(a), a.Transpose()
	m := &linear.CSR{NRows: a.NRows, NCols: a.NCols, Ptr: make([]int, 1, a.NRows+1),
		Col: make([]int32, 0, len(a.Col)), Val: make([]float64, 0, len(a.Val))}
	var refused error
	for i := range a.NRows {
		linear.Pairs(a, at, i, func(j int, v, w float64) {
			if refused == nil && !mirror.Same(i, j, v, w) {
				refused = fmt.Errorf("symmetrise would change the system: entries (%d,%d) and (%d,%d) are %.6g and %.6g",
					i+1, j+1, j+1, i+1, v, w)
			}
			m.Col, m.Val = append(m.Col, int32(j)), append(m.Val, v/2+w/2)
		})
		m.Ptr = append(m.Ptr, len(m.Col))
		if refused != nil {
			return s, nil, refused
		}
	}
	s.A = m
	return s, same{}, ctx.Err()
}
