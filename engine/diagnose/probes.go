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
	opposite    = 0.5   // of the distance: taken the other way round, M is that much nearer
	turned      = 0.75  // the same for the transpose, whose effect on a random vector is less
	repeatLimit = 1e-14 // a fixed M answers twice the same, bit for bit
	alike       = 1e-6  // relative difference of two residuals that are the same
	fewestAlike = 4     // iterations from which equal counts say something
)

// wrongWay: the user's own M was given as M⁻¹, or M⁻¹ as M.
var wrongWay = Rule{"preconditioner-wrong-way", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		p := h.Probe
		if p == nil || !(p.WrongWay < opposite*p.Distance) {
			continue
		}
		_, solver, m := cut(h.Pairing)
		f := Finding{Weight: Blocker, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim: fmt.Sprintf("%s seems to be applied the wrong way round: inv(M)A is %s away from the identity, taken the other way it is %s",
				told(m), percent(p.Distance), percent(p.WrongWay)),
			Advice: "the file holds M where inv(M) was asked for, or the reverse: swap given:FILE and solve:FILE",
			Try:    []string{solver + "+none"},
			Evidence: []Evidence{number("least ||v - g inv(M)A v||/||v|| over all g", p.Distance, ""),
				number("the same of M the other way", p.WrongWay, ""), number("the same of A scaled by its diagonal", p.Plain, "")}}
		if swapped, ok := swap(m); ok {
			f.Try = []string{solver + "+" + swapped}
		}
		if solved(h) {
			f.Weight = Drag
		}
		out = append(out, f)
	}
	return out
}}

// transposedM: the user's own M fits better with its transpose.
var transposedM = Rule{"preconditioner-transposed", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		p := h.Probe
		if p == nil || !(p.Transposed < turned*p.Distance) || p.WrongWay < p.Transposed {
			continue
		}
		_, solver, m := cut(h.Pairing)
		f := Finding{Weight: Drag, Certainty: inspect.Estimated, Subject: h.Pairing,
			Claim: fmt.Sprintf("%s seems to be transposed: inv(M)A is %s away from the identity, with the transpose of M %s",
				told(m), percent(p.Distance), percent(p.Transposed)),
			Advice: "write the transpose of the file, or swap row and column where it is written",
			Try:    []string{solver + "+none"},
			Evidence: []Evidence{number("least ||v - g inv(M)A v||/||v|| over all g", p.Distance, ""),
				number("the same of the transpose of M", p.Transposed, ""), number("the same of A scaled by its diagonal", p.Plain, "")}}
		out = append(out, f)
	}
	return out
}}

// swap turns a matrix given as M⁻¹ into one to solve with, and back.
func swap(m string) (string, bool) {
	if file, ok := strings.CutPrefix(m, "given:"); ok {
		return "solve:" + file, true
	}
	if args, ok := strings.CutPrefix(m, "solve:"); ok {
		file, _, _ := strings.Cut(args, ",")
		return "given:" + file, true
	}
	return "", false
}

// told is a preconditioner without the folders of its file.
func told(m string) string {
	name, file, ok := strings.Cut(m, ":")
	if !ok {
		return m
	}
	return name + ":" + file[strings.LastIndexByte(file, '/')+1:]
}

// notLinear: M changes from one use to the next, or is no linear operator, in
// a method that supposes it is.
var notLinear = Rule{"preconditioner-not-linear", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		p := h.Probe
		_, solver, m := cut(h.Pairing)
		if p == nil || !h.FixedM || factored(m) {
			continue
		}
		f := Finding{Weight: Blocker, Certainty: inspect.Measured, Subject: h.Pairing,
			Advice: "use a flexible method: fgmres, fcg or gcr",
			Try:    []string{"fgmres:30+" + m},
			Evidence: []Evidence{number("||inv(M)v - inv(M)v'||, the same v twice", p.Unrepeatable, "relative"),
				number("||inv(M)(u+v) - inv(M)u - inv(M)v||", p.Nonlinear, "relative")}}
		switch {
		case p.Unrepeatable > repeatLimit:
			f.Claim = fmt.Sprintf("%s is not one fixed operator: the same vector gives answers that differ by %s; %s supposes that M never changes",
				m, num(p.Unrepeatable), solver)
		case p.Nonlinear > asymmetryLimit:
			f.Claim = fmt.Sprintf("%s is not linear: inv(M)(u+v) misses inv(M)u + inv(M)v by %s; %s supposes that it is",
				m, num(p.Nonlinear), solver)
		default:
			continue
		}
		if solved(h) {
			f.Weight = Drag
		}
		out = append(out, f)
	}
	return out
}}

// factored says whether M is solved with by factors of its own making: linear
// by construction, so that what a probe misses is rounding, amplified by them.
func factored(m string) bool {
	name := kindOfM(m)
	return symmetricFactors(name) || slices.Contains([]string{"ilu", "milu", "ilut", "ilutp", "ras", "block-jacobi", "schur", "amg", "lu", "factors", "solve"}, name)
}

// symmetricFactors says whether these factors are one and its transpose.
func symmetricFactors(name string) bool {
	return slices.Contains([]string{"ic", "mic", "ict", "cholesky", "ldl"}, name)
}

// kindOfM is the name of a preconditioner, without parameters and without the
// matrix it is built from.
func kindOfM(m string) string {
	if strings.HasPrefix(m, "from:") {
		m = m[strings.LastIndexByte(m, '/')+1:]
	}
	name, _, _ := strings.Cut(m, ":")
	return name
}

// changesNothing: with and without the preconditioner a method makes the same
// iterates.
var changesNothing = Rule{"preconditioner-changes-nothing", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		prep, solver, m := cut(h.Pairing)
		plain, ok := find(c, prep+solver+"+none")
		if m == "none" || !ok || !solved(h) || !same(h, plain) {
			continue
		}
		why := "M is a multiple of the identity here, or is not used"
		if strings.HasPrefix(m, "jacobi") {
			why = "the diagonal of A is constant"
		}
		out = append(out, Finding{Weight: Note, Certainty: inspect.Measured, Subject: h.Pairing,
			Claim:    fmt.Sprintf("%s changes nothing: the same %d iterations and residuals as %s; %s", m, h.Iterations, plain.Pairing, why),
			Advice:   "leave it out, or take one that couples the unknowns",
			Evidence: []Evidence{number("iterations with", float64(h.Iterations), ""), number("iterations without", float64(plain.Iterations), "")}})
	}
	return out
}}

// same says whether two trials ran through the same true residuals.
func same(a, b trace.History) bool {
	if a.Iterations != b.Iterations || a.Iterations < fewestAlike || len(a.Records) != len(b.Records) {
		return false
	}
	compared := 0
	for i, r := range a.Records {
		q := b.Records[i]
		if !r.Audited() || !q.Audited() {
			continue
		}
		if math.Abs(r.Audit-q.Audit) > alike*math.Max(r.Audit, q.Audit) && math.Max(r.Audit, q.Audit) > alike {
			return false
		}
		compared++
	}
	return compared >= fewestAlike
}

// percent prints a share.
func percent(x float64) string { return fmt.Sprintf("%.0f %%", 100*x) }
