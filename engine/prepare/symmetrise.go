package prepare

import (
	"context"
	"errors"
	"fmt"
	"math"

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

// roundings is how far two entries a_ij and a_ji may differ, relative to the
// larger, to count as one entry rounded twice.
const roundings = 16 * 0x1p-53

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
	m := &linear.CSR{NRows: a.NRows, NCols: a.NCols, Ptr: a.Ptr, Col: a.Col, Val: make([]float64, len(a.Val))}
	for i := range a.NRows {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			j := int(a.Col[k])
			v, w := a.Val[k], a.At(j, i)
			if !(math.Abs(v-w) <= roundings*max(math.Abs(v), math.Abs(w))) {
				return s, nil, fmt.Errorf("symmetrise would change the system: entries (%d,%d) and (%d,%d) are %.6g and %.6g",
					i+1, j+1, j+1, i+1, v, w)
			}
			m.Val[k] = v/2 + w/2
		}
	}
	s.A = m
	return s, same{}, ctx.Err()
}
