package engine

import (
	"reflect"
	"strings"
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// Two open systems with b = 1 whose solution no double holds to 1e-8 (cryg2500:
// one nearly free direction; reorientation_1: units). A race finds that out,
// tries x in two doubles because the finding offers it, and ends with the
// tolerance met; the answer in one double is measured against it, and what one
// double can be asked for is told first. What is told of the system beside it
// stays.
func TestRaceEndsInTwoDoubles(t *testing.T) {
	for file, c := range map[string]struct {
		one, two string
		digits   string // of x in one double, as TestTwoDoublesOnOpenSystems of engine/run measures them
	}{
		"cryg2500.mtx":        {"richardson:1+lu", "richardson:1,2+lu", "right to 9 digits (7 in its worst entry)"},
		"reorientation_1.mtx": {"richardson:1+ldl", "richardson:1,2+ldl", "right to 15 digits (13 in its worst entry)"},
	} {
		v := ended(t, openFile(t, file), Options{Seconds: 10})
		h, one := trial(t, v, c.two), trial(t, v, c.one)
		if h.Stop != trace.Converged || !h.TwoDoubles || !(h.TrueResidual <= 1e-8) || !(h.Rounded > 1e-8) || v.Elapsed.Seconds() > 12 {
			t.Errorf("%s: %s, true residual %g, rounded %g, after %v", file, h.Stop, h.TrueResidual, h.Rounded, v.Elapsed)
		}
		if one.Near == nil || one.Near.Of != c.two {
			t.Errorf("%s: the answer in one double is measured against %+v", file, one.Near)
		}
		f := mustSay(t, v, "double-precision", diagnose.OnSystem, diagnose.Blocker, inspect.Measured,
			c.one+" solves A to the last bit of its entries", "x in two doubles leaves")
		if !strings.Contains(f.Advice, c.digits) || !strings.HasPrefix(f.Advice, "ask for") {
			t.Errorf("%s: advice %q", file, f.Advice)
		}
		if v.Choice.Pairing != c.two || len(v.Choice.Reasons) < 4 || !strings.HasPrefix(v.Choice.Reasons[0], c.one) || !strings.Contains(v.Choice.Reasons[2], c.two) {
			t.Errorf("%s: chose %s: %v", file, v.Choice.Pairing, v.Choice.Reasons)
		}
		silent(t, v, "accuracy-floor", "false-convergence", "restart-stagnation", "few-correct-digits", "divergence")
		if file == "cryg2500.mtx" {
			mustSay(t, v, "near-null", diagnose.OnSystem, diagnose.Drag, inspect.Estimated, "one direction is nearly free", "about 4 correct digits")
		}
		if settings := strings.Join(v.Choice.Settings, "\n"); !strings.Contains(settings, "unevaluated sum of two doubles") || strings.Contains(settings, "one step with") {
			t.Errorf("%s: settings %s", file, settings)
		}
	}
}

// A session file keeps what is known of x in two doubles, and of x against it.
func TestTwoDoublesComeBack(t *testing.T) {
	was, path := recordedRun(t, openFile(t, "reorientation_1.mtx"), Options{Pairs: []string{"richardson+ldl", "richardson:1,2+ldl"}})
	now := reopened(t, path)
	for i, u := range now.Trials {
		a, b := was.Trials[i].History, u.History
		if a.Near == nil || !reflect.DeepEqual(a.Near, b.Near) || a.TwoDoubles != b.TwoDoubles || a.TwoDoubles && a.Rounded != b.Rounded || a.Reason != b.Reason {
			t.Errorf("%s: %+v, %g; was %+v, %g", a.Pairing, b.Near, b.Rounded, a.Near, a.Rounded)
		}
	}
	if !reflect.DeepEqual(was.Findings, now.Findings) || was.Choice.Pairing != now.Choice.Pairing {
		t.Errorf("it is judged otherwise:\n%+v\n%+v", was.Findings, now.Findings)
	}
}
