package tui

import (
	"fmt"
	"math"
)

// span is a horizontal axis from 0 to Top that only grows, in steps 1-2-5.
type span struct {
	top float64
	log bool
	fix measure
}

// grow widens the axis so that v fits.
func (s *span) grow(v float64) {
	if v > s.top && !math.IsInf(v, 0) {
		s.top = ceil125(v)
	}
}

// ceil125 is the smallest of ...1, 2, 5, 10, 20... not below v > 0.
func ceil125(v float64) float64 {
	p := math.Pow(10, math.Floor(math.Log10(v)))
	for _, f := range []float64{1, 2, 5} {
		if v <= f*p*(1+1e-12) {
			return f * p
		}
	}
	return 10 * p
}

// unit is the value at which a logarithmic axis turns from linear to
// logarithmic: one iteration, or the power of ten of seconds three decades
// below the top.
func (s span) unit() float64 {
	if s.fix == bySeconds {
		return math.Pow(10, math.Floor(math.Log10(s.top)+1e-9)-3)
	}
	return 1
}

// place maps a value to 0..1 along the axis.
func (s span) place(v float64) float64 {
	if !(s.top > 0) {
		return 0
	}
	if s.log {
		return math.Log1p(v/s.unit()) / math.Log1p(s.top/s.unit())
	}
	return v / s.top
}

// value is the inverse of place.
func (s span) value(u float64) float64 {
	if s.log {
		return s.unit() * math.Expm1(u*math.Log1p(s.top/s.unit()))
	}
	return u * s.top
}

// ticks returns the values to mark on an axis of w columns.
func (s span) ticks(w int) []float64 {
	if !(s.top > 0) {
		return []float64{0}
	}
	if s.log {
		return s.logTicks()
	}
	parts := 4 // of 2·10^k: 0.5; of 1·10^k and 5·10^k: fifths
	if lead := s.top / math.Pow(10, math.Floor(math.Log10(s.top)+1e-9)); lead < 1.5 || lead > 3 {
		parts = 5
	}
	if w >= 110 {
		parts *= 2
	}
	var out []float64
	for i := 0; i <= parts; i++ {
		out = append(out, s.top*float64(i)/float64(parts))
	}
	return out
}

// logTicks marks 0 and the powers of ten.
func (s span) logTicks() []float64 {
	out := []float64{0}
	for v := s.unit(); v <= s.top*(1+1e-12); v *= 10 {
		out = append(out, v)
	}
	return out
}

// decades is a vertical axis in log10, from top downwards. Its rows are even:
// every decade, or every fixed number of decades, takes the same number of
// rows.
type decades struct {
	top  int // decade of the uppermost row
	low  int // decade that must still be seen
	rows int
}

// densities are the admitted numbers of rows a decade, as fractions.
var densities = [...][2]int{{4, 1}, {3, 1}, {2, 1}, {3, 2}, {1, 1}, {2, 3}, {1, 2}, {1, 3}, {1, 4}, {1, 5}, {1, 8}, {1, 10}, {1, 20}, {1, 40}}

// density returns rows a decade as a fraction.
func (d decades) density() (num, den int) {
	for _, f := range densities {
		if (d.top-d.low)*f[0] <= (d.rows-1)*f[1] {
			return f[0], f[1]
		}
	}
	return 1, 1 << 10
}

// row returns the place of a level in rows below the top; fractions lie
// between rows.
func (d decades) row(level float64) float64 {
	num, den := d.density()
	return (float64(d.top) - level) * float64(num) / float64(den)
}

// labels returns the text beside each row: the tolerance in its row, and
// every decade that has a row of its own with a free row between.
func (d decades) labels(tol float64) []string {
	out := make([]string, d.rows)
	num, den := d.density()
	at := -1
	if t, ok := level(tol); ok && tol > 0 {
		if r := int(math.Round(d.row(t))); r >= 0 && r < d.rows {
			at, out[r] = r, power(tol)
		}
	}
	last := -2
	for k := 0; ; k++ {
		if k*num%den != 0 {
			continue
		}
		r := k * num / den
		if r >= d.rows {
			return out
		}
		if r < last+2 || (at >= 0 && r >= at-1 && r <= at+1) {
			continue
		}
		last, out[r] = r, fmt.Sprintf("1e%+03d", d.top-k)
	}
}
