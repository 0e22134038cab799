package inspect

import (
	"math"

	"dwindle/engine/linear"
)

// rows fills in, in one pass over the entries, all that rows tell by
// themselves.
func (l *look) rows() error {
	n := l.f.N
	l.flags = make([]flag, n)
	var t tally
	picture := newPicture(n)
	for i := range n {
		if err := l.every(i); err != nil {
			return err
		}
		l.row(&t, i, picture)
	}
	f := &l.f
	f.RowEntries, f.RowNorm, f.Diag, f.Gershgorin = t.entries.Range, t.norm.Range, t.diag.Range, t.discs.Range
	f.NormFro = linear.Norm2(l.a.Val)
	l.diagRows()
	l.emptyCols()
	l.triangle(t.lower, t.upper)
	f.Pattern = picture.densities()
	return l.singletons()
}

// tally collects ranges over rows.
type tally struct {
	entries, norm, diag, discs gather
	lower, upper               int // entries on either side of the diagonal
	sum                        linear.ExactSum
}

// row looks at row i.
func (l *look) row(t *tally, i int, p *picture) {
	f := &l.f
	cols, vals := l.a.Row(i)
	t.entries.add(i, float64(len(cols)))
	d, stored := 0.0, false
	off, largest := 0.0, 0.0
	full := false
	for k, c := range cols {
		v, j := vals[k], int(c)
		if j == i {
			d, stored = v, true
		}
		if v == 0 {
			continue
		}
		full = true
		largest = max(largest, math.Abs(v))
		l.flags[j] |= colFull
		p.mark(i, j)
		if j == i {
			continue
		}
		off += math.Abs(v)
		l.flags[i] |= rowOff
		l.flags[j] |= colOff
		f.Bandwidth = max(f.Bandwidth, j-i, i-j)
		if j < i {
			t.lower++
		} else {
			t.upper++
		}
	}
	f.NormInf = max(f.NormInf, off+math.Abs(d))
	t.discs.span(i, d-off, d+off)
	if full {
		t.norm.add(i, largest)
	} else {
		f.EmptyRowCount++
		f.EmptyRows = first16(f.EmptyRows, i)
	}
	l.diagonal(t, i, d, stored)
	l.dominance(t, i, d, off)
}

// diagonal counts the diagonal entry by its sign.
func (l *look) diagonal(t *tally, i int, d float64, stored bool) {
	f := &l.f
	switch {
	case d > 0:
		f.DiagPositive++
		l.positive.add(i, d)
	case d < 0:
		f.DiagNegative++
		l.negative.add(i, -d)
	default:
		l.zeroDiag.add(i, 0)
		if stored {
			f.DiagZero++
		} else {
			f.DiagMissing++
		}
	}
	if d != 0 {
		t.diag.add(i, math.Abs(d))
	}
}

// diagRows names the rows whose diagonal differs from most.
func (l *look) diagRows() {
	f := &l.f
	odd := l.negative
	if f.DiagNegative > f.DiagPositive {
		odd = l.positive
	}
	for _, r := range odd.rows {
		f.DiagRows = first16(f.DiagRows, r)
	}
	for _, r := range l.zeroDiag.rows {
		f.DiagRows = first16(f.DiagRows, r)
		f.DiagZeroRows = first16(f.DiagZeroRows, r)
	}
}

func (l *look) emptyCols() {
	for j, g := range l.flags {
		if g&colFull == 0 {
			l.f.EmptyColCount++
			l.f.EmptyCols = first16(l.f.EmptyCols, j)
		}
	}
}

// triangle judges whether a file that is not declared symmetric holds one
// triangle only.
func (l *look) triangle(lower, upper int) {
	f := &l.f
	side := "below"
	if upper > 0 {
		side = "above"
	}
	switch {
	case l.s.Source.Symmetric:
		f.TriangleOnly = fact(No, Proved, math.NaN(), nil, "declared symmetric: the other triangle is filled in")
	case lower > 0 && upper > 0:
		f.TriangleOnly = fact(No, Proved, math.NaN(), nil, "entries on both sides of the diagonal")
	case lower+upper == 0:
		f.TriangleOnly = fact(No, Proved, math.NaN(), nil, "no entry off the diagonal")
	default:
		f.TriangleOnly = fact(Yes, Proved, float64(lower+upper), nil,
			"all %d entries off the diagonal lie %s it, and the matrix is not declared symmetric", lower+upper, side)
	}
}

// first16 appends a row to a list of at most 16.
func first16(list []int, row int) []int {
	if len(list) < mostRows {
		list = append(list, row)
	}
	return list
}
