package recording

import (
	"errors"
	"reflect"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// part is what one frame of a file adds to those before it: what has changed,
// and of histories what is new.
type part struct {
	Elapsed time.Duration
	About   *About         // nil: as before
	Facts   *inspect.Facts // nil: as before
	Order   []int          // the numbers of all trials, in order
	Trials  []change       // of trials in which something moved
	Answer  *Answer        // nil: as before
}

// empty says that nothing is new but the time and the order of the trials.
func (p part) empty() bool {
	return p.About == nil && p.Facts == nil && len(p.Trials) == 0 && p.Answer == nil
}

// change is what happened to a trial since the part before.
type change struct {
	ID      int
	Rest    trace.History // without what follows
	Keep    int           // so many earlier records stand
	Records columns
	Events  []trace.Event
	Alphas  []float64
	Betas   []float64
	Vectors map[string][]float64 // nil: as before
}

// columns are records by columns: bits come back as they were, and zeros of
// either sign with them.
type columns struct {
	Iter, MatVecs, Solves        []uint32
	Clock                        []time.Duration
	Residual, Audit, Alpha, Beta []float64
}

func columnsOf(list []trace.Record) columns {
	var c columns
	for _, r := range list {
		c.Iter, c.MatVecs, c.Solves = append(c.Iter, r.Iter), append(c.MatVecs, r.MatVecs), append(c.Solves, r.Solves)
		c.Clock = append(c.Clock, r.Clock)
		c.Residual, c.Audit = append(c.Residual, r.Residual), append(c.Audit, r.Audit)
		c.Alpha, c.Beta = append(c.Alpha, r.Alpha), append(c.Beta, r.Beta)
	}
	return c
}

// appendTo adds the records to list.
func (c columns) appendTo(list []trace.Record) ([]trace.Record, error) {
	n := len(c.Iter)
	for _, k := range []int{len(c.MatVecs), len(c.Solves), len(c.Clock), len(c.Residual), len(c.Audit), len(c.Alpha), len(c.Beta)} {
		if k != n {
			return nil, errors.New("is damaged: columns of different length")
		}
	}
	for i := range n {
		list = append(list, trace.Record{Iter: c.Iter[i], MatVecs: c.MatVecs[i], Solves: c.Solves[i], Clock: c.Clock[i],
			Residual: c.Residual[i], Audit: c.Audit[i], Alpha: c.Alpha[i], Beta: c.Beta[i]})
	}
	return list, nil
}

// told is how much of a trial stands in the file already.
type told struct {
	state   state
	records int
	last    uint32 // iteration of the last of them
	events  int
	coeffs  int
}

// state changes whenever anything of a history does.
type state struct {
	stop                           trace.Stop
	today                          bool
	own                            time.Duration
	iterations, records            int
	events, coeffs, predictions    int
	errors, locks, without, copies int
	counts, columns, harmonic      int
	reruns                         int
	probe                          *trace.MProbe
	near                           *trace.Nearness
	vectors                        uintptr // of the map: a changed one is another
}

func stateOf(h *trace.History) state {
	return state{stop: h.Stop, today: h.Today, own: h.OwnTime, iterations: h.Iterations, records: len(h.Records),
		events: len(h.Events), coeffs: len(h.Alphas), predictions: len(h.Predictions), errors: len(h.EnergyErrors),
		locks: len(h.Locks), without: len(h.Without), copies: h.Delay, counts: len(h.Counts), columns: len(h.Columns), reruns: len(h.Reruns),
		harmonic: len(h.Harmonic), probe: h.Probe, near: h.Near, vectors: reflect.ValueOf(h.Vectors).Pointer()}
}

// since is the change of a trial since t was told, and renews t.
func (t *told) since(id int, h trace.History) (change, bool) {
	now := stateOf(&h)
	if t.state == now {
		return change{}, false
	}
	c := change{ID: id, Keep: t.records, Rest: h}
	if n := t.records; n > len(h.Records) || n > 0 && h.Records[n-1].Iter != t.last { // the history was thinned
		c.Keep = 0
	}
	c.Records, c.Events = columnsOf(h.Records[c.Keep:]), h.Events[t.events:]
	k := min(len(h.Alphas), len(h.Betas))
	c.Alphas, c.Betas = h.Alphas[t.coeffs:k], h.Betas[t.coeffs:k]
	if now.vectors != t.state.vectors {
		c.Vectors = h.Vectors
	}
	c.Rest.Records, c.Rest.Events, c.Rest.Alphas, c.Rest.Betas, c.Rest.Vectors = nil, nil, nil, nil, nil
	*t = told{state: now, records: len(h.Records), events: len(h.Events), coeffs: k}
	if t.records > 0 {
		t.last = h.Records[t.records-1].Iter
	}
	return c, true
}

// after is the history that h becomes by the change.
func (c change) after(h trace.History) (trace.History, error) {
	if c.Keep < 0 || c.Keep > len(h.Records) {
		return h, errors.New("is damaged: a record is missing")
	}
	next := c.Rest
	var err error
	if next.Records, err = c.Records.appendTo(h.Records[:c.Keep]); err != nil {
		return h, err
	}
	next.Events = append(h.Events, c.Events...)
	next.Alphas, next.Betas = append(h.Alphas, c.Alphas...), append(h.Betas, c.Betas...)
	if next.Vectors = c.Vectors; c.Vectors == nil {
		next.Vectors = h.Vectors
	}
	return next, nil
}
