package engine

import (
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/run"
	"dwindle/engine/trace"
)

// Every form on a ladder is written as the catalogues print it, so that no
// pairing is raced twice under two names.
func TestLaddersAreCanonical(t *testing.T) {
	for _, l := range choose.Ladders() {
		for _, form := range l {
			asSolver, err := run.Parse(form + "+none")
			asPrecond, fault := run.Parse("cg+" + form)
			switch {
			case err != nil && fault != nil:
				t.Errorf("%s: %v; %v", form, err, fault)
			case err == nil && asSolver.Name != form+"+none":
				t.Errorf("%s is printed as %s", form, asSolver.Name)
			case fault == nil && asPrecond.Name != "cg+"+form:
				t.Errorf("%s is printed as %s", form, asPrecond.Name)
			}
		}
	}
}

// tick is a clock for sessions: every reading is a tick later, so that a
// trial's own time is its number of steps. It is read from several goroutines.
func tick(d time.Duration) func() time.Duration {
	at := make(chan time.Duration, 1)
	at <- 0
	return func() time.Duration {
		now := <-at + d
		at <- now
		return now
	}
}

// A race by a clock that counts steps: it goes beyond the line-up, ends what
// has lost and nothing else, and the choice has the least time of all.
func TestRaceOnASample(t *testing.T) {
	v := ended(t, "sample:plate:30", Options{Clock: tick(time.Millisecond), Today: "sd+none", Iterations: 3000})
	best := time.Duration(-1)
	outpaced := 0
	var names []string
	for _, u := range v.Trials {
		h := u.History
		if slices.Contains(names, h.Pairing) {
			t.Errorf("%s ran twice", h.Pairing)
		}
		names = append(names, h.Pairing)
		switch {
		case h.Stop == trace.Converged && (best < 0 || h.OwnTime < best):
			best = h.OwnTime
		case h.Stop == trace.Outpaced:
			outpaced++
		case !h.Stop.Ended():
			t.Errorf("%s is %s although the race is over", h.Pairing, h.Stop)
		}
		if h.Today && h.Stop == trace.Outpaced {
			t.Error("today's pairing was ended")
		}
	}
	if len(v.Trials) < 10 || outpaced == 0 {
		t.Errorf("%d trials, %d outpaced: %v", len(v.Trials), outpaced, names)
	}
	for _, u := range v.Trials {
		if h := u.History; h.Stop == trace.Outpaced && h.OwnTime < best {
			t.Errorf("%s was outpaced after %v, before the best's %v", h.Pairing, h.OwnTime, best)
		}
	}
	if got := v.Choice.Ranked[0]; got.Pairing != v.Choice.Pairing || got.Seconds != best.Seconds() {
		t.Errorf("chose %s with %g s, the best has %v", got.Pairing, got.Seconds, best)
	}
}

// Outpaced and other trials of a race have the iterates they have alone.
func TestRaceLeavesIteratesAlone(t *testing.T) {
	v := ended(t, "sample:duct:20", Options{})
	for _, u := range v.Trials {
		h := u.History
		if len(h.Records) < 2 || h.Direct {
			continue
		}
		alone := only(t, ended(t, "sample:duct:20", Options{Pairs: []string{h.Pairing}}))
		for i := range min(len(h.Records), len(alone.Records)) {
			a, b := h.Records[i], alone.Records[i]
			if a.Residual != b.Residual || a.MatVecs != b.MatVecs {
				t.Errorf("%s parts at iteration %d: %g and %g", h.Pairing, a.Iter, a.Residual, b.Residual)
				break
			}
		}
	}
}

// What a finding about the system offers is raced: of an indefinite matrix
// that a shift makes definite, the factors of the shifted one.
func TestRaceTriesWhatFindingsOffer(t *testing.T) {
	v := ended(t, "sample:acoustics", Options{})
	if !slices.ContainsFunc(v.Trials, func(u Trial) bool { return strings.HasPrefix(u.History.Pairing, "shift:") }) {
		t.Error("no pairing with a shift was raced")
	}
}

// The findings name the winner that the choice names.
func TestOneWinner(t *testing.T) {
	v := ended(t, "sample:plate:40", Options{Today: "sd+none", Iterations: 300})
	for _, f := range v.Findings {
		if f.Rule == "today-beaten" {
			if len(f.Try) != 1 || f.Try[0] != v.Choice.Pairing {
				t.Errorf("%s, but the choice is %s", f.Claim, v.Choice.Pairing)
			}
			return
		}
	}
	t.Errorf("nothing beats steepest descent: %+v", v.Findings)
}
