package diagnose

import (
	"fmt"
	"slices"
	"strings"
	"time"

	"dwindle/engine/trace"
)

// yield is one row of the table of contradictions: where the stronger rule has
// spoken, at least as surely, the weaker one is not told.
type yield struct {
	stronger string
	weaker   []string // nil: every rule that speaks of a pairing
	where    func(strong, weak Finding) bool
	why      string
}

// yields is the whole table. What a method does outside its assumptions, with
// a spoilt preconditioner, or on a right-hand side that no x reaches, is no
// news about its restarts, its floor or its stopping rule.
var yields = []yield{
	{"zero-rhs", nil, anywhere, "b = 0: no iteration tells anything"},
	{"unreachable-rhs", []string{"restart-stagnation", "accuracy-floor", "divergence", "false-convergence", "stopping-rules", "not-your-rhs"},
		unprojected, "no residual can get below the part that is out of reach"},
	{"mechanism", []string{"unreachable-rhs"}, anywhere, "the same part of b, told with its cause"},
	{"double-precision", consequences, anywhere, "rounding x alone leaves what they show"},
	{"mechanism", consequences, unsolvable, "what moves freely leaves no answer to converge to"},
	{"near-null", consequences, unsolvable, "A is singular to rounding"},
	{"outside-assumptions", []string{"negative-curvature", "accuracy-floor", "restart-stagnation", "divergence", "breakdown",
		"false-convergence", "stopping-rules", "preconditioner-not-spd", "pivot"}, samePairing, "the method has no right to converge"},
	{"outside-assumptions", []string{"not-definite"}, anywhere, "the same matrix, told once"},
	{"negative-curvature", []string{"not-definite"}, anywhere, "the same matrix, told once"},
	{"preconditioner-wrong-way", []string{"preconditioner-not-spd", "preconditioner-costs-more", "divergence", "restart-stagnation",
		"accuracy-floor", "unstable-factors"}, samePairing, "M is not what it is taken for"},
	{"preconditioner-not-linear", []string{"preconditioner-not-spd", "divergence", "restart-stagnation", "accuracy-floor", "breakdown"},
		samePairing, "the method supposes one M for all steps"},
	{"preconditioner-not-spd", []string{"accuracy-floor", "divergence", "breakdown", "false-convergence", "stopping-rules"},
		samePairing, "the method supposes that M is positive definite"},
	{"preconditioner-changes-nothing", []string{"preconditioner-costs-more"}, samePairing, "the same iterates: only the clock differs"},
	{"unstable-factors", []string{"divergence", "restart-stagnation", "breakdown", "accuracy-floor"}, samePairing, "the factors spoil it"},
	{"empty-row", []string{"zero-diagonal", "up-to-a-constant"}, allEmpty, "the same rows, told with their cause"},
	{"zero-diagonal", []string{"pivot"}, zeroPivot, "the pivot is a zero of the diagonal"},
	{"null-space-growth", []string{"divergence", "accuracy-floor", "false-convergence"}, samePairing, "what grows lies in the null space"},
	{"false-convergence", []string{"stopping-rules"}, samePairing, "its own number is the stopping rule that fails"},
	{"restart-stagnation", []string{"restart-length"}, samePairing, "a cycle that stands still foretells nothing"},
	{"mechanism", []string{"few-correct-digits"}, anywhere, "where A hardly holds x, digits mean nothing"},
	{"near-null", []string{"few-correct-digits"}, anywhere, "the digits of the same condition, told once"},
	{"row-scaling", []string{"ill-conditioned"}, anywhere, "it tells the condition after equilibration already"},
	{"double-precision", []string{"ill-conditioned"}, anywhere, "the same condition, told by what it does"},
	{"today-beaten", []string{"preconditioner-costs-more"}, samePairing, "the same times, told once"},
}

// consequences are what trials show on a system without a single answer.
var consequences = []string{"restart-stagnation", "restart-length", "accuracy-floor", "divergence", "breakdown", "pivot",
	"false-convergence", "stopping-rules", "unstable-factors"}

func anywhere(_, _ Finding) bool { return true }

// unsolvable: what is said of the system makes any answer worthless.
func unsolvable(strong, _ Finding) bool { return strong.Weight == Blocker }

func samePairing(strong, weak Finding) bool { return strong.Subject == weak.Subject }

// unprojected: a trial on the projected right-hand side is not concerned.
func unprojected(_, weak Finding) bool {
	prep, _, _ := cut(weak.Subject)
	return !strings.Contains(prep, "project")
}

func zeroPivot(_, weak Finding) bool { return len(weak.Evidence) > 0 && weak.Evidence[0].Value == 0 }

