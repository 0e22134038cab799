package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	worthShare = 0.8 // of the iterations: a change that leaves more is not worth a try
	worthLeast = 8   // iterations saved
)

// outliers: few small eigenvalues stand apart from the rest, and cost
// iterations that taking them out would save.
var outliers = Rule{"small-outliers", func(c Case) (out []Finding) {
	for _, h := range c.Trials {
		w, ok := without(h, trace.Deflated)
		if !ok || !solved(h) || !worth(h, w) || singletonsMakeThem(h, w) {
			continue
		}
		f := Finding{Weight: Note, Certainty: inspect.Estimated, Subject: h.Pairing,
			Claim: fmt.Sprintf("%s of %s %s far below the rest (up to %s, then %s): deflating %s gives about %d its in place of %d",
				count(w.Removed, "eigenvalue"), spectrumOf(h), verb(w.Removed, "lies", "lie"), num(w.Largest), num(w.Next),
				itOrThem(w.Removed), w.Iterations, h.Iterations),
			Advice: "use a preconditioner that lifts them, or deflate vectors that are known: to find them takes as many products as are saved",
			Evidence: []Evidence{number("largest eigenvalue apart", w.Largest, ""), number("smallest of the rest", w.Next, ""),
				number("iterations without them", float64(w.Iterations), "predicted")}}
		if found(h, w) {
			prep, _, m := cut(h.Pairing)
			f.Weight = Drag
			f.Advice = "take them out: deflate, which finds them first and pays over several right-hand sides; or use a preconditioner that lifts them"
			f.Try = []string{fmt.Sprintf("%sdcg:%d+%s", prep, w.Removed, m)}
			f.Predicts = []Predicted{{Pairing: f.Try[0], Quantity: "iterations", Value: float64(w.Iterations)}}
		}
		out = append(out, f)
	}
	return out
}}

// found says whether deflated cg is likely to find the eigenvectors: it looks
// for k in a Krylov space of 2k+20 vectors, restarted, and does where the
// trial's own Ritz values had settled within half as many steps more.
func found(h trace.History, w trace.Counterfactual) bool {
	within := 1.5 * float64(2*w.Removed+20)
	for _, l := range h.Locks {
		if l.Value <= w.Largest && float64(l.Iter) > within {
			return false
		}
	}
	return true
}

// worth says whether a change saves enough to be tried.
func worth(h trace.History, w trace.Counterfactual) bool {
	return float64(w.Iterations) <= worthShare*float64(h.Iterations) && h.Iterations-w.Iterations >= worthLeast
}

// singletonsMakeThem says that the outliers are those of singleton rows: then
// deflation would not help, for each of these rows is an eigenvector.
func singletonsMakeThem(h trace.History, w trace.Counterfactual) bool {
	s, ok := without(h, trace.WithoutSingletons)
	return ok && s.Largest == w.Largest
}

// without returns a counterfactual of the trial.
func without(h trace.History, what string) (trace.Counterfactual, bool) {
	for _, w := range h.Without {
		if w.What == what {
			return w, true
		}
	}
	return trace.Counterfactual{}, false
}

// withoutSingletons returns what the first converged trial that tells it would
// have needed without the decoupled rows, in words for a claim, with the
// numbers; ok is false where none does.
func withoutSingletons(c Case) (words string, evidence []Evidence, ok bool) {
	for _, h := range c.Trials {
		w, found := without(h, trace.WithoutSingletons)
		if !found || !solved(h) || !worth(h, w) {
			continue
		}
		return fmt.Sprintf("%s would take about %d its in place of %d", h.Pairing, w.Iterations, h.Iterations),
			[]Evidence{{Quantity: "iterations of " + h.Pairing, Value: float64(h.Iterations), Iteration: none},
				{Quantity: "iterations without these rows", Value: float64(w.Iterations), Unit: "predicted", Iteration: none}}, true
	}
	return "", nil, false
}

// spectrumOf names the matrix whose eigenvalues a trial sees.
func spectrumOf(h trace.History) string {
	if h.Condition.Of == "M⁻¹A" {
		return "inv(M)A"
	}
	return "A"
}

// count prints a number with its noun.
func count(n int, noun string) string {
	if n == 1 {
		return "1 " + noun
	}
	return fmt.Sprintf("%d %ss", n, noun)
}

func verb(n int, one, many string) string {
	if n == 1 {
		return one
	}
	return many
}

func itOrThem(n int) string { return verb(n, "it", fmt.Sprintf("the %d", n)) }
