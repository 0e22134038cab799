package report

import (
	"encoding/json"
	"io"

	"dwindle/engine/choose"
	"dwindle/engine/inspect"
)

// Schema is the version of the JSON form. Fields are added within a version,
// never renamed.
const Schema = 1

type documentJSON struct {
	Schema   int           `json:"schema"`
	Version  string        `json:"version"`
	Command  string        `json:"command"`
	Machine  machineJSON   `json:"machine"`
	Settings settingsJSON  `json:"settings"`
	System   systemJSON    `json:"system"`
	Facts    factsJSON     `json:"facts"`
	Trials   []trialJSON   `json:"trials"`
	Findings []findingJSON `json:"findings"`
	Choice   choiceJSON    `json:"choice"`
	Elapsed  number        `json:"elapsed_seconds"`

	Toolchain string     `json:"toolchain"`
	Study     *studyJSON `json:"study"`
}

type machineJSON struct {
	CPU         string `json:"cpu"`
	Threads     int    `json:"threads"`
	MemoryLimit int64  `json:"memory_limit_bytes"`
}

type settingsJSON struct {
	Tol        number  `json:"tol"`
	StopRule   string  `json:"stop_rule"`
	Iterations int     `json:"iterations"`
	Seconds    number  `json:"seconds"`
	Seed       int     `json:"seed"`
	FieldTols  *string `json:"field_tolerances"`
}

type choiceJSON struct {
	Pairing *string      `json:"pairing"`
	Ranked  []rankedJSON `json:"ranked"`
	Reasons []string     `json:"reasons"`
	Doubts  []string     `json:"doubts"`
	Gain    number       `json:"gain"`
	ByWork  bool         `json:"gain_by_work"` // counted, not by the clock
	Goal    string       `json:"goal"`         // what ranked goes by

	Settings []string      `json:"settings"`
	RuledOut []ruledJSON   `json:"ruled_out"`
	Outcomes []outcomeJSON `json:"outcomes"`
}

type rankedJSON struct {
	Pairing    string `json:"pairing"`
	Seconds    number `json:"seconds_to_tol"`
	Memory     int64  `json:"memory_bytes"`
	Setup      number `json:"setup_seconds"`
	Iterations int    `json:"iterations"`
	Reached    bool   `json:"reached"`
	BreakEven  number `json:"break_even"`

	Low      number    `json:"seconds_low"`
	High     number    `json:"seconds_high"`
	For      []forJSON `json:"for"`
	Expected number    `json:"seconds_expected"`    // of one that did not reach it
	Beyond   number    `json:"iterations_expected"` // where they are more than it may take

	Runs   int    `json:"runs"`   // that the seconds are the median of
	Setups int    `json:"setups"` // and the set-up; 0: this run's own
	Work   number `json:"work"`   // numbers touched, counted
}

// forJSON is the time predicted for a number of right-hand sides.
type forJSON struct {
	Sides   int    `json:"right_hand_sides"`
	Seconds number `json:"seconds"`
}

// JSON writes the document in schema 1: every key is always there, what is
// unknown is null, rows count from 1.
func JSON(w io.Writer, d Document) error {
	e := json.NewEncoder(w)
	e.SetEscapeHTML(false)
	e.SetIndent("", " ")
	return e.Encode(documentJSON{
		Schema:  Schema,
		Version: tame(d.Version),
		Command: tame(d.Command),
		Machine: machineJSON{tame(d.Machine.CPU), d.Machine.Threads, d.Machine.MemoryLimit},
		Settings: settingsJSON{number(d.Settings.Tol), tame(d.Settings.StopRule), d.Settings.Iterations,
			number(d.Settings.Seconds), d.Settings.Seed, optional(d.Settings.FieldTols)},
		System:   toSystem(d),
		Facts:    toFacts(d.Facts),
		Trials:   toTrials(d.Trials, d.Facts),
		Findings: toFindings(d.Findings, d.Facts),
		Choice:   toChoice(d),
		Elapsed:  number(d.Elapsed.Seconds()),

		Toolchain: tame(d.Toolchain),
		Study:     toStudy(d.Facts),
	})
}

