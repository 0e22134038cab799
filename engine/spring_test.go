package engine

import (
	"context"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// Poisson 20 x 20 with one spring of stiffness −2.3 between unknowns 211 and
// 212: every diagonal entry and 2x2 minor stays positive, the smallest
// eigenvalue is −0.384 (check value of the project, dense in NumPy).
func TestOneNegativeSpringIsProvedAndNamed(t *testing.T) {
	s, err := read(context.Background(), "sample:plate:20", nil, 0, nil)
	if err != nil {
		t.Fatal(err)
	}
	m := s.Matrix()
	var e []linear.Entry
	for i := 0; i < m.NRows; i++ {
		cols, vals := m.Row(i)
		for k, c := range cols {
			e = append(e, linear.Entry{I: i, J: int(c), V: vals[k]})
		}
	}
	const p, q, spring = 210, 211, -2.3
	e = append(e, linear.Entry{I: p, J: p, V: spring}, linear.Entry{I: q, J: q, V: spring},
		linear.Entry{I: p, J: q, V: -spring}, linear.Entry{I: q, J: p, V: -spring})
	path := written(t, linear.FromEntries(m.NRows, m.NRows, e), 0)
	v := ended(t, path, Options{Pairs: []string{"cg+none"}, Tol: 1e-10})
	f, ok := finding(v, "outside-assumptions", "cg+none")
	if !ok || f.Certainty != inspect.Proved {
		t.Fatalf("the loss of definiteness is not proved:%s", rules(v))
	}
	met := trace.Event{}
	for _, e := range only(t, v).Events {
		if e.Kind == trace.NegativeCurvature && e.Proved() {
			met = e
		}
	}
	if len(met.Rows) < 2 || met.Rows[0].Row+met.Rows[1].Row != p+q || met.Value < -0.3845 || met.Value > -0.38 {
		t.Errorf("cg met %+v, want a quotient near -0.384 carried by rows %d and %d (from 0)", met, p, q)
	}
	t.Log(f.Claim)
	rows := f.Evidence[0].Rows
	if len(rows) < 2 || !(rows[0] == p && rows[1] == q || rows[0] == q && rows[1] == p) {
		t.Errorf("rows %v carry it, want 210 and 211 (from 0)", rows)
	}
	if w := v.Facts.PositiveDefinite; w.Answer != inspect.No || w.Certainty != inspect.Proved {
		t.Errorf("the facts say %s, %s: %s", w.Answer, w.Certainty, w.Why)
	}
}