// resolve drops the findings that another one explains, by the table, then
// says once what is said alike of several pairings.
func resolve(all []Finding) []Finding {
	var out []Finding
	for _, f := range all {
		if explainedBy(all, f) {
			continue
		}
		if k := slices.IndexFunc(out, func(g Finding) bool { return g.Rule == f.Rule && g.Claim == f.Claim && g.Weight == f.Weight }); k >= 0 {
			out[k].Also = append(out[k].Also, f.Subject)
			continue
		}
		out = append(out, f)
	}
	return out
}

// mostNamed is how many pairings are named of which the same is said.
const mostNamed = 3

// alsoOf names the other pairings of which the same is said.
func alsoOf(also []string) string {
	if len(also) == 0 {
		return ""
	}
	text := "; the same of " + strings.Join(also[:min(mostNamed, len(also))], ", ")
	if more := len(also) - mostNamed; more > 0 {
		text += fmt.Sprintf(" and %d more", more)
	}
	return text
}

// explainedBy says whether a finding yields to one of the others.
func explainedBy(all []Finding, weak Finding) bool {
	for _, y := range yields {
		if y.weaker == nil && weak.Subject == OnSystem || y.weaker != nil && !slices.Contains(y.weaker, weak.Rule) {
			continue
		}
		for _, strong := range all {
			if strong.Rule == y.stronger && y.where(strong, weak) && certaintyOrder(strong.Certainty) <= certaintyOrder(weak.Certainty) {
				return true
			}
		}
	}
	return false
}

// advise holds the tries of a finding against what has already run: what
// failed, or ran slower than the trial it is about, is no longer offered, nor
// on a system what ran slower than the quickest; and where another trial has
// solved the system, the advice says so first.
func advise(c Case, f *Finding) {
	about, isTrial := find(c, f.Subject)
	best, ok := quickest(c)
	against := best // what a try must not be slower than
	if isTrial {
		against = about
	}
	f.Try = slices.DeleteFunc(slices.Clone(f.Try), func(p string) bool {
		h, ran := find(c, p)
		if !ran || !h.Stop.Ended() {
			return !ran && unbuilt(c, p)
		}
		return !solved(h) || f.Rule != "unsolved-rows" && solved(against) && h.OwnTime > against.OwnTime
	})
	if !ok || !isTrial || solved(about) || !about.Stop.Ended() || slices.Contains(speakForThemselves, f.Rule) {
		return
	}
	f.Advice = fmt.Sprintf("%s has solved the system in %s and %s; else %s", best.Pairing,
		steps(best.Iterations), seconds(best.OwnTime.Seconds()), f.Advice)
	f.Try = []string{best.Pairing}
}

// unbuilt says whether the preconditioner of a pairing broke down at set-up in
// another trial, on the system prepared alike.
func unbuilt(c Case, pairing string) bool {
	prep, _, m := cut(pairing)
	return slices.ContainsFunc(c.Trials, func(h trace.History) bool {
		p, _, q := cut(h.Pairing)
		return p == prep && q == m && h.Stop == trace.BrokeDown && h.Iterations == 0 && len(h.Notes.Broke) > 0
	})
}

// speakForThemselves are the rules whose advice stands whatever else works: a
// file taken for what it is not is to be swapped, and who beats today's pairing
// is named already.
var speakForThemselves = []string{"preconditioner-wrong-way", "today-beaten"}

// quickest is the trial that solved the system in the least time: the one
// that is recommended, where that is known. Those that keep x in two doubles
// are told of by what double precision does not hold.
func quickest(c Case) (best trace.History, ok bool) {
	if h, ran := find(c, c.Chosen); ran && inDouble(h) {
		return h, true
	}
	least := time.Duration(0)
	for _, h := range c.Trials {
		if inDouble(h) && (!ok || h.OwnTime < least) {
			best, ok, least = h, true, h.OwnTime
		}
	}
	return best, ok
}

// concern orders findings of one weight: the system and today's pairing first,
// then other trials, last those that nobody needs because another one has
// solved the system.
func concern(c Case, f Finding) int {
	h, isTrial := find(c, f.Subject)
	switch {
	case !isTrial || h.Today:
		return 0
	case superfluous(c, h):
		return 2
	}
	return 1
}

// superfluous says whether another trial solved the system, and this one did
// not.
func superfluous(c Case, h trace.History) bool {
	_, ok := quickest(c)
	return ok && !solved(h)
}

// soften makes a note of what befalls a trial that dwindle itself has entered
// and that another one has outdone: it costs the user nothing.
func soften(c Case, f *Finding) {
	h, isTrial := find(c, f.Subject)
	best, ok := quickest(c)
	if !ok {
		best, ok = Utmost(c.Facts, c.Trials)
	}
	if c.Race && isTrial && !h.Today && ok && h.Pairing != best.Pairing {
		f.Weight, f.Outdone = Note, true
	}
}
