package inspect

import (
	"math"

	"dwindle/engine/linear"
)

const (
	// pushes is the part of b along the free directions above which rounding
	// does not explain it.
	pushes = 1e-10
	// ownRounding is the image of a left direction, in units of what rounding
	// the entries of A makes of it, up to which no x of any size answers what b
	// has along it: the x that would leaves as much to rounding.
	ownRounding = 8
	// clearly is how many times the error of the directions the part of b must
	// be that is told of them.
	clearly = 10
	// blurred is the error of the part of b from which its smallness says
	// nothing.
	blurred = 1e-6
)

// settleUnreachable: b is in A's range where A is regular, of a symmetric A
// where b is orthogonal to all that is free, and of another one where it is
// orthogonal to the left directions.
func (e *exam) settleUnreachable(f *Facts) {
	if len(e.s.B) != f.N || !(f.RHSNorm > 0) {
		return
	}
	u, free := &f.Unreachable, e.freeToRounding()
	switch {
	case u.Answer == No && u.Certainty == Measured && len(e.out.Left) > int(max(0, f.ColSumsZero.Value)):
		if more := e.unreachableByLeft(); more.Answer == Yes { // the sums do not show all of them
			*u = more
		}
	case u.Answer != Unknown:
	case f.Singular.Answer == No:
		*u = fact(No, f.Singular.Certainty, 0, nil, "A is regular")
	case !e.symmetric && f.Singular.Answer == Yes:
		*u = e.unreachableByLeft()
	case !e.symmetric || len(free) == 0 || len(free) == mostFree:
	default:
		*u = e.unreachableBy(free)
	}
}

// unreachableBy measures the part of b in the span of the free directions of a
// symmetric A.
func (e *exam) unreachableBy(free []NullDirection) Fact {
	part, what := e.along(free), count(len(free), "direction", "directions")
	if part > pushes {
		return fact(Yes, Measured, part, free[0].Rows, "%.6g of b lies along %s, free to rounding", part, what)
	}
	return fact(No, Measured, part, nil, "%.1g of b lies along %s, free to rounding", part, what)
}

// along is the norm of the part of b in the span of directions, relative to
// that of b.
func (e *exam) along(free []NullDirection) float64 {
	sum, basis := 0.0, [][]float64(nil)
	for _, d := range free {
		v := append([]float64(nil), d.Vector...)
		if !orthonormal(v, basis) {
			continue
		}
		basis = append(basis, v)
		sum += linear.Dot(v, e.s.B) * linear.Dot(v, e.s.B)
	}
	return math.Sqrt(sum) / e.f.RHSNorm
}

// unreachableByLeft measures the part of b in the span of the left directions.
// It is told where a change of A's entries by their own rounding makes them
// exact, and where it stands above the error that they have themselves.
func (e *exam) unreachableByLeft() Fact {
	left := e.out.Left
	if len(left) == 0 {
		return unknown("no left null vector was found")
	}
	var sure []NullDirection
	for _, d := range left {
		if d.Rounding <= ownRounding {
			sure = append(sure, d)
		}
	}
	all, part, slack := e.along(left), e.along(sure), clearly*e.slackOf(left)
	what := count(len(left), "direction", "directions") + " y with y'A = 0 to rounding"
	switch {
	case part > max(pushes, slack):
		return fact(Yes, Measured, part, left[0].Rows, "%.6g of b lies along %s", part, what)
	case all > max(pushes, slack):
		return unknown("%.2g of b lies along %s, but to more than that of A's own entries: an x of enormous size might answer it", all, what)
	case len(left) < len(e.freeToRounding()) || len(left) == mostFree || !(slack <= blurred):
		return unknown("%.1g of b lies along %s; there may be others, or they are not sharp enough to tell", all, what)
	}
	return fact(No, Measured, all, nil, "%.1g of b lies along %s", all, what)
}

// slackOf bounds the error in the part of b along left directions: they are
// known, in equilibrated units, to their residual over the gap (Davis and Kahan,
// SIAM J. Numer. Anal. 7, 1970), and scaling back may enlarge that by as much as
// it enlarges b over the direction itself. NaN where the gap is not known.
func (e *exam) slackOf(left []NullDirection) float64 {
	scaled := make([]float64, e.f.N)
	for i, x := range e.s.B {
		scaled[i] = e.row[i] * x
	}
	size, sum := linear.Norm2(scaled)/e.f.RHSNorm, 0.0
	for _, d := range left {
		for i, x := range d.Vector {
			scaled[i] = x / e.row[i]
		}
		angle := max(d.Quotient, ownRounding*0x1p-53) / d.Next
		sum += angle * size * linear.Norm2(scaled)
	}
	return sum
}
