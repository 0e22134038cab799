package inspect

import (
	"math"

	"dwindle/engine/linear"
)

// dominance compares |a_ii| = |d| with off, the computed Σ|a_ij| over the
// other entries of row i, in exact arithmetic where rounding could decide.
func (l *look) dominance(t *tally, i int, d, off float64) {
	d = math.Abs(d)
	k := float64(l.a.Ptr[i+1] - l.a.Ptr[i] + 2)
	err := k * 0x1p-53 * off
	g := flag(0)
	if d >= off-2*err {
		g |= near
	}
	if d > off+2*err {
		g |= beyond | strict | weak
	} else if g&near != 0 {
		switch l.margin(&t.sum, i) {
		case 1:
			g |= strict | weak
		case 0:
			g |= weak
		}
	}
	if g&weak != 0 {
		l.f.Dominant++
	}
	if g&strict != 0 {
		l.f.StrictlyDominant++
	}
	l.flags[i] |= g
}

// margin returns the sign of |a_ii| − Σ|a_ij|, without rounding.
func (l *look) margin(sum *linear.ExactSum, i int) int {
	sum.Reset()
	cols, vals := l.a.Row(i)
	for k, j := range cols {
		if v := math.Abs(vals[k]); int(j) == i {
			sum.Add(v)
		} else {
			sum.Add(-v)
		}
	}
	return sum.Sign()
}

// robust reports whether every row stays strictly dominant when each entry
// changes by up to the relative amount eps.
func (l *look) robust(eps float64) bool {
	if l.f.StrictlyDominant < l.f.N {
		return false
	}
	for i := range l.f.N {
		cols, vals := l.a.Row(i)
		d, off := 0.0, 0.0
		for k, j := range cols {
			if v := math.Abs(vals[k]); int(j) == i {
				d = v
			} else {
				off += v
			}
		}
		if k := float64(len(cols) + 4); eps > 0 && !(d*(1-eps) > off*(1+eps)*(1+k*0x1p-53)) {
			return false
		}
	}
	return true
}

// chained reports whether every row has the property base and leads, along
// nonzero entries, to a row with the property goal. With weak and strict it
// says that A is weakly chained diagonally dominant, hence regular
// (Shivakumar and Chew, Proc. AMS 43, 1974).
func (l *look) chained(base, goal flag) bool {
	seen := make([]bool, l.f.N)
	var queue []int32
	for i, g := range l.flags {
		if g&base == 0 {
			return false
		}
		if g&goal != 0 {
			seen[i] = true
			queue = append(queue, int32(i))
		}
	}
	for k := 0; k < len(queue); k++ {
		rows, vals := l.at.Row(int(queue[k])) // rows that have an entry in this column
		for p, i := range rows {
			if vals[p] != 0 && !seen[i] {
				seen[i] = true
				queue = append(queue, i)
			}
		}
	}
	return len(queue) == l.f.N
}
