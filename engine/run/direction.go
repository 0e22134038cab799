package run

import (
	"context"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
	"dwindle/engine/trace"
)

// refineSteps is how many products, off the clock, may go into making a
// direction of negative curvature show the rows that carry it.
const refineSteps = 80

// judgeEvents stamps the events of a step with the iteration and holds a
// negative curvature against its rounding bound, once a trial.
func (t *Trial) judgeEvents(events []trace.Event, iter int) []trace.Event {
	for i := range events {
		e := &events[i]
		e.Iter = uint32(iter)
		for k := range e.Rows {
			e.Rows[k].Row = t.fileRow(e.Rows[k].Row)
		}
		if (e.Kind == trace.NegativeCurvature || e.Kind == trace.ZeroCurvature) && !t.turned {
			t.judgeCurvature(e)
		}
	}
	return events
}

func (t *Trial) fileRow(i int) int {
	if t.back == nil {
		return i
	}
	return t.back.Row(i)
}

// judgeCurvature evaluates pᵀAp in the user's units with a rigorous rounding
// bound. Proved, the direction is improved towards the smallest eigenvalue,
// so that the rows that carry it stand out, and judged again.
func (t *Trial) judgeCurvature(e *trace.Event) {
	c, ok := t.solver.(krylov.Curver)
	m := t.sys.Matrix()
	if !ok || m == nil {
		return
	}
	p, _ := c.Curvature()
	v := make([]float64, len(p))
	if t.back == nil {
		copy(v, p)
	} else {
		t.back.Solution(v, p)
	}
	t.weigh(e, m, v)
	if !e.Proved() {
		return
	}
	t.turned = true
	better, _ := spectrum.RefineNegative(context.Background(), m, v, refineSteps)
	sharper := *e
	t.weigh(&sharper, m, better)
	if sharper.Proved() && sharper.Value < e.Value {
		*e, v = sharper, better
	}
	t.keep(CurvatureVector, v)
}

// weigh sets the event's Rayleigh quotient, bounds and rows for direction v.
func (t *Trial) weigh(e *trace.Event, m *linear.CSR, v []float64) {
	size := linear.Dot(v, v)
	value, bound, slack := linear.Curvature(m, v, t.limits.Delta)
	e.Quantity, e.Value, e.Scale, e.Slack = "p'Ap/p'p", value/size, bound/size, slack/size
	e.Kind = trace.NegativeCurvature
	if !e.Proved() {
		e.Kind = trace.ZeroCurvature
	}
	e.Rows = nil
	for i, x := range v {
		if share := x * x / size; share > 1e-6 {
			e.Rows = trace.KeepLargest(e.Rows, trace.RowShare{Row: i, Share: share})
		}
	}
}
