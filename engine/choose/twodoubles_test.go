package choose

import (
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// inTwo is a trial that reached the target with x in two doubles.
func inTwo(own time.Duration) trace.History {
	h := trial("richardson:1,2+lu", trace.Converged, own/2, own)
	h.TwoDoubles, h.Rounded, h.TrueResidual, h.Direct = true, 7.6e-8, 4e-12, true
	return h
}

// However quick, x in two doubles is never chosen over an answer in one,
// doubtful ones among them, whatever the goal; and it is measured against none
// of them.
func TestTwoDoublesRankBehindOne(t *testing.T) {
	doubtful := trial("cg+none", trace.Converged, 0, 9*second)
	doubtful.UnsolvedRows, doubtful.MemoryBytes = 3, 1000
	sound := trial("minres+none", trace.Converged, 0, 10*second)
	sound.MemoryBytes = 2000
	for _, goal := range append([]string{""}, Goals...) {
		c := Rank(facts(inspect.Yes, inspect.Yes), []trace.History{inTwo(second), doubtful, sound}, nil, goal, 0)
		if c.Pairing == "richardson:1,2+lu" || c.Ranked[2].Pairing != "richardson:1,2+lu" {
			t.Errorf("goal %q: chose %s of %+v", goal, c.Pairing, c.Ranked)
		}
		if all := strings.Join(append(c.Doubts, c.Reasons...), "; "); strings.Contains(all, "richardson:1,2+lu") {
			t.Errorf("goal %q: told beside what is chosen: %s", goal, all)
		}
	}
	c := Rank(facts(inspect.Yes, inspect.Yes), []trace.History{inTwo(second), sound}, nil, "", 0)
	if len(c.Reasons) < 2 || !strings.Contains(c.Reasons[1], "x kept in two doubles") {
		t.Errorf("the second is not told for what it is: %v", c.Reasons)
	}
}

// Where nothing else gets there it is chosen, and what one double holds is
// told first.
func TestTwoDoublesWhereOneDoesNot(t *testing.T) {
	one := trial("richardson:1+lu", trace.FalselyConverged, second, second)
	one.TrueResidual, one.Componentwise, one.Direct = 1.24e-7, 2e-16, true
	one.Near = &trace.Nearness{Of: "richardson:1,2+lu", Error: 3e-10, Worst: 3e-10, Doubt: 1e-20}
	c := Rank(facts(inspect.No, inspect.No), []trace.History{one, inTwo(2 * second)}, nil, "", 0)
	if c.Pairing != "richardson:1,2+lu" {
		t.Fatalf("chose %q", c.Pairing)
	}
	for i, want := range []string{"richardson:1+lu: 1.2e-07 is about all that double precision gives here; ask for 2e-07", "right to 9 digits",
		"for the tolerance as it is, richardson:1,2+lu keeps x in two doubles", "rounded to one double leaves 7.6e-08"} {
		if !strings.Contains(c.Reasons[i], want) {
			t.Errorf("reason %d is %q, want %q", i, c.Reasons[i], want)
		}
	}
}

// A race starts what is offered where no double holds the tolerance at once,
// even where it would add nothing else, and goes on as if it had not been
// there: it ends no trial, is not ended for its time, and gives nothing to try
// around it.
func TestRaceWithTwoDoubles(t *testing.T) {
	utmost := trial("richardson:1+lu", trace.FalselyConverged, 0, time.Millisecond)
	utmost.TrueResidual, utmost.Componentwise = 1.24e-7, 2e-16
	trials := []trace.History{utmost}
	for range mostInAll {
		trials = append(trials, trial("cg+none", trace.Outpaced, 0, second))
	}
	r := race(trials...)
	if r.Next().Add != nil {
		t.Fatalf("adds %v beyond its limits", r.Next().Add)
	}
	r.Beyond = "richardson:1,2+lu"
	if got := r.Next().Add; !slices.Equal(got, []string{"richardson:1,2+lu"}) {
		t.Errorf("adds %v", got)
	}
	r.Tried["richardson:1,2+lu"] = true
	if got := r.Next().Add; got != nil {
		t.Errorf("adds %v once it was tried", got)
	}
	slow := running("richardson:1,2+lu", 50*second, 100*second)
	slow.TwoDoubles = true
	if o := race(utmost, slow, running("cg+none", 0, second)).Next(); len(o.End) != 1 || o.End[0].Trial != 2 {
		t.Errorf("beside an answer in one double %+v", o.End)
	}
	late := race(running("cg+none", 0, 100*second), inTwo(time.Millisecond), running("cg+jacobi", 0, 50*second))
	if o := late.Next(); len(o.End) > 0 {
		t.Errorf("x in two doubles ends %+v", o.End)
	}
	if best, found := late.best(); found || len(late.leading()) > 0 {
		t.Errorf("it leads: %v", best.Pairing)
	}
}
