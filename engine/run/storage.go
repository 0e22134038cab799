package run

import (
	"slices"
	"time"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

const (
	formFrom  = 20_000 // unknowns from which products may take a second form of A
	formShare = 4      // a second form may take one part in so many of the memory limit
)

// form is the second form of the user's matrix, shared by all trials that run
// on it as it stands. Whether there is one depends on the matrix and the limit
// alone, so that no trial's bits depend on its company.
type form struct {
	plan linear.Plan
	op   linear.Operator // nil before the first trial sets up
	cost time.Duration   // of choosing and building it; each trial is charged all of it
}

// foresee chooses the form, nil where the rows are the best.
func foresee(h Have, memory int64, clock Clock) *form {
	if h.matrix == nil || h.n < formFrom {
		return nil
	}
	start := clock()
	f := &form{plan: linear.Foresee(h.matrix)}
	f.cost = clock() - start
	if f.plan.Extra == 0 || memory > 0 && f.plan.Extra > memory/formShare {
		return nil
	}
	return f
}

// need is the memory of the form beside the rows.
func (f *form) need() int64 {
	if f == nil {
		return 0
	}
	return f.plan.Extra
}

// formFor returns the form that the method's products may take: none where an
// exact M leaves one step to do, or x in two doubles needs the rows.
func (b *Bench) formFor(m Method) *form {
	if m.Precond.Exact && m.From == "" || m.inTwoDoubles() {
		return nil
	}
	return b.form
}

// sharesForm says whether the trial multiplies by the user's matrix in the
// form of the bench; prepared matrices have their own.
func (t *Trial) sharesForm() bool { return t.form != nil && len(t.method.Preps) == 0 }

// sharedBytes is the part of the trial's memory that other trials share.
func (t *Trial) sharedBytes() int64 {
	if !t.sharesForm() {
		return 0
	}
	return t.form.need()
}

// formTaken says whether a trial that was let in has the shared form; b.mu is
// held.
func (b *Bench) formTaken() bool {
	return slices.ContainsFunc(b.trials, func(t *Trial) bool {
		return t.sharesForm() && t.History().Stop != trace.Refused
	})
}

// beyond is what the trial would take beside what is in use; b.mu is held.
func (b *Bench) beyond(t *Trial) int64 {
	need := t.History().MemoryBytes
	if b.formTaken() {
		need -= t.sharedBytes()
	}
	return need
}

// readyForm builds the shared form for the first trial that needs it, and
// returns the time that each trial is charged for it.
func (t *Trial) readyForm() time.Duration {
	if !t.sharesForm() {
		return 0
	}
	f := t.form
	if f.op == nil {
		start := t.watch.clock()
		f.op = f.plan.Build()
		f.cost += t.watch.clock() - start
	}
	return f.cost
}

// products returns the prepared A as the solver multiplies by it. A prepared
// matrix takes a second form of its own where that needs no more memory than
// the user's would.
func (t *Trial) products() linear.Operator {
	op := t.prepared.A
	if t.sharesForm() {
		op = t.form.op
	} else if m := t.prepared.Matrix(); m != nil && t.form != nil {
		if p := linear.Foresee(m); p.Extra <= t.form.plan.Extra {
			op = p.Build()
		}
	}
	if s, ok := linear.As[linear.Storage](op); ok {
		t.mu.Lock()
		t.hist.Storage = s.Form()
		t.mu.Unlock()
	}
	return op
}
