package prepare

import (
	"context"
	"errors"

	"dwindle/engine/linear"
)

var shiftEntry = Entry{
	Name:  "shift",
	Title: "build the preconditioner from A + σ diag A; the system itself stays",
	Source: "Manteuffel, Math. Comp. 34 (1980) 473–497; for indefinite waves Erlangga, Vuik and Oosterlee, " +
		"Appl. Numer. Math. 50 (2004) 409–425",
	Params: []linear.Param{{Name: "sigma", Kind: linear.Real, Default: 0.1, Min: -100, Max: 100,
		Meaning: "what is added to the diagonal, relative to it"}},
	Needs:    linear.NeedsEntries,
	Estimate: func(a *linear.CSR, _ linear.Values) int64 { return a.Bytes() },
	Apply: func(_ context.Context, s linear.System, v linear.Values) (linear.System, Back, error) {
		if s.Matrix() == nil {
			return s, nil, errors.New("shift needs the entries of the matrix")
		}
		s.Shift += v.Real("sigma")
		return s, same{}, nil
	},
}

// Shifted returns A + σ diag A; A itself where σ is 0.
func Shifted(a *linear.CSR, sigma float64) *linear.CSR {
	if sigma == 0 {
		return a
	}
	m := *a
	m.Val = append([]float64(nil), a.Val...)
	for i := range a.NRows {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			if int(a.Col[k]) == i {
				m.Val[k] *= 1 + sigma
			}
		}
	}
	return &m
}
