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

// leastShare is how far a measure may lie from a number with many digits: a
// code's own arithmetic differs from ours.
const leastShare = 0.01

// fits says whether a measure prints as the number.
func (s *Said) fits(value float64) bool {
	if s.Log {
		return value > 0 && math.Abs(math.Log10(value)-s.Value) <= math.Max(s.Half, leastShare/math.Ln10)
	}
	return math.Abs(value-s.Value) <= math.Max(s.Half, leastShare*math.Abs(s.Value))*(1+1e-12)
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
	least := math.Inf(1)
	for _, d := range w.out.Definitions {
		f := Fit{Definition: d}
		switch {
		case d.Name == "running":
			f.First, f.Last = w.fittingSteps(w.out.Running.Norms)
		case d.Name == "running-start":
			f.First, f.Last = w.fittingSteps(w.out.Running.WithStart)
		case m.Said.fits(d.Value):
			m.Fitting = append(m.Fitting, f)
		case d.Value > 0 && m.Said.size() > 0:
			if away := math.Abs(math.Log(d.Value / m.Said.size())); away < least {
				least, m.Nearest = away, &f
			}
		}
		if f.First > 0 {
			m.Fitting = append(m.Fitting, f)
		}
	}
	m.Fitting = sober(m.Fitting)
	if len(m.Fitting) > 0 {
		m.Nearest = nil
	}
	m.Claim = w.claim(m)
	return m
}

// fittingSteps returns the first and the last step after which the running
// measure prints as the number; 0, 0 where it never does.
func (w *work) fittingSteps(norms []float64) (first, last int) {
	for k := range norms {
		if w.passes(k+1) && w.q.Said.fits(w.running2(norms, k+1)) {
			if first == 0 {
				first = k + 1
			}
			last = k + 1
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
