package report

import (
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

type trialJSON struct {
	Pairing       string        `json:"pairing"`
	Today         bool          `json:"today"`
	Stop          string        `json:"stop"`
	Iterations    int           `json:"iterations"`
	Products      int           `json:"products"`
	PrecondUses   int           `json:"precond_uses"`
	SetupSeconds  number        `json:"setup_seconds"`
	OwnSeconds    number        `json:"own_seconds"`
	Memory        int64         `json:"memory_bytes"`
	Storage       *string       `json:"storage"`
	Norm          *string       `json:"norm"`
	Residual      number        `json:"residual"`
	TrueResidual  number        `json:"true_residual"`
	Backward      number        `json:"backward_error"`
	Componentwise number        `json:"componentwise_error"`
	Error         number        `json:"error"`
	WouldStop     wouldStopJSON `json:"would_stop"`
	Condition     conditionJSON `json:"condition"`
	Reason        string        `json:"reason"`
	BestTrue      number        `json:"best_true_residual"`
	Floor         number        `json:"accuracy_floor"`
	CPUShare      number        `json:"cpu_share"`
	UnsolvedRows  int           `json:"unsolved_rows"`
	WorstRows     []int         `json:"worst_rows"`
	WorstLabels   []string      `json:"worst_row_labels"` // empty if none were given
	Build         buildJSON     `json:"build"`
	Events        []eventJSON   `json:"events"`
	deepJSON
	twoJSON
}

// wouldStopJSON is the iteration at which each common stopping rule first
// held; null where it never did.
type wouldStopJSON struct {
	RHS            *int `json:"rhs"`
	Initial        *int `json:"initial"`
	Preconditioned *int `json:"preconditioned"`
	Backward       *int `json:"backward"`
	Energy         *int `json:"energy"`
}

type conditionJSON struct {
	Of       *string `json:"of"`
	Estimate number  `json:"estimate"`
	Smallest number  `json:"smallest"`
	Largest  number  `json:"largest"`
	Settled  bool    `json:"settled"`
	Bound    *string `json:"bound"`
}

type buildJSON struct {
	Entries  int64       `json:"entries"`
	Fill     number      `json:"fill"`
	Bytes    int64       `json:"bytes"`
	MinPivot number      `json:"min_pivot"`
	MaxPivot number      `json:"max_pivot"`
	Replaced int         `json:"replaced"`
	Shift    number      `json:"shift"`
	Broke    []pivotJSON `json:"broke"`
	Growth   number      `json:"growth"`
}

type pivotJSON struct {
	Row   int    `json:"row"`
	Value number `json:"value"`
	Shift number `json:"shift"`
	Label string `json:"label"` // of the row; empty if it has none
}

type eventJSON struct {
	Iteration int      `json:"iteration"`
	Kind      string   `json:"kind"`
	Quantity  string   `json:"quantity"`
	Value     number   `json:"value"`
	Scale     number   `json:"scale"`
	Proved    bool     `json:"proved"`
	Rows      []int    `json:"rows"`
	Labels    []string `json:"labels"` // of the rows; empty if none were given
}

// maxEvents is how many events of a trial are told; restarts are left out.
const maxEvents = 64

func toTrials(ts []trace.History, facts *inspect.Facts) []trialJSON {
	out := make([]trialJSON, 0, len(ts))
	for _, t := range ts {
		j := trialJSON{
			Pairing: tame(t.Pairing), Today: t.Today, Stop: t.Stop.String(), Iterations: t.Iterations,
			Products: t.Products, PrecondUses: t.PrecondUses, SetupSeconds: number(t.SetupTime.Seconds()),
			OwnSeconds: number(t.OwnTime.Seconds()), Memory: t.MemoryBytes,
			Storage: optional(t.Storage), Norm: optional(string(t.Norm)),
			Residual: number(t.Residual), TrueResidual: number(t.TrueResidual), Backward: number(t.Backward),
			Componentwise: number(t.Componentwise), Error: number(t.Error), BestTrue: number(t.BestTrue),
			Floor: number(t.Attainable()), CPUShare: number(t.CPUShare), UnsolvedRows: t.UnsolvedRows,
			WouldStop: toWouldStop(t.WouldStop), Condition: toCondition(t.Condition), Reason: tame(t.Reason),
			WorstRows: fromOne(rowsOf(t.WorstRows)), WorstLabels: labels(rowsOf(t.WorstRows), facts),
			Build: toBuild(t.Notes, facts), Events: toEvents(t.Events, facts), deepJSON: toDeep(t), twoJSON: toTwo(t),
		}
		if len(t.Records) == 0 { // it never began: nothing was measured
			for _, x := range []*number{&j.Residual, &j.TrueResidual, &j.Backward, &j.Componentwise, &j.Error,
				&j.BestTrue, &j.Floor, &j.CPUShare} {
				*x = unknown
			}
		}
		out = append(out, j)
	}
	return out
}

func toWouldStop(marks []trace.StopMark) wouldStopJSON {
	var w wouldStopJSON
	by := map[string]**int{"rhs": &w.RHS, "initial": &w.Initial, "preconditioned": &w.Preconditioned,
		"backward": &w.Backward, "energy": &w.Energy}
	for _, m := range marks {
		if at, ok := by[m.Rule]; ok && m.Iter >= 0 {
			*at = &m.Iter
		}
	}
	return w
}

func toCondition(c trace.Condition) conditionJSON {
	j := conditionJSON{Of: optional(c.Of), Estimate: unknown, Smallest: unknown, Largest: unknown}
	if c.Of == "" {
		return j
	}
	j.Smallest, j.Largest, j.Settled = number(c.Smallest), number(c.Largest), c.Settled
	if !c.Negative && finite(c.Estimate) {
		j.Estimate, j.Bound = number(c.Estimate), optional("lower")
	}
	return j
}

func toBuild(n trace.BuildNotes, facts *inspect.Facts) buildJSON {
	j := buildJSON{Entries: n.Entries, Fill: number(n.Fill), Bytes: n.Bytes, MinPivot: measured(n.MinPivot),
		MaxPivot: measured(n.MaxPivot), Replaced: n.Replaced, Shift: number(n.Shift), Broke: []pivotJSON{},
		Growth: measured(n.Growth)}
	for _, p := range n.Broke {
		j.Broke = append(j.Broke, pivotJSON{p.Row + 1, number(p.Value), number(p.Shift), labelOf(p.Row, facts)})
	}
	return j
}

// measured turns a 0 that stands for "not measured" into unknown.
func measured(x float64) number {
	if x == 0 {
		return number(math.NaN())
	}
	return number(x)
}

func toEvents(es []trace.Event, facts *inspect.Facts) []eventJSON {
	out := []eventJSON{}
	for _, e := range es {
		if e.Kind != trace.Restart && len(out) < maxEvents {
			out = append(out, eventJSON{int(e.Iter), string(e.Kind), tame(e.Quantity), number(e.Value),
				number(e.Scale), e.Proved(), fromOne(rowsOf(e.Rows)), labels(rowsOf(e.Rows), facts)})
		}
	}
	return out
}

// rowsOf lists the rows of the shares.
func rowsOf(shares []trace.RowShare) []int {
	rows := make([]int, len(shares))
	for i, s := range shares {
		rows[i] = s.Row
	}
	return rows
}
