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

// tellWithout writes what a converged trial would have needed on a changed
// spectrum: conjugate gradients run on the spectrum that the trial saw, first
// as it is, to hold the model against the trial, then changed.
func (t *Trial) tellWithout(c []spectrum.Cluster) {
	its := t.hist.Iterations
	target := 1.0
	for _, b := range t.hist.Betas {
		target *= b
	}
	target = math.Sqrt(target)
	if !(target > 0 && target < 1) || len(c)*its > 1<<25 {
		return
	}
	model := spectrum.Steps(c, target, 2*its)
	if math.Abs(float64(model-its)) > modelled*float64(its) {
		return
	}
	ask := func(what string, drop func(i int, c spectrum.Cluster) bool) {
		rest, weight := spectrum.Without(c, drop)
		if len(rest) == 0 || len(rest) == len(c) {
			return
		}
		goal := target
		if what == trace.WithoutSingletons { // then b is shorter, too
			goal *= math.Sqrt(1 - weight)
		}
		f := trace.Counterfactual{What: what, Removed: len(c) - len(rest), Next: rest[0].Value,
			Iterations: spectrum.Steps(rest, goal, 2*its) * its / max(1, model)}
		for i, k := range c {
			if drop(i, k) {
				f.Largest = k.Value
			}
		}
		t.mu.Lock()
		t.hist.Without = append(t.hist.Without, f)
		t.mu.Unlock()
	}
	if k := outliers(c); k > 0 {
		ask(trace.Deflated, func(i int, _ spectrum.Cluster) bool { return i < k })
	}
	if t.method.Precond.Name == "none" && t.back == nil {
		values := singletons(t.sys.Matrix())
		ask(trace.WithoutSingletons, func(_ int, c spectrum.Cluster) bool { return near(values, c) })
	}
}

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
