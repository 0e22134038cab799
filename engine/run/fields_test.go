package run

import (
	"math"
	"strings"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// twoFields is a system of two uncoupled fields: u, forty rows that one step
// of cg solves (a multiple of I), and p, forty rows of a one-dimensional
// Laplacian whose part of b is 1e-9 of the whole. The 2-norm of the residual
// meets 1e-8 as soon as u is solved, with p untouched.
func twoFields() linear.System {
	const half = 40
	var e []linear.Entry
	b := make([]float64, 2*half)
	of := make([]int32, 2*half)
	for i := range half {
		j := half + i
		e = append(e, linear.Entry{I: i, J: i, V: 1}, linear.Entry{I: j, J: j, V: 2})
		if i > 0 {
			e = append(e, linear.Entry{I: j, J: j - 1, V: -1}, linear.Entry{I: j - 1, J: j, V: -1})
		}
		b[i], b[j], of[j] = 1, 1e-9, 1
	}
	return linear.System{A: linear.FromEntries(2*half, 2*half, e), B: b, Fields: []string{"u", "p"}, FieldOf: of}
}

func endedWith(t *testing.T, l Limits) trace.History {
	t.Helper()
	b := NewBench(twoFields(), l, 0, nil)
	m, err := Parse("cg+none")
	if err != nil {
		t.Fatal(err)
	}
	tr := b.Add(m)
	go b.Run(t.Context())
	b.WaitEnded(t.Context())
	return tr.History()
}

func TestFieldUnsolvedWhileTheNormIsMet(t *testing.T) {
	h := endedWith(t, limits(1e-8, 1000))
	if h.Stop != trace.Converged || len(h.Fields) != 2 {
		t.Fatalf("%s with %d fields", h.Stop, len(h.Fields))
	}
	u, p := h.Fields[0], h.Fields[1]
	if u.Name != "u" || u.Rows != 40 || u.Residual > 1e-8 || p.Name != "p" || p.Residual < 0.1 || p.Componentwise < 0.1 {
		t.Errorf("u %+v, p %+v: p should be left unsolved", u, p)
	}
}

func TestFieldToleranceMustHoldAsWell(t *testing.T) {
	l := limits(1e-8, 1000)
	plain := endedWith(t, l).Iterations
	l.FieldTol = []float64{0, 1e-6}
	h := endedWith(t, l)
	p := h.Fields[1]
	if h.Stop != trace.Converged || !(p.Residual <= 1e-6) || p.Tol != 1e-6 || h.Iterations <= plain {
		t.Errorf("%s after %d its (%d without), p at %g", h.Stop, h.Iterations, plain, p.Residual)
	}
	for _, e := range h.Events {
		if e.Kind == trace.FalseStop {
			t.Errorf("an unsolved field is told as a false stop: %+v", e)
		}
	}
}

func TestFieldLeftAtALimit(t *testing.T) {
	l := limits(1e-8, 5)
	l.FieldTol = []float64{0, 1e-6}
	h := endedWith(t, l)
	if h.Stop != trace.IterationLimit || !strings.Contains(h.Reason, "field p stands at") {
		t.Errorf("%s: %s", h.Stop, h.Reason)
	}
}

func TestFieldNormsDoNotOverflow(t *testing.T) {
	s := linear.System{Fields: []string{"u", "p"}, FieldOf: []int32{0, 0, 1}}
	got := fieldNorms(s, []float64{3e200, 4e200, 1e-200})
	if math.Abs(got[0]-5e200) > 1e185 || got[1] != 0 && math.Abs(got[1]-1e-200) > 1e-215 {
		t.Errorf("%g", got)
	}
}
