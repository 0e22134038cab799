package check

import (
	"fmt"
	"math"
	"strings"
	"testing"
)

func TestParseSaid(t *testing.T) {
	for _, c := range []struct {
		text        string
		value, half float64
		log         bool
	}{
		{"9e-11", 9e-11, 0.5e-11, false},
		{"9.1D-11", 9.1e-11, 0.05e-11, false},
		{" 0.907 ", 0.907, 0.5e-3, false},
		{"120", 120, 0.5, false},
		{"-10.04", -10.04, 0.5e-2, true},
	} {
		s, err := ParseSaid(c.text)
		if err != nil || s.Value != c.value || math.Abs(s.Half-c.half) > 1e-12*c.half || s.Log != c.log {
			t.Errorf("%q: %+v, %v", c.text, s, err)
		}
	}
	for _, bad := range []string{"", "x", "1e", "nan", "inf", "0x1p-3", "1_000", "9e-11 s", "1e-99999"} {
		if s, err := ParseSaid(bad); err == nil && s.Value != 0 {
			t.Errorf("%q is read as %+v", bad, s)
		}
	}
}

// One printed number for each definition of the example by hand names it.
func TestEachDefinitionIsRecognised(t *testing.T) {
	m, b, x := dense([]float64{2, 1, 0}, []float64{1, 7, 1}, []float64{0, 1, 11}), []float64{1, 2, 5}, []float64{0.3, 0.2, 0.4}
	start := func(q *Question) { q.System.Guess = []float64{1, 1, 1} }
	for _, d := range asked(t, m, b, x, start).Definitions {
		said, err := ParseSaid(four(d.Value))
		if err != nil {
			t.Fatal(err)
		}
		got := asked(t, m, b, x, func(q *Question) { start(q); q.Said = said }).Said
		var names []string
		for _, f := range got.Fitting {
			names = append(names, f.Definition.Name)
		}
		if all := " " + strings.Join(names, " ") + " "; !strings.Contains(all, " "+d.Name+" ") && d.Name != "running-start" && d.Name != "running" {
			t.Errorf("%s = %s is taken for %v", d.Name, said.Text, names)
		}
	}
}

func four(x float64) string { return fmt.Sprintf("%.3e", x) }

func TestNoDefinitionFits(t *testing.T) {
	said, _ := ParseSaid("4.44e-5")
	a := asked(t, dense([]float64{2, 0}, []float64{0, 4}), []float64{2, 4}, []float64{1, 0}, func(q *Question) { q.Said = said })
	if len(a.Said.Fitting) > 0 || a.Said.Nearest == nil || !strings.HasPrefix(a.Said.Claim, "none of the common definitions gives 4.44e-5") {
		t.Errorf("%+v", a.Said)
	}
}

// The decimal logarithm of a measure is recognised too.
func TestLogarithm(t *testing.T) {
	said, _ := ParseSaid("-0.048") // log10 of 4/√20 = −0.0485
	a := asked(t, dense([]float64{2, 0}, []float64{0, 4}), []float64{2, 4}, []float64{1, 0}, func(q *Question) { q.Said = said })
	if len(a.Said.Fitting) == 0 || a.Said.Fitting[0].Definition.Name != "rhs" {
		t.Errorf("%+v", a.Said)
	}
}
