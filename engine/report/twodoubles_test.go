package report

import (
	"bytes"
	"encoding/json"
	"io"
	"math"
	"strings"
	"testing"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// beyond is a document where only x in two doubles has reached the tolerance.
func beyond() Document {
	d := typical()
	one, two := d.Trials[1], d.Trials[1]
	one.Pairing, one.Stop, one.TrueResidual, one.Componentwise, one.Direct = "richardson:1+lu", trace.FalselyConverged, 0.0189, 2e-16, true
	one.Near = &trace.Nearness{Of: "richardson:1,2+lu", Error: 3e-10, Worst: 1.9e-8, Doubt: 1e-20, WorstDoubt: 1e-19}
	two.Pairing, two.TwoDoubles, two.Rounded, two.TrueResidual, two.Direct = "richardson:1,2+lu", true, 0.0114, 4e-12, true
	two.Reason = "x is kept in two doubles, and rounded to one it leaves 0.0114"
	d.Trials, d.Facts.Symmetric.Answer = []trace.History{one, two}, inspect.No
	d.Findings = []diagnose.Finding{{Rule: "double-precision", Weight: diagnose.Blocker, Certainty: inspect.Measured, Subject: diagnose.OnSystem,
		Claim: "double precision cannot be counted on for 1e-08 here: richardson:1+lu solves A to the last bit of its entries, and 0.019 is left"}}
	d.Choice = choose.Choice{Pairing: two.Pairing, Ranked: []choose.Ranked{{Pairing: two.Pairing, Seconds: 0.03, Setup: 0.02,
		Iterations: 2, Memory: 40000, Reached: true, BreakEven: math.NaN()}, {Pairing: one.Pairing, Seconds: math.NaN(), BreakEven: math.NaN()}}}
	return d
}

// In every form of report, whoever reads that it converged reads that x is in
// two doubles and what is left of it in one; the head tells first what one
// double can be asked for.
func TestTwoDoublesAreToldEverywhere(t *testing.T) {
	d := beyond()
	head := strings.Join(strings.Fields(strings.Join(Head(d), " ")), " ")
	first, then := "richardson:1+lu at tol 0.03 or --stop backward: x right to 9 digits (7 in its worst entry)", "for 1e-08 by rule rhs richardson:1,2+lu, x in two doubles (0.011 left once rounded to one)"
	if i, k := strings.Index(head, first), strings.Index(head, then); i < 0 || k < i {
		t.Errorf("the head is\n%s", strings.Join(Head(d), "\n"))
	}
	for name, write := range map[string]func(io.Writer, Document) error{"text": Text, "markdown": Markdown, "html": HTML} {
		var b bytes.Buffer
		if err := write(&b, d); err != nil {
			t.Fatal(err)
		}
		text := strings.Join(strings.Fields(b.String()), " ")
		for _, want := range []string{"x is kept in two doubles, and rounded to one it leaves 0.0114", "converged (x in two doubles)"} {
			if name == "text" && strings.HasPrefix(want, "converged") || name == "markdown" && strings.HasPrefix(want, "x is") {
				continue // the other of the two stands there
			}
			if !strings.Contains(text, want) {
				t.Errorf("%s does not say %q", name, want)
			}
		}
	}
	if got := Outcome(d.Trials[1]); !strings.Contains(got, "converged (x in two doubles)") {
		t.Errorf("its outcome: %s", got)
	}
}

// In JSON a trial in one double has nulls there.
func TestTwoDoublesInJSON(t *testing.T) {
	var b bytes.Buffer
	if err := JSON(&b, beyond()); err != nil {
		t.Fatal(err)
	}
	var got struct {
		Trials []struct {
			TwoDoubles bool     `json:"two_doubles"`
			Rounded    *float64 `json:"rounded_residual"`
			Near       *struct {
				Of    string
				Error float64
				Worst float64 `json:"worst_entry_error"`
				Doubt float64
			} `json:"against_two_doubles"`
		}
	}
	if err := json.Unmarshal(b.Bytes(), &got); err != nil {
		t.Fatal(err)
	}
	one, two := got.Trials[0], got.Trials[1]
	if one.TwoDoubles || one.Rounded != nil || one.Near == nil || one.Near.Of != "richardson:1,2+lu" || one.Near.Error != 3e-10 || one.Near.Worst != 1.9e-8 || one.Near.Doubt != 1e-20 {
		t.Errorf("in one double: %+v, %+v", one, one.Near)
	}
	if !two.TwoDoubles || two.Rounded == nil || *two.Rounded != 0.0114 || two.Near != nil {
		t.Errorf("in two doubles: %+v", two)
	}
}

// A solution that was rounded for the file says so, and what that leaves.
func TestRoundedSolutionSaysSo(t *testing.T) {
	d := beyond()
	for pairing, rounded := range map[string]bool{"richardson:1,2+lu": true, "richardson:1+lu": false} {
		d.Choice.Pairing = pairing
		var b bytes.Buffer
		if err := Solution(&b, d); err != nil {
			t.Fatal(err)
		}
		text := strings.Join(strings.Fields(strings.ReplaceAll(b.String(), "%", "")), " ")
		if got := strings.Contains(text, "found in two doubles and rounded here to one, which leaves ||b-Ax||/||b|| = 0.0114"); got != rounded {
			t.Errorf("%s: %s", pairing, text)
		}
	}
}
