package engine

import (
	"context"
	"strings"
	"testing"
	"time"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/engine/run"
	"dwindle/engine/trace"
)

// wobbly is a preconditioner that no catalogue has: each use differs from the
// last (an inner solve that stops early does that), or it is not linear.
type wobbly struct {
	uses   int
	linear bool
}

func (w *wobbly) Apply(dst, x []float64) {
	w.uses++
	for i, v := range x {
		switch {
		case w.linear:
			dst[i] = v * (1 + 1e-3*float64((i+w.uses)%7))
		default:
			dst[i] = v + 0.1*max(v, -v)
		}
	}
}

// Row 11: a preconditioner that changes, or is not linear, in a method that
// supposes one fixed operator; a flexible method is not told so.
func TestNeed11PreconditionerThatChanges(t *testing.T) {
	s, err := read(t.Context(), "sample:plate:12", nil, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	if err := complete(&s, Options{RHS: "ones"}); err != nil {
		t.Fatal(err)
	}
	facts, err := inspect.Inspect(t.Context(), s, nil)
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		solver string
		linear bool
		words  string // empty: silence
	}{
		{"gmres", true, "not one fixed operator"},
		{"gmres", false, "not linear"},
		{"fgmres", true, ""},
	} {
		h := wobblyTrial(t, s, c.solver, c.linear)
		told := ""
		for _, f := range diagnose.Judge(diagnose.Case{Facts: facts, Trials: []trace.History{h}, Tol: 1e-8, StopBy: "rhs"}) {
			if f.Rule == "preconditioner-not-linear" {
				told = f.Claim
			}
		}
		t.Logf("%s: probe %+v: %s", h.Pairing, *h.Probe, told)
		if (told != "") != (c.words != "") || !strings.Contains(told, c.words) {
			t.Errorf("%s with such a preconditioner is told %q, want %q", c.solver, told, c.words)
		}
		if c.linear == (h.Probe.Unrepeatable == 0) || !c.linear && h.Probe.Nonlinear < 1e-3 {
			t.Errorf("the probe shows %+v", *h.Probe)
		}
	}
}

func wobblyTrial(t *testing.T, s linear.System, solver string, fixed bool) trace.History {
	t.Helper()
	m, err := run.Parse(solver + "+jacobi")
	if err != nil {
		t.Fatal(err)
	}
	m.Precond.Name = "wobbly"
	m.Precond.Build = func(context.Context, linear.System, linear.Values, func(float64)) (linear.Applier, trace.BuildNotes, error) {
		return &wobbly{linear: fixed}, trace.BuildNotes{}, nil
	}
	b := run.NewBench(s, run.Limits{Target: run.Target{Rule: run.StopRHS, Tol: 1e-8}, Iterations: 300}, 0, nil)
	ctx, cancel := context.WithTimeout(t.Context(), time.Minute)
	defer cancel()
	u := b.Add(m)
	go b.Run(ctx)
	b.WaitEnded(ctx)
	return u.History()
}
