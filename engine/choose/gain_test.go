package choose

import (
	"testing"
)

// A factor of times is told only where the clock tells the two apart.
func TestGain(t *testing.T) {
	entry := func(seconds, off, work float64, today bool) Ranked {
		return Ranked{Reached: true, Seconds: seconds, Low: seconds - off, High: seconds + off, Work: work, Today: today}
	}
	for name, c := range map[string]struct {
		first, today Ranked
		times        float64
		byWork       bool
	}{
		"told apart":                {entry(0.5, 0.1, 1, false), entry(2, 0.1, 3, true), 4, false},
		"within what they differ":   {entry(0.5, 0.1, 1, false), entry(0.6, 0.1, 3, true), 3, true},
		"too short, both":           {entry(0.002, 0, 1, false), entry(0.004, 0, 1.1, true), 1.1, true},
		"too short against a while": {entry(0.002, 0.001, 1, false), entry(0.2, 0.01, 80, true), 100, false},
		"a hiccup of today's":       {entry(0.0025, 0.001, 2, false), entry(0.0138, 0.001, 3, true), 1.5, true},
	} {
		g := gain([]Ranked{c.first, c.today})
		if d := g.Times - c.times; d > 1e-9 || d < -1e-9 || g.ByWork != c.byWork {
			t.Errorf("%s: %+v, want %g, by work %v", name, g, c.times, c.byWork)
		}
	}
	if g := gain([]Ranked{entry(1, 0.1, 1, false)}); g.Times != 0 {
		t.Errorf("a gain over nothing: %+v", g)
	}
}

// Of trials that neither clock nor work tell apart, today's stays.
func TestTodayStaysWhereNothingSpeaksForAChange(t *testing.T) {
	list := []Ranked{{Pairing: "cg+none", Reached: true, Seconds: 0.001, Work: 10},
		{Pairing: "cg+ssor:1", Reached: true, Seconds: 0.0011, Work: 11, Today: true}}
	if settle(list, nil, ""); !list[0].Today {
		t.Errorf("first is %s", list[0].Pairing)
	}
}
