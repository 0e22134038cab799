package tui

import (
	"slices"

	"dwindle/engine"
	"dwindle/engine/trace"
)

// aside says whether a trial matters little for the race: it was outpaced,
// refused or stopped by its user.
func aside(h *trace.History) bool {
	switch h.Stop {
	case trace.Outpaced, trace.Refused, trace.Cancelled:
		return true
	}
	return false
}

// classes of trials in the part of a list that scrolls: going on, ended, and
// set aside.
const classes = 3

func classOf(h *trace.History) int {
	switch {
	case !h.Stop.Ended():
		return 0
	case !aside(h):
		return 1
	}
	return 2
}

// reached says whether a trial came to an answer.
func reached(h *trace.History) bool {
	return h.Stop == trace.Converged || h.Stop == trace.LeastSquares
}

// visible chooses which of the trials are listed on rows lines, in the order of
// their numbers. Where not all find room, the leader, today's pairing and those
// that converged are always among them, the others scroll beside them with the
// picked one in sight: those that go on first, those that matter little last.
func (v *trialsView) visible(m *model, rows int) []int {
	trials := m.snap.Trials
	n := len(trials)
	if rows <= 0 {
		return nil
	}
	if n <= rows {
		v.first = 0
		return upTo(n)
	}
	shown := v.pinned(m, max(rows-2, min(rows-1, 1)))
	var rest []int
	for class := range classes {
		for i := range trials {
			if classOf(&trials[i].History) == class && !slices.Contains(shown, i) {
				rest = append(rest, i)
			}
		}
	}
	room := min(rows-len(shown), len(rest))
	at := slices.Index(rest, v.index(m))
	if at < 0 {
		at = min(v.first, len(rest)-1) // a pinned one is picked: the window stays
	}
	v.first = scroll(v.first, at, len(rest), room)
	shown = append(shown, rest[v.first:v.first+room]...)
	slices.Sort(shown)
	return shown
}

// pinned are at most most trials that never scroll away: today's, the leader,
// and those that reached the target, the soonest first.
func (v *trialsView) pinned(m *model, most int) []int {
	var out []int
	pin := func(i int) {
		if i >= 0 && len(out) < most && !slices.Contains(out, i) {
			out = append(out, i)
		}
	}
	trials := m.snap.Trials
	pin(leader(m.snap))
	pin(slices.IndexFunc(trials, func(t engine.Trial) bool { return t.History.Today }))
	var met []int
	for i := range trials {
		if reached(&trials[i].History) {
			met = append(met, i)
		}
	}
	slices.SortStableFunc(met, func(a, b int) int {
		return int(trials[a].History.OwnTime - trials[b].History.OwnTime)
	})
	for _, i := range met {
		pin(i)
	}
	return out
}

// leader is the place of the trial that is recommended; before there is one, of
// the trial whose true residual is least; -1 if none has any.
func leader(s engine.Snapshot) int {
	best := -1
	for i := range s.Trials {
		h := &s.Trials[i].History
		if h.Pairing == s.Choice.Pairing {
			return i
		}
		if finite(h.TrueResidual) && (best < 0 || h.TrueResidual < s.Trials[best].History.TrueResidual) {
			best = i
		}
	}
	return best
}

// upTo is 0, 1, ..., n-1.
func upTo(n int) []int {
	out := make([]int, n)
	for i := range out {
		out[i] = i
	}
	return out
}
