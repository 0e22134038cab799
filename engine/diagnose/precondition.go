package diagnose

import (
	"fmt"
	"math"
	"slices"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	asymmetryLimit  = 1e-6  // of the symmetry and linearity probes; rounding stays far below
	rounding        = 1e-10 // of a probe, per unit of growth of the factors
	indefiniteLimit = 1e-8  // of rᵀM⁻¹r over ‖r‖‖M⁻¹r‖
)

// preconditioner: a method that needs a symmetric positive definite M was
// given one that is not.
var preconditioner = Rule{"preconditioner-not-spd", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		if !h.SPDM {
			continue
		}
		_, solver, m := cut(h.Pairing)
		f := Finding{Weight: Blocker, Certainty: inspect.Measured, Subject: h.Pairing}
		if h.PrecondAsymmetry > probeLimit(h) && !h.Notes.Symmetric && !symmetricFactors(kindOfM(m)) {
			f.Claim = fmt.Sprintf("%s is not symmetric: u'inv(M)v and v'inv(M)u differ by %s of their size; %s needs a symmetric positive definite M",
				m, num(h.PrecondAsymmetry), solver)
			f.Evidence = []Evidence{number("asymmetry of inv(M)", h.PrecondAsymmetry, "relative")}
		} else if e, ok := indefinite(h); ok {
			f.Claim = fmt.Sprintf("%s is not positive definite: %s = %s at iteration %d; %s needs a symmetric positive definite M",
				m, e.Quantity, num(e.Value), e.Iter, solver)
			f.Evidence = []Evidence{{Quantity: e.Quantity, Value: e.Value, Unit: "relative", Iteration: int(e.Iter)}}
		} else {
			continue
		}
		f.Advice = "use a preconditioner that is positive definite, or a method that does not need one"
		f.Try = []string{solver + "+none", "gmres:30+" + m}
		if solved(h) {
			f.Weight = Drag
		}
		if h.Probe != nil && h.Probe.Opposite && c.Facts.NegativeDefinite.Answer != inspect.Yes {
			f.Claim = fmt.Sprintf("%s has the wrong sign: v'inv(M)v is negative of every v tried; %s needs a positive definite M", m, solver)
			f.Advice, f.Try = "change the sign of M", nil
		}
		out = append(out, f)
	}
	return out
}}

// probeLimit is what rounding can make of a symmetry or linearity probe: more
// where the factors amplify.
func probeLimit(h trace.History) float64 { return math.Max(asymmetryLimit, rounding*h.Notes.Growth) }

func indefinite(h trace.History) (trace.Event, bool) {
	for _, e := range events(h, trace.PrecondIndefinite) {
		if e.Value < -indefiniteLimit {
			return e, true
		}
	}
	return trace.Event{}, false
}

// pivots: a factorisation broke down on the way, with or without a repair.
var pivots = Rule{"pivot", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		if len(h.Notes.Broke) == 0 {
			continue
		}
		b := h.Notes.Broke[0]
		prep, solver, m := cut(h.Pairing)
		f := Finding{Weight: Drag, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim:    fmt.Sprintf("%s breaks down in %s with pivot %s", m, c.name(b.Row), num(b.Value)),
			Evidence: []Evidence{{Quantity: "pivot", Value: b.Value, Iteration: none, Rows: []int{b.Row}}}}
		if h.Notes.Shift > 0 {
			f.Claim += fmt.Sprintf("; it stands with A + %s diag(A), found in %d attempts",
				num(h.Notes.Shift), len(h.Notes.Broke)+1)
			if c.Facts.PositiveDefinite.Answer == inspect.Yes {
				f.Claim += fmt.Sprintf(" (A itself is positive definite, %s)", c.Facts.PositiveDefinite.Certainty)
			}
			if solved(h) {
				f.Claim += fmt.Sprintf(", and takes %s", steps(h.Iterations))
			}
			f.Advice = repaired(c, h)
			f.Evidence = append(f.Evidence, number("shift", h.Notes.Shift, "of the diagonal"))
			f.Weight = Note
		} else {
			f.Advice = "permute A to a diagonal without zeros, or use a preconditioner without pivots"
		}
		if better, ok := unrepaired(c, h); ok {
			f.Try = []string{better.Pairing}
		} else if !strings.HasPrefix(m, "jacobi") && c.Facts.DiagZero+c.Facts.DiagMissing == 0 {
			f.Try = []string{prep + solver + "+jacobi"}
		}
		out = append(out, f)
	}
	return out
}}

// repaired is the advice where a shift has made the factors stand.
func repaired(c Case, h trace.History) string {
	if c.Facts.Singular.Answer == inspect.Yes {
		return "A is singular, so that complete factors end in a zero pivot; a factor that is not modified keeps away from it"
	}
	if better, ok := unrepaired(c, h); ok {
		return fmt.Sprintf("use %s, which needs no shift and took %s", better.Pairing, steps(better.Iterations))
	}
	prep, solver, _ := cut(h.Pairing)
	if plain, ok := find(c, prep+solver+"+none"); ok && solved(plain) && !(solved(h) && h.Iterations < plain.Iterations) {
		return fmt.Sprintf("leave it out: %s took %s", plain.Pairing, steps(plain.Iterations))
	}
	return "a positive definite A can do this: keep the shift, or use jacobi or ssor"
}

// incompleteFactors says whether these are factors that drop entries.
func incompleteFactors(name string) bool {
	return slices.Contains([]string{"ic", "mic", "ict", "ilu", "milu", "ilut", "ilutp"}, name)
}

// unrepaired is the quickest trial of the same solver that solved the system
// with factors that needed no repair, and in fewer steps.
func unrepaired(c Case, h trace.History) (best trace.History, ok bool) {
	prep, solver, _ := cut(h.Pairing)
	for _, o := range c.Trials {
		p, s, m := cut(o.Pairing)
		if p != prep || s != solver || o.Direct || !solved(o) || len(o.Notes.Broke) > 0 || !incompleteFactors(kindOfM(m)) || solved(h) && o.Iterations >= h.Iterations {
			continue
		}
		if !ok || o.Iterations < best.Iterations {
			best, ok = o, true
		}
	}
	return best, ok
}

func find(c Case, pairing string) (trace.History, bool) {
	for _, h := range c.Trials {
		if h.Pairing == pairing {
			return h, true
		}
	}
	return trace.History{}, false
}
