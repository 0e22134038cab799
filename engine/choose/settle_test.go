package choose

import (
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// brisk is a trial of some microseconds with counts.
func brisk(pairing string, own time.Duration, iterations int, entries int64) trace.History {
	h := trial(pairing, trace.Converged, 0, own)
	h.Iterations, h.Products, h.PrecondUses, h.Notes.Entries = iterations, iterations, iterations, entries
	return h
}

// Times too short for the clock: the same choice whatever the clock says.
func TestShortTimesRankByWork(t *testing.T) {
	const us = time.Microsecond
	f := facts(inspect.Yes, inspect.Yes)
	f.Entries = 500
	for _, clock := range [][3]time.Duration{{90 * us, 60 * us, 50 * us}, {50 * us, 60 * us, 90 * us}} {
		trials := []trace.History{brisk("cg+none", clock[0], 200, 0), brisk("cg+ic:0", clock[1], 12, 300), brisk("cg+milu:0", clock[2], 12, 320)}
		trials[0].Today = true
		c := Rank(f, trials, nil, "", 0)
		if c.Pairing != "cg+ic:0" {
			t.Errorf("by clock %v: chose %s", clock, c.Pairing)
		}
		if !(c.Gain.Times == 0 || c.Gain.ByWork) {
			t.Errorf("a gain of %g from microseconds", c.Gain.Times)
		}
	}
	slow := brisk("cg+jacobi", 3000*us, 2, 100) // little work by count, much by the clock
	if c := Rank(f, []trace.History{brisk("cg+ic:0", 60*us, 12, 300), slow}, nil, "", 0); c.Pairing != "cg+ic:0" {
		t.Errorf("chose %s, which takes far longer", c.Pairing)
	}
}

// Where short trials were repeated and their ranges lie apart, the clock does
// tell them from each other, whatever is counted.
func TestRepeatedShortTimesRankByTheClock(t *testing.T) {
	const us = time.Microsecond
	f := facts(inspect.Yes, inspect.Yes)
	f.Entries = 500
	less, more := brisk("cg+ic:0", 900*us, 12, 300), brisk("cg+none", 400*us, 200, 0)
	for _, r := range [][2]time.Duration{{910 * us, 410 * us}, {800 * us, 390 * us}} {
		less.Reruns = append(less.Reruns, trace.Run{Own: r[0]})
		more.Reruns = append(more.Reruns, trace.Run{Own: r[1]})
	}
	if c := Rank(f, []trace.History{less, more}, nil, "", 0); c.Pairing != "cg+none" {
		t.Errorf("chose %s, whose runs all take half as long again", c.Pairing)
	}
	less.Reruns[0].Own, less.Reruns[1].Own = 420*us, 390*us
	if c := Rank(f, []trace.History{less, more}, nil, "", 0); c.Pairing != "cg+ic:0" {
		t.Errorf("chose %s, though the other was once as quick", c.Pairing)
	}
}

// A direct solve is no one-iteration bargain: making its factors counts.
func TestWorkCountsFactors(t *testing.T) {
	f := facts(inspect.Yes, inspect.Yes)
	f.N, f.Entries = 900, 4380
	complete := brisk("richardson:1+cholesky", time.Millisecond, 1, 90_000)
	if w, v := work(f, complete), work(f, brisk("cg+ic:0", time.Millisecond, 20, 2640)); w < 5*v {
		t.Errorf("complete factors %g, cg %g", w, v)
	}
}

// Of those that the clock does not tell apart, the plainest is first.
func TestPlainestOfEquals(t *testing.T) {
	a, b := trial("symmlq+ilu:0", trace.Converged, 0, time.Second), trial("cg+ic:0", trace.Converged, 0, 1050*time.Millisecond)
	far := trial("cg+none", trace.Converged, 0, 2*time.Second)
	if c := Rank(facts(inspect.Yes, inspect.Yes), []trace.History{a, b, far}, nil, "", 0); c.Pairing != "cg+ic:0" {
		t.Errorf("chose %s", c.Pairing)
	}
}

// Factors of a matrix that is singular to rounding are no recommendation,
// however quick.
func TestNoFactorsOfSingular(t *testing.T) {
	f := facts(inspect.Yes, inspect.No)
	direct := trial("richardson:1+cholesky", trace.Converged, 0, time.Second)
	direct.Direct = true
	trials := []trace.History{direct, trial("cg+ic:0", trace.Converged, 0, 2*time.Second)}
	if c := Rank(f, trials, nil, "", 0); c.Pairing != "richardson:1+cholesky" {
		t.Errorf("chose %s of a regular matrix", c.Pairing)
	}
	f.Singular.Answer = inspect.Yes
	if c := Rank(f, trials, nil, "", 0); c.Pairing != "cg+ic:0" {
		t.Errorf("chose %s of a singular matrix", c.Pairing)
	}
}

// Without its stored zeros A has fewer entries to multiply with: 1000 of 2000,
// half of 800 stored ones being zero. Products of cg read 10 vectors beside.
func TestPrunedProductsAreCountedWithoutZeros(t *testing.T) {
	f := facts(inspect.Yes, inspect.Yes)
	f.N, f.Entries, f.Stored, f.ExplicitZeros = 100, 2000, 800, 400
	for pairing, want := range map[string]float64{"cg+none": 3000, "prune/cg+none": 2000, "prune,scale/cg+none": 2000,
		"scale/cg+none": 3000, "prune/cg+poly:4": 2000 + eachUse*4*1000} {
		h := brisk(pairing, time.Millisecond, 1, 0)
		if got := work(f, h) - making(bare(split(pairing).precond), 0, 100); got != want {
			t.Errorf("%s: %g, want %g", pairing, got, want)
		}
	}
}