func toChoice(d Document) choiceJSON {
	c := choiceJSON{Pairing: optional(d.Choice.Pairing), Ranked: []rankedJSON{},
		Reasons: tameAll(d.Choice.Reasons), Doubts: tameAll(d.Choice.Doubts), Gain: unknown, Goal: tame(d.Choice.Goal),
		Settings: tameAll(d.Choice.Settings), RuledOut: all(d.Choice.RuledOut, toRuled), Outcomes: all(d.Choice.Outcomes, toOutcome)}
	if c.Goal == "" {
		c.Goal = choose.Seconds
	}
	if g := d.Choice.Gain; g.Times > 0 {
		c.Gain, c.ByWork = number(g.Times), g.ByWork
	}
	for _, r := range d.Choice.Ranked {
		s := number(r.Seconds)
		if !r.Reached {
			s = unknown
		}
		c.Ranked = append(c.Ranked, rankedJSON{tame(r.Pairing), s, r.Memory, number(r.Setup), r.Iterations,
			r.Reached, number(r.BreakEven), measured(r.Low), measured(r.High), toFor(r), expected(r), number(r.Beyond), r.Runs, r.Setups, number(r.Work)})
	}
	return c
}

// expected is when one that did not reach the tolerance was expected to.
func expected(r choose.Ranked) number {
	if r.Reached {
		return unknown
	}
	return measured(r.Expected)
}

func toFor(r choose.Ranked) []forJSON {
	var out []forJSON
	for i, n := range choose.Sides {
		out = append(out, forJSON{n, measured(r.For[i])})
	}
	return out
}

// systemJSON carries the numbers of the system that are no yes-or-no facts.
type systemJSON struct {
	Name          string           `json:"name"`
	Unknowns      int              `json:"unknowns"`
	Entries       int              `json:"entries"`
	RHS           *string          `json:"rhs"`
	Digits        *int             `json:"digits"`
	Fingerprint   string           `json:"fingerprint"`
	Format        string           `json:"format"`
	Stored        int              `json:"stored"`
	Duplicates    int              `json:"duplicates"`
	ExplicitZeros int              `json:"explicit_zeros"`
	Notes         []string         `json:"notes"`
	RHSNorm       number           `json:"rhs_norm"`
	Bandwidth     *int             `json:"bandwidth"`
	RowEntries    [2]number        `json:"row_entries"`
	RowNorm       [2]number        `json:"row_norm"`
	ColNorm       [2]number        `json:"column_norm"`
	Gershgorin    [2]number        `json:"gershgorin"`
	NormInf       number           `json:"norm_inf"`
	NormOne       number           `json:"norm_one"`
	NormFro       number           `json:"norm_fro"`
	Asymmetry     number           `json:"asymmetry"`
	Fields        []fieldFactsJSON `json:"fields"`
}

func toSystem(d Document) systemJSON {
	none := [2]number{unknown, unknown}
	s := systemJSON{Name: tame(d.System.Name), Unknowns: d.System.Unknowns, Entries: d.System.Entries,
		RHS: optional(d.System.RHS), Fingerprint: tame(d.System.Fingerprint), Notes: []string{},
		RHSNorm: unknown, RowEntries: none, RowNorm: none, ColNorm: none, Gershgorin: none,
		NormInf: unknown, NormOne: unknown, NormFro: unknown, Asymmetry: unknown, Fields: []fieldFactsJSON{}}
	if d.System.Digits > 0 {
		s.Digits = &d.System.Digits
	}
	f := d.Facts
	if f == nil {
		return s
	}
	s.Format, s.Notes, s.Fields = tame(f.Format), tameAll(f.Notes), toFieldFacts(f)
	s.Stored, s.Duplicates, s.ExplicitZeros, s.RHSNorm = f.Stored, f.Duplicates, f.ExplicitZeros, number(f.RHSNorm)
	if f.Complete && !f.MatrixFree {
		s.Bandwidth = &f.Bandwidth
		s.RowEntries, s.RowNorm, s.ColNorm, s.Gershgorin = ends(f.RowEntries), ends(f.RowNorm), ends(f.ColNorm), ends(f.Gershgorin)
		s.NormInf, s.NormOne, s.NormFro = number(f.NormInf), number(f.NormOne), number(f.NormFro)
		s.Asymmetry = number(f.Asymmetry)
	}
	return s
}

func ends(r inspect.Range) [2]number { return [2]number{number(r.Min), number(r.Max)} }
