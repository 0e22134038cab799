package inspect

import (
	"math"
	"slices"

	"dwindle/engine/linear"
)

// nullVectors finds what null vectors can be seen without a factorisation, and
// whether A is singular for its pattern alone.
func (l *look) nullVectors() error {
	f := &l.f
	l.parts = linear.FindComponents(l.a)
	f.Components = l.parts.Count
	right := l.parts.RowSums(l.a, l.delta)
	left := right
	if l.at != l.a {
		left = l.parts.RowSums(l.at, l.delta)
	}
	f.RowSumsZero = l.sumsZero(right, "row")
	f.ColSumsZero = l.sumsZero(left, "column")
	for _, z := range right {
		if z != linear.NotZero {
			f.NullComponents++
		}
	}
	missing, err := l.structure()
	if err != nil {
		return err
	}
	f.Singular = l.singular(missing)
	f.Unreachable = l.unreachable()
	return nil
}

// sumsZero says in how many components all sums vanish, as surely as the
// surest of them.
func (l *look) sumsZero(sums []linear.Zeroness, what string) Fact {
	found, best := 0, linear.NotZero
	for _, z := range sums {
		if z != linear.NotZero {
			found++
		}
		best = max(best, z)
	}
	if found == 0 {
		return fact(No, Proved, 0, nil, "no component has %ss that all sum to zero", what)
	}
	rows := l.firstRows(sums, best)
	c := count(found, "component", "components")
	switch best {
	case linear.ExactlyZero:
		f := fact(Yes, Proved, float64(found), rows, "all %ss of %s sum to exactly zero", what, c)
		if l.delta > 0 && !l.emptyPart(sums) {
			f = l.doubt(f, "your sums may differ from zero")
		}
		return f
	case linear.ToRounding:
		return fact(Yes, Measured, float64(found), rows, "all %ss of %s sum to zero to rounding", what, c)
	}
	return fact(Yes, Measured, float64(found), rows, "all %ss of %s sum to zero within the %d digits of the file", what, c, l.s.Digits)
}

// firstRows names the first row of each component with that zeroness.
func (l *look) firstRows(sums []linear.Zeroness, z linear.Zeroness) []int {
	var rows []int
	next := int32(0)
	for i, k := range l.parts.Of {
		if k == next { // the first row of component k
			next++
			if sums[k] == z {
				rows = first16(rows, i)
			}
		}
	}
	return rows
}

// emptyPart reports whether a component without any entry is among those
// whose sums vanish: no digit can change that.
func (l *look) emptyPart(sums []linear.Zeroness) bool {
	for i, k := range l.parts.Of {
		if sums[k] == linear.ExactlyZero && l.parts.Size[k] == 1 && l.a.At(i, i) == 0 {
			return true
		}
	}
	return false
}

// singular states what pattern and sums say, the surest statement first.
// missing is the structural defect.
func (l *look) singular(missing defect) Fact {
	f := &l.f
	switch {
	case f.EmptyRowCount > 0:
		return fact(Yes, Proved, float64(f.EmptyRowCount), f.EmptyRows, "%s without a nonzero", count(f.EmptyRowCount, "row", "rows"))
	case f.EmptyColCount > 0:
		return fact(Yes, Proved, float64(f.EmptyColCount), f.EmptyCols, "%s without a nonzero", count(f.EmptyColCount, "column", "columns"))
	case missing.count > 0:
		return fact(Yes, Proved, float64(missing.count), missing.rows, "%d rows have nonzeros in only %d columns", missing.size, missing.size-1)
	}
	for _, sums := range []Fact{f.RowSumsZero, f.ColSumsZero} {
		if sums.Answer == Yes && sums.Certainty == Proved {
			return fact(Yes, Proved, sums.Value, sums.Rows, "%s", sums.Why)
		}
	}
	for _, sums := range []Fact{f.RowSumsZero, f.ColSumsZero} {
		if sums.Answer == Yes {
			return fact(Yes, Measured, sums.Value, sums.Rows, "%s", sums.Why)
		}
	}
	if l.chained(weak, strict) && f.DiagZero+f.DiagMissing == 0 {
		if l.delta == 0 || l.robust(l.delta) {
			return fact(No, Proved, 0, nil, "diagonally dominant, and strictly so where it counts")
		}
		return l.doubt(fact(No, Proved, 0, nil, "diagonally dominant, and strictly so where it counts"), "yours may be less so")
	}
	return unknown("no null vector is seen in the pattern or in the sums")
}

// unreachable measures the part of b that lies in the left null space seen. It
// is left open, with that part as its value, where b has none and A may have
// null vectors that are not seen.
func (l *look) unreachable() Fact {
	f, b := &l.f, l.s.B
	switch {
	case len(b) != f.N:
		return unknown("no right-hand side yet")
	case f.ZeroRHS:
		return fact(No, Proved, 0, nil, "b = 0")
	case f.Singular.Answer == No:
		return fact(No, f.Singular.Certainty, 0, nil, "A is regular: %s", f.Singular.Why)
	}
	null := linear.LeftNull(l.a, l.at, l.parts, l.delta)
	if len(null.Size) == 0 {
		return unknown("no left null vector is seen")
	}
	return l.part(null, b)
}

// part states the part of b in the null space.
func (l *look) part(null *linear.NullSpace, b []float64) Fact {
	mean := make([]float64, len(null.Size))
	null.Means(mean, b)
	sure, all := 0.0, 0.0
	for k, m := range mean {
		p := m / l.f.RHSNorm
		p *= p * float64(null.Size[k])
		all += p
		if null.Sure[k] == linear.ExactlyZero && (l.delta == 0 || null.Size[k] == 1) {
			sure += p
		}
	}
	sure, all = math.Sqrt(sure), math.Sqrt(all)
	tiny := float64(l.f.N) * 0x1p-53
	switch rows := outside(null, mean); {
	case sure > tiny:
		return fact(Yes, Proved, sure, rows, "%.6g of b lies in the left null space: no x can reach it", sure)
	case all > tiny:
		return fact(Yes, Measured, all, rows, "%.6g of b lies in the left null space, which is known to rounding or to the digits of the file", all)
	}
	if !l.noOther() {
		f := unknown("b is consistent to rounding with the null vectors seen; whether A has others is open")
		f.Value = all
		return f
	}
	return fact(No, Measured, all, nil, "b is consistent to rounding with the null vectors seen")
}

// noOther says whether a symmetric A can have no null vector beside those that
// its sums show: each row is dominant to rounding, so that an irreducible part
// lacks one rank at most, and none where a row of it is strictly dominant
// (Taussky, Amer. Math. Monthly 56, 1949). Of an A that is not symmetric nothing
// is said: that is left to the second look.
func (l *look) noOther() bool {
	if l.f.Symmetric.Answer != Yes {
		return false
	}
	held := make([]bool, l.parts.Count)
	for k, z := range l.parts.RowSums(l.a, l.delta) {
		held[k] = z != linear.NotZero
	}
	for i, g := range l.flags {
		if g&near == 0 {
			return false
		}
		if g&strict != 0 {
			held[l.parts.Of[i]] = true
		}
	}
	return !slices.Contains(held, false)
}

// outside names rows of the null vectors with the largest share.
func outside(null *linear.NullSpace, mean []float64) []int {
	var t top
	for i, k := range null.Of {
		if k >= 0 && mean[k] != 0 {
			t.add(i, math.Abs(mean[k]))
		}
	}
	return t.rows
}
