package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
	"dwindle/engine/spectrum"
)

// useful is up to how many times the order a bound on iterations is told: in
// exact arithmetic the order itself is enough.
const useful = 2

// indefiniteSpectrum: what the eigenvalues on both sides of zero let a method
// of minimal residuals promise (Greenbaum, Iterative Methods for Solving Linear
// Systems, 1997, section 3.1).
var indefiniteSpectrum = Rule{"indefinite-spectrum", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Study.Raw == nil || !f.Study.Raw.Exact || f.Symmetric.Answer != inspect.Yes {
		return nil
	}
	s, negative := sides(f.Study.Raw)
	if negative == 0 || negative == f.N || !(math.Min(s.B, s.C) > 10*f.Study.Raw.SmallestBound) || f.Singular.Answer == inspect.Yes {
		return nil
	}
	rate := s.Rate()
	its := 2 * math.Log(2/c.Tol) / -math.Log(rate)
	if !(its > 0) || its > useful*float64(f.N) {
		return nil
	}
	g := Finding{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("%s negative: [%s, %s] beside [%s, %s]; minres gains at least a factor %s every two steps, and needs at most %.0f to %.0e",
			count(negative, "eigenvalue")+verb(negative, " is", " are"), num(-s.A), num(-s.B), num(s.C), num(s.D), fmt.Sprintf("%.4g", rate), math.Ceil(its), c.Tol),
		Advice: "use minres with a positive definite preconditioner, or move A away from zero",
		Try:    []string{"minres+none"},
		Evidence: []Evidence{number("negative eigenvalues", float64(negative), ""), number("the one below zero nearest to it", -s.B, ""),
			number("the one above zero nearest to it", s.C, ""), number("factor of two steps of minres", rate, "bound")}}
	if h, ok := find(c, "minres+none"); ok && solved(h) {
		g.Claim += fmt.Sprintf(" (it took %d)", h.Iterations)
	}
	return []Finding{g}
}}

// sides takes the spectrum apart at zero: [−a,−b] and [c,d], and how many lie
// below.
func sides(s *inspect.Spectrum) (two spectrum.TwoSides, negative int) {
	two.B, two.C = math.Inf(1), math.Inf(1)
	for _, v := range s.Values {
		x := real(v)
		if x < 0 {
			negative++
			two.A, two.B = math.Max(two.A, -x), math.Min(two.B, -x)
		} else {
			two.C, two.D = math.Min(two.C, x), math.Max(two.D, x)
		}
	}
	return two, negative
}
