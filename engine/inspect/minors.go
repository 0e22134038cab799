package inspect

import (
	"math"

	"dwindle/engine/linear"
)

// minor is the 2 x 2 principal minor of rows i and j, relative to |a_ii a_jj|.
type minor struct {
	i, j  int
	value float64
}

// minors looks for a 2 x 2 principal minor that is negative in exact
// arithmetic: then xᵀA x takes both signs, where the two diagonal entries do
// not differ in sign anyway.
func (l *look) minors() error {
	n := l.f.N
	d := make([]float64, n)
	l.a.Diagonal(d)
	worst := minor{}
	var rows top
	var sum linear.ExactSum
	bad, firm := 0, false
	for i := range n {
		if err := l.every(i); err != nil {
			return err
		}
		lowest := 0.0
		cols, vals := l.a.Row(i)
		for k, c := range cols {
			j := int(c)
			if j <= i || vals[k] == 0 || !negativeMinor(&sum, d[i], d[j], l.lesser(i, j, vals[k])) {
				continue
			}
			bad++
			firm = firm || l.firmMinor(d[i], d[j], vals[k])
			v := relativeMinor(d[i], d[j], vals[k])
			lowest = min(lowest, v)
			if bad == 1 || v < worst.value {
				worst = minor{i, j, v}
			}
		}
		if lowest < 0 {
			rows.add(i, -lowest)
		}
	}
	if bad > 0 {
		l.indefinite(worst, rows, bad, firm)
	}
	return nil
}

// indefinite states what a negative minor proves.
func (l *look) indefinite(w minor, rows top, bad int, firm bool) {
	named := []int{w.i, w.j}
	for _, r := range rows.rows {
		if r != w.i && r != w.j {
			named = first16(named, r)
		}
	}
	no := fact(No, Proved, w.value, named, "%s negative, worst that of %s: a_ii a_jj - a_ij^2 is %.3g of |a_ii a_jj|",
		count(bad, "2 x 2 principal minor is", "2 x 2 principal minors are"), l.f.Names.Both(w.i, w.j), w.value)
	if math.IsInf(w.value, -1) {
		no.Value = math.NaN()
		no.Why = count(bad, "2 x 2 principal minor is", "2 x 2 principal minors are") + " negative, one of " + l.f.Names.Both(w.i, w.j) + " with a zero on the diagonal"
	}
	if !firm {
		no = l.doubt(no, "yours may not be indefinite")
	}
	f := &l.f
	for _, p := range []*Fact{&f.PositiveDefinite, &f.NegativeDefinite, &f.Semidefinite} {
		if p.Answer == "" {
			*p = no
		}
	}
}

// lesser returns the one of a_ij and a_ji with the smaller size: where A is
// symmetric to rounding only, the mean of the two is at least as large.
func (l *look) lesser(i, j int, v float64) float64 {
	if l.at == l.a {
		return v
	}
	if w := l.a.At(j, i); math.Abs(w) < math.Abs(v) {
		return w
	}
	return v
}

// negativeMinor reports whether d·e − v² < 0 in exact arithmetic.
func negativeMinor(sum *linear.ExactSum, d, e, v float64) bool {
	p, q := d*e, v*v
	if p < 1e300 && p > 1e-270 && q < 1e300 && (q < p*(1-1e-15) || q > p*(1+1e-15)) {
		return q > p
	}
	if d == 0 || e == 0 || (d < 0) != (e < 0) {
		return v != 0 || d != 0 && e != 0
	}
	// Bring both diagonal entries near 1 by powers of two: the sign stays.
	de, ee := math.Ilogb(d)/2, math.Ilogb(e)/2
	d, e, v = math.Ldexp(d, -2*de), math.Ldexp(e, -2*ee), math.Ldexp(v, -de-ee)
	if math.Abs(v) > 8 || math.Abs(v) < 0.125 {
		return math.Abs(v) > 8
	}
	sum.Reset()
	sum.AddProduct(d, e)
	sum.AddProduct(-v, v)
	return sum.Sign() < 0
}

// firmMinor reports whether the minor stays negative when each entry changes
// by up to the slack.
func (l *look) firmMinor(d, e, v float64) bool {
	s := l.slack
	if s == 0 || d == 0 || e == 0 {
		return true
	}
	x := math.Abs(v) / math.Sqrt(math.Abs(d)) / math.Sqrt(math.Abs(e))
	return x*(1-s) > (1+s)*(1+1e-14)
}

// relativeMinor returns (d·e − v²)/|d·e|.
func relativeMinor(d, e, v float64) float64 {
	x := math.Abs(v) / math.Sqrt(math.Abs(d)) / math.Sqrt(math.Abs(e))
	sign := 1.0
	if (d < 0) != (e < 0) {
		sign = -1
	}
	return sign - x*x
}
