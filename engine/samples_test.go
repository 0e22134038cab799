package engine

import (
	"context"
	"math"
	"slices"
	"testing"

	"dwindle/engine/choose"
	"dwindle/engine/trace"
	"dwindle/samples"
)

// Each sample gives the findings it lists and no other, and what it calls
// converged is so by audit.
func TestSamplesGiveExactlyTheirFindings(t *testing.T) {
	var told []choose.Outcome
	within, ranges := 0, 0
	for _, s := range samples.Catalogue {
		t.Run(s.Name, func(t *testing.T) {
			v := ended(t, samples.Prefix+s.Name, Options{Pairs: lineUp(t, samples.Prefix+s.Name)})
			var got []string
			for _, f := range v.Findings {
				if !slices.Contains(got, f.Rule) {
					got = append(got, f.Rule)
				}
			}
			want := slices.Clone(s.Expect)
			slices.Sort(got)
			slices.Sort(want)
			if !slices.Equal(got, want) {
				t.Errorf("rules that spoke: %v, expected: %v%s", got, want, rules(v))
			}
			for _, u := range v.Trials {
				h := u.History
				t.Logf("%-22s %-18s it %5d true %.2g own %v %s", h.Pairing, h.Stop, h.Iterations, h.TrueResidual, h.OwnTime, h.Reason)
				if h.Stop == trace.Converged && !(h.TrueResidual <= v.Settings.Tol) {
					t.Errorf("%s is called converged at %g", h.Pairing, h.TrueResidual)
				}
			}
			if len(v.Trials) == 0 {
				t.Error("the line-up is empty")
			}
			told = append(told, v.Choice.Outcomes...)
			for _, u := range v.Trials {
				in, of := heldRanges(u.History)
				within, ranges = within+in, ranges+of
			}
		})
	}
	checkCalibration(t, told)
	t.Logf("ranges of predictions: %d of %d held", within, ranges)
	if ranges < 200 || float64(within) < 0.85*float64(ranges) {
		t.Errorf("ranges of predictions: %d of %d held, want 85 %% of at least 200", within, ranges)
	}
}

// heldRanges counts the predictions that a converged trial told after its first
// tenth, and those in whose range the outcome lies.
func heldRanges(h trace.History) (within, all int) {
	if h.Stop != trace.Converged {
		return 0, 0
	}
	for _, p := range h.Predictions {
		if 10*p.Iter < h.Iterations {
			continue
		}
		all++
		if came := float64(h.Iterations); p.Low <= came && came <= p.High {
			within++
		}
	}
	return within, all
}

// checkCalibration holds what was predicted at half time against the outcome:
// within 20 % on 80 % of the trials over all samples.
func checkCalibration(t *testing.T, told []choose.Outcome) {
	t.Helper()
	met, all := 0, 0
	for _, o := range told {
		if o.What != choose.HalfTime {
			continue
		}
		all++
		if math.Abs(o.Predicted-o.Came) <= 0.2*o.Came {
			met++
		} else {
			t.Logf("%s: predicted %.0f, came %.0f", o.Pairing, o.Predicted, o.Came)
		}
	}
	t.Logf("predictions at half time: %d of %d within 20 %%", met, all)
	if all < 25 || float64(met) < 0.8*float64(all) {
		t.Errorf("predictions at half time: %d of %d within 20 %%, want 80 %% of at least 25", met, all)
	}
}

// lineUp is what the facts alone line up for a source. A race would go on from
// there by the clock, which no table of findings can hold.
func lineUp(t *testing.T, source string) []string {
	t.Helper()
	s := Open(context.Background(), source, Options{FactsOnly: true, Threads: 1})
	defer s.Close()
	<-s.ready
	v := s.Snapshot()
	if v.Err != nil {
		t.Fatal(v.Err)
	}
	return choose.LineUp(v.Facts, candidates(s.theBench().Have(), 0), "")
}
