package report

import (
	"encoding/json"
	"io"

	"dwindle/engine/check"
	"dwindle/engine/trace"
)

type checkJSON struct {
	Schema        int                `json:"schema"`
	Version       string             `json:"version"`
	Command       string             `json:"command"`
	Machine       machineJSON        `json:"machine"`
	System        checkedJSON        `json:"system"`
	Tol           number             `json:"tol"`
	StopRule      string             `json:"stop_rule"`
	Solved        bool               `json:"solved"`
	Verdict       string             `json:"verdict"`
	Hints         []string           `json:"hints"`
	Notes         []string           `json:"notes"`
	Said          *saidJSON          `json:"said"`
	Measures      []measureJSON      `json:"measures"`
	Residual      residualJSON       `json:"residual"`
	Norms         normsJSON          `json:"norms"`
	Digits        int                `json:"digits_of_x"`
	Printing      number             `json:"left_open_by_digits"`
	Componentwise number             `json:"componentwise_error"`
	Unsolved      int                `json:"unsolved_rows"`
	Worst         []worstJSON        `json:"worst_rows"`
	Fields        []checkedFieldJSON `json:"fields"`
	Condition     *conditionOfX      `json:"condition"`
	NoCondition   string             `json:"no_condition"`
	Ritz          number             `json:"condition_at_least"` // of a symmetric A, by its Ritz values
}

type checkedJSON struct {
	Name        string  `json:"name"`
	Unknowns    int     `json:"unknowns"`
	Entries     int     `json:"entries"`
	RHS         *string `json:"rhs"`
	Digits      int     `json:"digits"`
	Fingerprint string  `json:"fingerprint"`
}

// saidJSON is a number as it was printed, and the measures that give it.
type saidJSON struct {
	Text     string   `json:"text"`
	Value    number   `json:"value"`
	Claim    string   `json:"claim"`
	Measures []string `json:"measures"`
	Nearest  *string  `json:"nearest"`
}

type measureJSON struct {
	Name     string `json:"name"`
	Kind     string `json:"kind"`
	Formula  string `json:"formula"`
	Value    number `json:"value"`
	Stops    bool   `json:"stops"`
	Holds    bool   `json:"holds"`
	FromStep *int   `json:"from_step"`
}

type residualJSON struct {
	One   number `json:"one"`
	Two   number `json:"two"`
	Inf   number `json:"inf"`
	Bound number `json:"rounding_bound"`
	Plain number `json:"plain_double_bound"`
}

type normsJSON struct {
	One     number `json:"one"`
	Inf     number `json:"inf"`
	Fro     number `json:"frobenius"`
	Two     number `json:"two"`
	Settled bool   `json:"two_settled"`
}

type worstJSON struct {
	Row   int    `json:"row"`
	Label string `json:"label"`
	Error number `json:"componentwise_error"`
}

type checkedFieldJSON struct {
	Name          string `json:"name"`
	Rows          int    `json:"rows"`
	Residual      number `json:"residual"`
	Componentwise number `json:"componentwise_error"`
	Tol           number `json:"tol"`
}

type conditionOfX struct {
	How      string `json:"how"`
	One      number `json:"one_norm"`
	Reach    number `json:"of_this_x"`
	Error2   number `json:"error_two"`
	ErrorInf number `json:"error_inf"`
	Energy   number `json:"error_energy"`
	Sure     bool   `json:"error_sure"`
	Digits   number `json:"digits_to_expect"`
	Written  number `json:"digits_written"`
}

// CheckJSON writes the judgement in schema 1: every key is always there, what
// is unknown is null, rows count from 1.
func CheckJSON(w io.Writer, d CheckDocument) error {
	a := d.Answer
	j := checkJSON{Schema: Schema, Version: tame(d.Version), Command: tame(d.Command),
		Machine: machineJSON{tame(d.Machine.CPU), d.Machine.Threads, d.Machine.MemoryLimit},
		System: checkedJSON{tame(d.System.Name), d.System.Unknowns, d.System.Entries, optional(d.System.RHS), d.System.Digits,
			tame(d.System.Fingerprint)},
		Tol: number(d.Tol), StopRule: tame(d.StopRule), Solved: a.Solved, Verdict: tame(a.Verdict),
		Hints: tameAll(append(d.otherRHS(), a.Hints...)), Notes: tameAll(d.Notes), Said: toSaid(a.Said),
		Residual: residualJSON{number(a.Residual.One), number(a.Residual.Two), number(a.Residual.Inf), number(a.Residual.Bound), number(a.Residual.Plain)},
		Norms:    normsJSON{number(a.Norms.One), number(a.Norms.Inf), number(a.Norms.Fro), number(a.Norms.Two), a.Norms.TwoSettled},
		Digits:   a.Digits, Printing: number(a.Printing), Componentwise: number(a.Componentwise), Unsolved: a.Unsolved,
		Worst: []worstJSON{}, Fields: toCheckedFields(a.Fields), NoCondition: tame(a.NoFactor), Ritz: number(a.Running.Condition)}
	for _, m := range a.Definitions {
		j.Measures = append(j.Measures, toMeasure(m))
	}
	for _, r := range a.Worst {
		j.Worst = append(j.Worst, worstJSON{r.Row + 1, tame(a.Names.Label(r.Row)), number(r.Share)})
	}
	if f := a.Factor; f != nil {
		j.Condition = &conditionOfX{f.How, number(f.Condition), number(f.Reach), number(f.Error2), number(f.ErrorInf),
			number(f.Energy), f.Sure, number(f.Digits), number(f.Written)}
	}
	e := json.NewEncoder(w)
	e.SetEscapeHTML(false)
	e.SetIndent("", " ")
	return e.Encode(j)
}

func toMeasure(d check.Definition) measureJSON {
	j := measureJSON{Name: d.Name, Kind: string(d.Kind), Formula: d.Formula, Value: number(d.Value), Stops: d.Stops, Holds: d.Holds}
	if d.From > 0 {
		j.FromStep = &d.From
	}
	return j
}

func toSaid(m *check.Match) *saidJSON {
	if m == nil {
		return nil
	}
	j := &saidJSON{Text: tame(m.Said.Text), Value: number(m.Said.Value), Claim: tame(m.Claim), Measures: []string{}}
	for _, f := range m.Fitting {
		j.Measures = append(j.Measures, f.Definition.Name)
	}
	if m.Nearest != nil {
		j.Nearest = optional(m.Nearest.Definition.Name)
	}
	return j
}

// toCheckedFields lists the residuals by field, never nil.
func toCheckedFields(fields []trace.Field) []checkedFieldJSON {
	out := []checkedFieldJSON{}
	for _, f := range fields {
		j := checkedFieldJSON{tame(f.Name), f.Rows, number(f.Residual), number(f.Componentwise), unknown}
		if f.Tol > 0 {
			j.Tol = number(f.Tol)
		}
		out = append(out, j)
	}
	return out
}
