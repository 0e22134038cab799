package precond

import (
	"context"
	"fmt"

	"dwindle/engine/linear"
)

const (
	lookEvery = 4096 // rows that are built between two words on progress
	heedEvery = 16   // and between two looks at the context: a row may be dense
)

// look stops a build that was cancelled and reports the share done at row i
// of n, now and then.
func look(ctx context.Context, progress func(float64), i, n int) error {
	if progress != nil && i%lookEvery == 0 {
		progress(float64(i) / float64(n))
	}
	if i%heedEvery != 0 {
		return nil
	}
	return ctx.Err()
}

// entriesOf returns the stored matrix of a system, which the method needs.
func entriesOf(s linear.System, method string) (*linear.CSR, error) {
	a := s.Matrix()
	if a == nil {
		return nil, fmt.Errorf("%s needs the matrix entries; this operator only gives products", method)
	}
	return a, nil
}

// halves counts the entries strictly below and above the diagonal.
func halves(a *linear.CSR) (lower, upper int) {
	for i := 0; i < a.NRows; i++ {
		cols, _ := a.Row(i)
		for _, c := range cols {
			if int(c) < i {
				lower++
			} else if int(c) > i {
				upper++
			}
		}
	}
	return lower, upper
}

// triangle returns an empty triangular factor with room for entries; rows are
// appended in order.
func triangle(n, entries int) *linear.CSR {
	return &linear.CSR{NRows: n, NCols: n, Ptr: linear.Bulk[int](n + 1),
		Col: linear.Bulk[int32](entries)[:0], Val: linear.Bulk[float64](entries)[:0]}
}

// triangleBytes returns what triangle(n, entries) takes.
func triangleBytes(n, entries int) int64 { return int64(entries)*12 + int64(n+1)*8 }

// makeRoom lets t take need more entries while row i is built: it looks ahead
// by what the rows so far took, so that a factor is moved two or three times
// on its way.
func makeRoom(t *linear.CSR, i, need int) {
	length := len(t.Col) + need
	if length <= cap(t.Col) {
		return
	}
	room := 2 * length
	if i > t.NRows/16 {
		ahead := int(1.05 * float64(length) / float64(i) * float64(t.NRows))
		room = min(max(ahead, length+length/8), 4*length)
	}
	t.Col = append(linear.Bulk[int32](room)[:0], t.Col...)
	t.Val = append(linear.Bulk[float64](room)[:0], t.Val...)
}
