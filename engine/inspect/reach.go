package inspect

import (
	"fmt"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/prepare"
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

// measureReach measures the part of b in all that is known of the null space
// of a symmetric A: what its sums show, and the directions that are free to
// rounding. ended says that the search for these came to its end.
func (e *exam) measureReach(ended bool) {
	if !e.symmetric {
		return
	}
	s := e.s
	s.Null = nil
	for _, d := range e.freeToRounding() {
		s.Null = append(s.Null, d.Vector)
	}
	part, dimension := prepare.OutOfReach(s)
	e.reach = &reach{all: ended || e.out.ZeroPivots > 0 && dimension >= e.out.ZeroPivots}
	if part != nil {
		e.reach.part = linear.Norm2(part) / max(e.f.RHSNorm, tinyDivide)
	}
	e.out.Nullity, e.out.More = dimension, len(s.Null) > 0 && !e.reach.all
}

// reach is the part of b, relative to it, in the null space of a symmetric A as
// far as that is known, and whether all of it is.
type reach struct {
	part float64
	all  bool
}

// settleUnreachable: b is in A's range where A is regular, of a symmetric A
// where b is orthogonal to all that is free, and of another one where it is
// orthogonal to the left directions.
func (e *exam) settleUnreachable(f *Facts) {
	if len(e.s.B) != f.N || !(f.RHSNorm > 0) {
		return
	}
	u := &f.Unreachable
	switch {
	case e.symmetric:
		e.settleBySymmetry(f)
	case u.Answer != Unknown:
	case f.Singular.Answer == No:
		*u = fact(No, f.Singular.Certainty, 0, nil, "A is regular")
	case f.Singular.Answer == Yes:
		if found := e.unreachableByLeft(); found.Answer != Unknown || math.IsNaN(u.Value) { // else what the sums say stands
			*u = found
		}
	}
}

// settleBySymmetry does so where A is symmetric. What the sums alone have shown
// to be out of reach is enlarged by what the free directions add.
func (e *exam) settleBySymmetry(f *Facts) {
	u, r, free := &f.Unreachable, e.reach, e.freeToRounding()
	if u.Answer == Unknown && f.Singular.Answer == No {
		*u = fact(No, f.Singular.Certainty, 0, nil, "A is regular")
	}
	if r == nil || len(free) == 0 || u.Answer == No {
		return
	}
	what := count(e.out.Nullity, "direction", "directions") + ", free to rounding"
	if !r.all {
		what += fmt.Sprintf("; %s", e.others())
	}
	switch {
	case r.part > max(pushes, clearly*e.slackOf(free)) && !(u.Answer == Yes && r.part <= u.Value*(1+1e-6)):
		*u = fact(Yes, Measured, r.part, free[0].Rows, "%.6g of b lies along %s", r.part, what)
	case u.Answer == Unknown && r.all:
		*u = fact(No, Measured, r.part, nil, "%.1g of b lies along %s", r.part, what)
	case u.Answer == Unknown:
		u.Why = fmt.Sprintf("%.1g of b lies along %s", r.part, what)
	}
}

// others says that more is free than was found.
func (e *exam) others() string {
	if n := e.out.ZeroPivots; n > 0 {
		return fmt.Sprintf("there are more: LDL' leaves %d pivots zero to rounding", n)
	}
	return "there may be more"
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
	y := func(k int) string { return count(k, "direction", "directions") + " y with y'A = 0 to rounding" }
	what := y(len(left))
	switch {
	case part > max(pushes, slack):
		return fact(Yes, Measured, part, sure[0].Rows, "%.6g of b lies along %s", part, y(len(sure)))
	case all > max(pushes, slack):
		return unknown("%.2g of b lies along %s, but to more than that of A's own entries: an x of enormous size might answer it", all, what)
	case len(left) < len(e.freeToRounding()) || !(slack <= blurred): // no number where the search was cut
		return unknown("%.1g of b lies along %s; there may be others, or they are not sharp enough to tell", all, what)
	}
	return fact(No, Measured, all, nil, "%.1g of b lies along %s", all, what)
}

// slackOf bounds the error in the part of b along left directions: they are
// known, in equilibrated units, to their residual over the gap (Davis and Kahan,
// SIAM J. Numer. Anal. 7, 1970), and scaling back may enlarge that by as much as
// it enlarges b over the direction itself. Where the gap is not known it is NaN,
// and of a symmetric A held to be no less than what is nearly free.
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
		gap := d.Next
		if e.symmetric && !finite(gap) {
			gap = freeLimit
		}
		angle := max(d.Quotient, ownRounding*0x1p-53) / gap
		sum += angle * size * linear.Norm2(scaled)
	}
	return sum
}
