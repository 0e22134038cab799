package run

import (
	"math"
	"slices"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// unit is the rounding unit of double precision.
const unit = 1.0 / (1 << 53)

// record turns a reading into a record, with an audit where one is due, and
// ends the trial where an ending rule holds.
func (t *Trial) record(r trace.Reading, first bool) {
	h := &t.hist // written by the bench's goroutine alone; readers copy under mu
	iter := h.Iterations
	rec := trace.Record{Iter: uint32(iter), MatVecs: t.a.uses, Solves: t.m.uses, Clock: h.OwnTime,
		Residual: over(r.Residual, t.ownB), Audit: math.NaN(), Alpha: r.Alpha, Beta: r.Beta}
	events := t.judgeEvents(r.Events, iter)
	own := t.ownRelative(r.Residual)
	backward := over(r.Residual, t.sizes.fro*h.SolutionNorm+t.ownB)
	if first || h.Norm == trace.NormalEquationNorm {
		backward = math.NaN()
	}
	marked := t.marks.see(iter, t.limits.Target.Tol, numbers{r: r.Residual, b: t.ownB, r0: t.own0,
		backward: backward, precond: h.Norm == trace.PrecondNorm || h.Norm == trace.LeftNorm, normal: h.Norm == trace.NormalEquationNorm, alpha: r.Alpha, beta: r.Beta, firstStep: first})
	var a *audit
	due := t.sched.due(iter, own, t.limits.Target.Tol)
	if due || marked || r.Done || t.atLimit(iter) || t.atUnreachable(rec.Residual) {
		found := t.audit(t.limits.Unreachable > 0 || r.Done || t.atLimit(iter))
		a = &found
		rec.Audit = over(a.true2, t.sizes.b)
		t.waypoint(iter)
	}
	t.mu.Lock()
	h.Records = append(h.Records, rec)
	h.Events = append(h.Events, events...)
	h.Residual = rec.Residual
	h.Products, h.PrecondUses = int(t.a.uses), t.precondUses()
	if a != nil {
		t.noteAudit(a, rec, iter)
	}
	t.mu.Unlock()
	t.look(r.Done)
	if !t.quiet {
		t.learn()
	}
	t.judge(r, rec, own, a)
	if !t.ended() {
		t.predict(own)
	}
	t.thin()
}

// atUnreachable says that the residual has come down to the part of b that is
// out of reach: then every iteration is audited, for past the least-squares
// solution the iterates of a minimal residual method run off along the null
// space (Choi, Paige and Saunders 2011).
func (t *Trial) atUnreachable(residual float64) bool {
	return t.limits.Unreachable > t.limits.Target.Tol && residual <= t.limits.Unreachable*(1+1e-6)
}

// ownRelative holds the method's own number against the stopping rule, with
// what the last audit told of x.
func (t *Trial) ownRelative(r float64) float64 {
	s := scales{b: t.ownB, r0: t.own0, a: t.sizes.aInf, x: t.ending.xInf, bMax: t.sizes.bInf, r: r}
	return t.limits.Target.relative(r, s)
}

func (t *Trial) precondUses() int {
	if t.method.Precond.Name == "none" {
		return 0
	}
	return int(t.m.uses)
}

// noteAudit writes the audit into the history; t.mu is held.
func (t *Trial) noteAudit(a *audit, rec trace.Record, iter int) {
	h := &t.hist
	h.TrueResidual, h.SolutionNorm = rec.Audit, a.x2
	h.BestTrue = math.Min(h.BestTrue, rec.Audit)
	h.Rounded = over(a.rounded, t.sizes.b)
	h.Backward = over(a.rInf, t.sizes.aInf*a.xInf+t.sizes.bInf)
	h.WouldStop = t.marks.audited(iter, rec.Audit)
	h.Normal, h.Fields = a.normal, a.fields
	if floor := unit * t.sizes.a2 * a.x2 / t.sizes.b; !h.TwoDoubles && !(floor <= h.Floor) {
		h.Floor = floor // u‖A‖max‖x_j‖/‖b‖ (Greenbaum 1997), an upper estimate
	}
	if t.sys.Exact != nil {
		linear.Lin(t.scratch.w, 1, t.scratch.x, -1, t.sys.Exact)
		h.Error = over(linear.Norm2(t.scratch.w), linear.Norm2(t.sys.Exact))
	}
	if h.Floor != h.Floor {
		h.Floor = math.NaN()
	}
}

// look refreshes the condition estimate when the Lanczos matrix has grown by
// a twentieth, and at the end.
func (t *Trial) look(done bool) {
	if t.lanczos == nil {
		return
	}
	k := t.lanczos.Order()
	if k == 0 || (!done && k > 20 && float64(k) < 1.05*float64(t.lanczosAt)) || k == t.lanczosAt {
		return
	}
	t.lanczosAt = k
	e := t.lanczos.Extremes()
	c := trace.Condition{Of: "M⁻¹A", Smallest: e.Smallest, Largest: e.Largest,
		Estimate: e.Condition(), Settled: e.Settled, Negative: e.Negative > 0 || t.spoiltM()}
	if t.method.Precond.Name == "none" {
		c.Of = "A"
	}
	t.mu.Lock()
	t.hist.Condition = c
	t.mu.Unlock()
}

// spoiltM says that M has been seen not to be positive definite: then no
// coefficient tells of a spectrum.
func (t *Trial) spoiltM() bool {
	t.mu.Lock()
	defer t.mu.Unlock()
	return slices.ContainsFunc(t.hist.Events, func(e trace.Event) bool { return e.Kind == trace.PrecondIndefinite && e.Value < 0 })
}

// maxRecords bounds a history; beyond it every other pair of records gives
// way, keeping the extremes of each four and all audits.
const maxRecords = 1 << 17

func (t *Trial) thin() {
	if len(t.hist.Records) < maxRecords {
		return
	}
	old := t.hist.Records
	kept := make([]trace.Record, 0, maxRecords)
	for i := 0; i < len(old); i += 4 {
		bucket := old[i:min(i+4, len(old))]
		lo, hi := 0, 0
		for k, r := range bucket {
			if r.Residual < bucket[lo].Residual {
				lo = k
			}
			if r.Residual > bucket[hi].Residual {
				hi = k
			}
		}
		for k, r := range bucket {
			if k == lo || k == hi || r.Audited() {
				kept = append(kept, r)
			}
		}
	}
	t.mu.Lock()
	t.hist.Records = kept
	t.mu.Unlock()
}
