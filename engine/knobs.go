package engine

import (
	"fmt"
	"strconv"
	"strings"

	"dwindle/engine/linear"
	"dwindle/engine/run"
)

// Knob is one parameter of a pairing, as a form shows and edits it.
type Knob struct {
	Part    string // "solver", "preconditioner" or "preparation"
	Method  string // whose parameter it is
	Name    string
	Value   string
	Default string
	Range   string
	Choices []string // where only these words are admitted
	Meaning string
}

// Knobs lists the parameters of a pairing: of its preparations, its solver and
// its preconditioner.
func Knobs(pairing string) ([]Knob, error) {
	m, err := run.Parse(pairing)
	if err != nil {
		return nil, err
	}
	var list []Knob
	add := func(part, method string, params []linear.Param, v linear.Values) {
		for i, p := range describe(params) {
			k := Knob{Part: part, Method: method, Name: p.Name, Value: valueText(params[i], v), Default: p.Default, Range: p.Range, Meaning: p.Meaning}
			if params[i].Kind == linear.Choice {
				k.Choices = params[i].Choices
			}
			list = append(list, k)
		}
	}
	for _, p := range m.Preps {
		add("preparation", p.Entry.Name, p.Entry.Params, p.Values)
	}
	add("solver", m.Solver.Name, m.Solver.Params, m.SolverValues)
	add("preconditioner", m.Precond.Name, m.Precond.Params, m.PrecondValues)
	return list, nil
}

// Turn gives the k-th knob of a pairing another value and returns the canonical
// pairing; the error says what the value must be.
func Turn(pairing string, k int, text string) (string, error) {
	knobs, err := Knobs(pairing)
	if err != nil {
		return "", err
	}
	if k < 0 || k >= len(knobs) {
		return "", fmt.Errorf("%s has %d parameters", pairing, len(knobs))
	}
	if text = strings.TrimSpace(text); text == "" {
		text = knobs[k].Default
	}
	knobs[k].Value = text
	p, err := linear.ParsePairing(pairing)
	if err != nil {
		return "", err
	}
	parts := []*linear.Part{}
	for i := range p.Preps {
		parts = append(parts, &p.Preps[i])
	}
	parts = append(parts, &p.Solver, &p.Precond)
	for _, part := range parts {
		part.Args = nil
	}
	for i, part := range parts { // the knobs stand in the order of the parts
		kind := []string{"preconditioner", "solver"}[min(len(parts)-1-i, 1)]
		if len(parts)-1-i > 1 {
			kind = "preparation"
		}
		for len(knobs) > 0 && knobs[0].Part == kind && knobs[0].Method == part.Name {
			part.Args = append(part.Args, linear.Arg{Name: knobs[0].Name, Text: knobs[0].Value})
			knobs = knobs[1:]
		}
	}
	m, err := run.Parse(p.String())
	if err != nil {
		return "", err
	}
	return m.Name, nil
}

// valueText writes the value of a parameter.
func valueText(p linear.Param, v linear.Values) string {
	switch p.Kind {
	case linear.Choice:
		return v.Choice(p.Name)
	case linear.Path:
		return v.Path(p.Name)
	}
	return strconv.FormatFloat(v.Real(p.Name), 'g', -1, 64)
}
