package engine

import (
	"fmt"
	"strconv"
	"strings"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/precond"
	"dwindle/engine/prepare"
)

// Method describes one entry of a catalogue for listing.
type Method struct {
	Kind     string // "solver", "preconditioner" or "preparation"
	Name     string
	Title    string
	Source   string
	Params   []Param
	Needs    string // what it cannot run without; empty if nothing
	Assumes  string // what its theory takes for granted; empty if nothing
	Products string // products per step; solvers only
}

// Param describes one parameter of a method.
type Param struct{ Name, Default, Range, Meaning string }

// Methods lists every solver, preconditioner and preparation.
func Methods() []Method {
	var list []Method
	for _, e := range krylov.Catalogue {
		list = append(list, Method{Kind: "solver", Name: e.Name, Title: e.Title, Source: e.Source,
			Params: describe(e.Params), Needs: needs(e.Needs), Assumes: assumes(e.Assumes), Products: e.Products})
	}
	for _, e := range precond.Catalogue {
		list = append(list, Method{Kind: "preconditioner", Name: e.Name, Title: e.Title, Source: e.Source,
			Params: describe(e.Params), Needs: needs(e.Needs), Assumes: assumes(e.Assumes)})
	}
	for _, e := range prepare.Catalogue {
		list = append(list, Method{Kind: "preparation", Name: e.Name, Title: e.Title, Source: e.Source,
			Params: describe(e.Params), Needs: needs(e.Needs)})
	}
	return list
}

func describe(list []linear.Param) []Param {
	var out []Param
	for _, p := range list {
		q := Param{Name: p.Name, Meaning: p.Meaning}
		switch p.Kind {
		case linear.Choice:
			q.Default, q.Range = p.Choices[int(p.Default)], strings.Join(p.Choices, "|")
		case linear.Path:
			q.Default, q.Range = "none", "a file"
		default:
			q.Default = strconv.FormatFloat(p.Default, 'g', -1, 64)
			q.Range = fmt.Sprintf("%g to %g", p.Min, p.Max)
		}
		out = append(out, q)
	}
	return out
}

func needs(h linear.Has) string {
	return words(uint8(h), []string{"entries", "nonzero diagonal", "transpose", "transpose of M"})
}

func assumes(a linear.Assume) string {
	return words(uint8(a), []string{"A symmetric", "A positive definite", "M fixed", "M symmetric positive definite"})
}

// words names the set bits.
func words(bits uint8, names []string) string {
	var out []string
	for i, n := range names {
		if bits&(1<<i) != 0 {
			out = append(out, n)
		}
	}
	return strings.Join(out, ", ")
}
