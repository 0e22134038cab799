package check

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Said is a number as another program printed it.
type Said struct {
	Text  string
	Value float64
	Half  float64 // half a unit of the last printed digit
	Log   bool    // a negative number: the decimal logarithm of a measure
}

// ParseSaid reads a number as it was printed, such as 9e-11, 9.1D-11 or -10.04.
func ParseSaid(text string) (*Said, error) {
	clean := strings.Map(func(r rune) rune {
		if r == 'd' || r == 'D' {
			return 'e'
		}
		return r
	}, strings.TrimSpace(text))
	v, err := strconv.ParseFloat(clean, 64)
	mantissa, power, _ := strings.Cut(strings.ToLower(clean), "e")
	if err != nil || math.IsNaN(v) || math.IsInf(v, 0) || strings.ContainsAny(mantissa, "xp_") {
		return nil, fmt.Errorf("%q is not a number such as 9e-11", text)
	}
	exponent := 0
	if power != "" {
		if exponent, err = strconv.Atoi(power); err != nil {
			return nil, fmt.Errorf("%q is not a number such as 9e-11", text)
		}
	}
	_, decimals, _ := strings.Cut(mantissa, ".")
	return &Said{Text: strings.TrimSpace(text), Value: v, Half: 0.5 * math.Pow(10, float64(exponent-len(decimals))), Log: v < 0}, nil
}

// How far a measure may lie from a number with many digits: a code's own
// arithmetic differs from ours. Where one fits closely, those that fit loosely
// are left out.
const (
	loosely = 0.01
	closely = 0.001
)

// fits says whether a measure prints as the number, to a share of it.
func (s *Said) fits(value, share float64) bool {
	if s.Log {
		return value > 0 && math.Abs(math.Log10(value)-s.Value) <= math.Max(s.Half, share/math.Ln10)
	}
	return math.Abs(value-s.Value) <= math.Max(s.Half, share*math.Abs(s.Value))*(1+1e-12)
}

// size is the number as a measure.
func (s *Said) size() float64 {
	if s.Log {
		return math.Pow(10, s.Value)
	}
	return s.Value
}

// Match tells what a printed number may have been.
type Match struct {
	Said    Said
	Fitting []Fit  // definitions that reproduce it; none: none does
	Nearest *Fit   // where none does, the one whose value is nearest; nil for none
	Claim   string // the same in one sentence
}

// Fit is a definition that reproduces a number.
type Fit struct {
	Definition  Definition
	First, Last int // the steps after which a running measure does; 0 for other measures
}

// match finds the measures that print as the number.
func (w *work) match() *Match {
	if w.q.Said == nil {
		return nil
	}
	m := &Match{Said: *w.q.Said}
	if m.Fitting = sober(w.fitting(closely)); len(m.Fitting) == 0 {
		m.Fitting = sober(w.fitting(loosely))
	}
	if len(m.Fitting) == 0 {
		m.Nearest = w.nearest()
	}
	m.Claim = w.claim(m)
	return m
}

// fitting lists the measures that print as the number, to a share of it.
func (w *work) fitting(share float64) (fits []Fit) {
	for _, d := range w.out.Definitions {
		f := Fit{Definition: d}
		if first, _ := w.fittingSteps(d, share); first > 0 { // rounding moves the steps by a few
			f.First, f.Last = w.fittingSteps(d, loosely)
		}
		if f.First > 0 || d.after == nil && w.q.Said.fits(d.Value, share) {
			fits = append(fits, f)
		}
	}
	return fits
}

// nearest is the measure whose value is nearest the number as a factor.
func (w *work) nearest() *Fit {
	var best *Fit
	least, size := math.Inf(1), w.q.Said.size()
	for _, d := range w.out.Definitions {
		if d.after != nil || !(d.Value > 0) || !(size > 0) {
			continue
		}
		if away := math.Abs(math.Log(d.Value / size)); away < least {
			least, best = away, &Fit{Definition: d}
		}
	}
	return best
}

// fittingSteps returns the first and the last step after which the running
// measure prints as the number; 0, 0 where it never does.
func (w *work) fittingSteps(d Definition, share float64) (first, last int) {
	if d.after == nil {
		return 0, 0
	}
	for k := 1; k <= len(w.out.Running.Norms); k++ {
		if w.passes(k) && w.q.Said.fits(d.after(k), share) {
			if first == 0 {
				first = k
			}
			last = k
		}
	}
	return first, last
}

// sober leaves the running measures out where a plain one fits: with a free
// number of steps they fit more easily. Of two running ones the first is kept.
func sober(fits []Fit) []Fit {
	var plain []Fit
	for _, f := range fits {
		if f.First == 0 {
			plain = append(plain, f)
		}
	}
	if len(plain) == 0 && len(fits) > 1 {
		return fits[:1]
	}
	if len(plain) > 0 {
		return plain
	}
	return fits
}
