package choose

import (
	"slices"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// broken is a trial whose set-up broke down at a pivot.
func broken(pairing string, pivot float64) trace.History {
	h := trial(pairing, trace.BrokeDown, 0, time.Millisecond)
	h.Iterations, h.Notes.Broke = 0, []trace.Pivot{{Row: 3, Value: pivot}}
	return h
}

// begun is a trial that has iterated.
func begun(pairing string) trace.History {
	h := running(pairing, 0, second)
	h.Records = make([]trace.Record, 3)
	return h
}

func TestFated(t *testing.T) {
	three := []trace.History{broken("match/gmres:30+ilu:0", 1e-30), broken("match/gmres:30+ilut", 1e-30), broken("gmres:30+schur", 1e-30)}
	for _, c := range []struct {
		what     string
		trials   []trace.History
		singular inspect.Answer
		zeros    int
		pairing  string
		want     bool
	}{
		{"the same M under another solver", three[:1], inspect.No, 0, "match/bicgstab+ilu:0", true},
		{"another order of A", three[:1], inspect.No, 0, "rcm/bicgstab+ilu:0", false},
		{"two of a kind", three[:2], inspect.Yes, 0, "gmres:30+ras", false},
		{"three of a kind, A singular", three, inspect.Yes, 0, "gmres:30+ras", true},
		{"three of a kind, zeros on the diagonal", three, inspect.No, 1, "gmres:30+ras", true},
		{"three of a kind that nothing explains", three, inspect.No, 0, "gmres:30+ras", false},
		{"a pivot of zero explains itself", append(slices.Clone(three[:2]), broken("gmres:30+block-jacobi", 0)), inspect.No, 0, "gmres:30+ras", true},
		{"pivoting makes up for zeros", three, inspect.No, 1, "gmres:30+ilutp", false},
		{"pivoting makes up for no singular A", three, inspect.Yes, 0, "gmres:30+ilutp", true},
		{"one of the kind was built", append(slices.Clone(three), begun("gmres:30+milu")), inspect.Yes, 0, "gmres:30+ras", false},
		{"milu adds to its pivots", three, inspect.No, 1, "gmres:30+milu", false},
		{"what divides by no pivot", three, inspect.Yes, 1, "gmres:30+spai", false},
		{"the same kind three times is one", []trace.History{three[0], broken("gmres:30+ilu:1", 0), broken("rcm/gmres:30+ilu:0", 0)}, inspect.Yes, 0, "gmres:30+ras", false},
	} {
		f := facts(inspect.No, inspect.Unknown)
		f.Singular.Answer, f.DiagZero = c.singular, c.zeros
		if got := (Race{Facts: f, Trials: c.trials}).fated(c.pairing); got != c.want {
			t.Errorf("%s: %s fated %v, want %v", c.what, c.pairing, got, c.want)
		}
	}
}

// A race offers nothing that is fated, and goes on with what is not.
func TestRaceLeavesOutTheFated(t *testing.T) {
	f := facts(inspect.No, inspect.Unknown)
	f.Singular.Answer = inspect.Yes
	r := Race{Facts: f, Trials: []trace.History{broken("gmres:30+ilu", 0), broken("gmres:30+ilut", 0), broken("gmres:30+milu", 0)}}
	r.Tried = tried(r.Trials)
	for _, p := range []string{"ras", "ilutp", "block-jacobi", "jacobi", "ssor", "none"} {
		r.Candidates = append(r.Candidates, Candidate{Pairing: "bicgstab+" + p, Solver: "bicgstab", Precond: p})
	}
	if got := r.untried(10); !slices.Equal(got, []string{"bicgstab+ssor", "bicgstab+jacobi", "bicgstab+none"}) {
		t.Errorf("offers %v", got)
	}
}
