package prepare

import (
	"context"
	"errors"

	"dwindle/engine/linear"
)

var pruneEntry = Entry{
	Name:   "prune",
	Title:  "leave out entries that are stored as zero",
	Source: "A itself: products and factors no longer carry the zeros along",
	Needs:  linear.NeedsEntries,
	Estimate: func(a *linear.CSR, _ linear.Values) int64 {
		n := kept(a)
		left := linear.CSR{Ptr: a.Ptr, Col: a.Col[:n], Val: a.Val[:n]}
		return left.Bytes()
	},
	Apply: applyPrune,
}

// kept counts the entries that are not zero.
func kept(a *linear.CSR) int {
	n := 0
	for _, v := range a.Val {
		if v != 0 {
			n++
		}
	}
	return n
}

// applyPrune drops what is stored as zero, on the diagonal as well: the system
// stays the same.
func applyPrune(ctx context.Context, s linear.System, _ linear.Values) (linear.System, Back, error) {
	a := s.Matrix()
	if a == nil {
		return s, nil, errors.New("prune needs the entries of the matrix")
	}
	left := kept(a)
	m := &linear.CSR{NRows: a.NRows, NCols: a.NCols, Ptr: make([]int, 1, a.NRows+1),
		Col: make([]int32, 0, left), Val: make([]float64, 0, left)}
	for i := range a.NRows {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			if v := a.Val[k]; v != 0 {
				m.Col, m.Val = append(m.Col, a.Col[k]), append(m.Val, v)
			}
		}
		m.Ptr = append(m.Ptr, len(m.Val))
	}
	s.A = m
	return s, same{}, ctx.Err()
}
