package diagnose

import (
	"fmt"
	"slices"
	"strings"
)

// befell says what a rule finds of a trial, in words that follow "9 pairings".
var befell = map[string]string{
	"accuracy-floor":                 "do not get below their floor",
	"breakdown":                      "broke down",
	"divergence":                     "diverged",
	"false-convergence":              "met the target by their own number and not by b-Ax",
	"negative-curvature":             "met negative curvature",
	"nothing-dropped":                "have next to no fill to drop",
	"null-space-growth":              "grow along the null space",
	"outside-assumptions":            "need of A what it is not",
	"pivot":                          "met a pivot that breaks down",
	"preconditioner-changes-nothing": "have a preconditioner that changes nothing",
	"preconditioner-costs-more":      "have a preconditioner that costs more than it saves",
	"preconditioner-not-linear":      "have a preconditioner that is not one linear operator",
	"preconditioner-not-spd":         "have a preconditioner that is not positive definite",
	"restart-length":                 "pay for their restarts",
	"restart-stagnation":             "stand still between restarts",
	"small-outliers":                 "are held up by a few small eigenvalues",
	"stopping-rules":                 "would be stopped too early by a common rule",
	"unsolved-field":                 "converged with a field unsolved",
	"unsolved-rows":                  "converged in the norm with rows unsolved",
	"unstable-factors":               "have ill-conditioned factors",
}

// Fold returns the findings as a reader wants them: what one rule says of
// several trials that another one has outdone is one line, which counts the
// pairings, names the first few and gives the first one's case. All else is as
// it was, in the same order.
func Fold(all []Finding) []Finding {
	out := make([]Finding, 0, len(all))
	place := map[string]int{} // of the fold of a rule in out
	cases := map[string]Finding{}
	for _, f := range all {
		at, begun := place[f.Rule]
		switch {
		case !f.Outdone:
			out = append(out, f)
		case !begun:
			place[f.Rule], cases[f.Rule] = len(out), f
			out = append(out, f)
		default:
			out[at] = folded(out[at], cases[f.Rule], f)
		}
	}
	return out
}

// folded is the fold so far, which began with the first finding, with one more.
func folded(sum, first, more Finding) Finding {
	for _, p := range append([]string{more.Subject}, more.Also...) {
		if !first.Of(p) && !slices.Contains(sum.Also, p) {
			sum.Also = append(slices.Clone(sum.Also), p)
		}
	}
	if certaintyOrder(more.Certainty) > certaintyOrder(sum.Certainty) {
		sum.Certainty = more.Certainty
	}
	if len(sum.Also) == 0 {
		return sum // the same pairing once more
	}
	what := befell[first.Rule]
	if what == "" {
		what = "show the same (" + first.Rule + ")"
	}
	names := append([]string{first.Subject}, sum.Also...)
	sum.Subject = count(len(names), "pairing")
	sum.Claim = fmt.Sprintf("%s %s: %s", sum.Subject, what, strings.Join(names[:min(mostNamed, len(names))], ", "))
	if rest := len(names) - mostNamed; rest > 0 {
		sum.Claim += fmt.Sprintf(" and %d more", rest)
	}
	sum.Claim += "; the first: " + strings.TrimSuffix(first.Claim, alsoOf(first.Also))
	return sum
}
