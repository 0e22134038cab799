package run

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
	"dwindle/engine/trace"
)

// apart is the ratio of neighbouring eigenvalues from which the lower ones
// stand apart from the rest.
const apart = 10

// deflated is how many eigenvalues, at most, a counterfactual takes out.
const deflated = 10

// tellWithout writes what a converged trial would have needed on a changed
// spectrum: conjugate gradients run on the spectrum that the trial saw, first
// as it is, to hold the model against the trial, then changed.
func (t *Trial) tellWithout(c []spectrum.Cluster) {
	low := outliers(c)
	var values []float64
	if t.method.Precond.Name == "none" && t.back == nil {
		values = singletons(t.sys.Matrix())
	}
	if low == 0 && len(values) == 0 {
		return
	}
	m, ok := newModel(c, t.hist.Betas, t.hist.Iterations)
	if !ok {
		return
	}
	var out []trace.Counterfactual
	if f, ok := m.without(trace.Deflated, func(i int) bool { return i < low }); ok {
		out = append(out, f)
	}
	if f, ok := m.without(trace.WithoutSingletons, func(i int) bool { return near(values, c[i]) }); ok {
		out = append(out, f)
	}
	t.mu.Lock()
	t.hist.Without = out
	t.mu.Unlock()
}

// model is a trial as its own clusters make it again.
type model struct {
	c      []spectrum.Cluster
	target float64 // the residual at the end, relative to the first
	its    int     // of the trial
	own    int     // of the model
}

// newModel runs the model; ok is false where it misses the trial's own count,
// or would cost too much.
func newModel(c []spectrum.Cluster, betas []float64, its int) (m model, ok bool) {
	square := 1.0
	for _, b := range betas {
		square *= b
	}
	m = model{c: c, target: math.Sqrt(square), its: its}
	if !(m.target > 0 && m.target < 1) || len(c)*its > costly {
		return m, false
	}
	m.own = spectrum.Steps(c, m.target, 2*its)
	return m, math.Abs(float64(m.own-its)) <= modelled*float64(its)
}

// without runs the model without the clusters that drop names.
func (m model) without(what string, drop func(i int) bool) (trace.Counterfactual, bool) {
	f := trace.Counterfactual{What: what}
	rest, weight := spectrum.Without(m.c, func(i int, c spectrum.Cluster) bool {
		if drop(i) {
			f.Removed, f.Largest = f.Removed+1, c.Value
		}
		return drop(i)
	})
	if f.Removed == 0 || len(rest) == 0 {
		return f, false
	}
	goal := m.target
	if what == trace.WithoutSingletons { // then b is shorter, too
		goal *= math.Sqrt(1 - weight)
	}
	f.Next = rest[0].Value
	f.Iterations = spectrum.Steps(rest, goal, 2*m.its) * m.its / max(1, m.own)
	return f, true
}

// costly bounds the clusters times the iterations of a model.
const costly = 1 << 22

// modelled is how far the model may miss the trial's own count.
const modelled = 0.1

// outliers is how many of the smallest eigenvalues stand apart from the rest:
// all settled, and the widest of the gaps above them at least a factor of ten.
func outliers(c []spectrum.Cluster) int {
	best, k := float64(apart), 0
	for i := 0; i+1 < len(c) && i < deflated && c[i].Settled(); i++ {
		if r := c[i+1].Value / c[i].Value; r >= best {
			best, k = r, i+1
		}
	}
	return k
}

// near says whether a cluster is one of the values.
func near(values []float64, c spectrum.Cluster) bool {
	for _, v := range values {
		if math.Abs(c.Value-v) <= 1e-6*v+c.Bound && c.Bound <= 1e-3*v {
			return true
		}
	}
	return false
}

// fewValues bounds the distinct diagonal values of singleton rows.
const fewValues = 32

// singletons returns the distinct diagonal values, where positive and few, of
// the rows that neither hold nor meet an entry off the diagonal.
func singletons(a *linear.CSR) []float64 {
	if a == nil {
		return nil
	}
	coupled := make([]bool, a.NRows)
	diag := make([]float64, a.NRows)
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, c := range cols {
			switch {
			case int(c) == i:
				diag[i] = vals[k]
			case vals[k] != 0:
				coupled[i], coupled[c] = true, true
			}
		}
	}
	var out []float64
	seen := map[float64]bool{}
	for i, v := range diag {
		if coupled[i] || !(v > 0) || seen[v] {
			continue
		}
		seen[v] = true
		if out = append(out, v); len(out) > fewValues {
			return nil
		}
	}
	return out
}
