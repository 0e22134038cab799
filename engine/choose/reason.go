package choose

import (
	"fmt"
	"strings"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// reasons say what the choice rests on.
func reasons(f *inspect.Facts, trials []trace.History, c Choice) []string {
	first := c.Ranked[0]
	if first.two {
		return append(append(utmost(f, trials), twoReasons(chosen(trials, c), first)...), others(trials, c)...)
	}
	s := fmt.Sprintf("%s, %s to the target, of which %s set-up", count(first.Iterations, "iteration"), took(first.Seconds), took(first.Setup))
	out := []string{s + rests(first)}
	switch {
	case c.Goal == Memory:
		out = append(out, "it takes the least memory of those that reached the target")
	case c.Goal == Robust && first.Safe:
		out = append(out, "theory stands behind it on a matrix of this kind, and nothing went wrong on the way")
	case c.Goal == Robust:
		out = append(out, "nothing that reached the target is safe by theory on a matrix of this kind")
	}
	if len(c.Ranked) > 1 && c.Ranked[1].Reached {
		second := c.Ranked[1]
		words := ""
		if second.two {
			words = ", x kept in two doubles"
		}
		out = append(out, fmt.Sprintf("next is %s with %s and %s%s", second.Pairing, count(second.Iterations, "iteration"), took(second.Seconds), words))
	}
	if s := restsOn(f, trials, c); s != "" {
		out = append(out, s)
	}
	return append(out, others(trials, c)...)
}

// utmost says where the tolerance asks for more than double precision gives.
func utmost(f *inspect.Facts, trials []trace.History) []string {
	h, ok := diagnose.Utmost(f, trials)
	if !ok {
		return nil
	}
	out := []string{fmt.Sprintf("%s: %.2g is about all that double precision gives here; ask for %.1g", h.Pairing, h.TrueResidual, diagnose.AskFor(h.TrueResidual))}
	if right := diagnose.Right(h); right != "" {
		out = append(out, fmt.Sprintf("its x is %s, measured against %s", right, h.Near.Of))
	}
	return out
}

// twoReasons say what a solution in two doubles takes, and what is left of it in
// one.
func twoReasons(h *trace.History, r Ranked) []string {
	out := []string{fmt.Sprintf("for the tolerance as it is, %s keeps x in two doubles: %s, %s to the target, of which %s set-up",
		r.Pairing, count(r.Iterations, "iteration"), took(r.Seconds), took(r.Setup))}
	rounded := fmt.Sprintf("its x rounded to one double leaves %.2g", h.Rounded)
	if right := diagnose.Right(*h); right != "" {
		rounded += ", and is " + right
	}
	return append(out, rounded)
}

// others counts those that did not get there.
func others(trials []trace.History, c Choice) []string {
	outpaced, missed := 0, 0
	for _, h := range trials {
		switch {
		case h.Stop == trace.Outpaced:
			outpaced++
		case h.Stop.Ended() && h.Stop != trace.Refused && !reached(h):
			missed++
		}
	}
	var out []string
	if outpaced > 0 {
		out = append(out, fmt.Sprintf("%d of %d pairings behind for good, ended early", outpaced, len(c.Ranked)))
	}
	if missed > 0 {
		out = append(out, fmt.Sprintf("%d of %d pairings did not reach the target", missed, len(c.Ranked)))
	}
	return out
}

// chosen is the trial of the choice.
func chosen(trials []trace.History, c Choice) *trace.History {
	for i := range trials {
		if trials[i].Pairing == c.Ranked[0].Pairing {
			return &trials[i]
		}
	}
	return nil
}

// restsOn names the facts that the chosen method assumes.
func restsOn(f *inspect.Facts, trials []trace.History, c Choice) string {
	h := chosen(trials, c)
	if f == nil || h == nil || !h.SymmetricA {
		return ""
	}
	var words []string
	if f.Symmetric.Answer == inspect.Yes {
		words = append(words, fmt.Sprintf("A is symmetric (%s)", f.Symmetric.Certainty))
	}
	if h.DefiniteA && f.PositiveDefinite.Answer == inspect.Yes {
		words = append(words, fmt.Sprintf("positive definite (%s)", f.PositiveDefinite.Certainty))
	}
	if len(words) == 0 {
		return ""
	}
	return "it rests on this: " + strings.Join(words, " and ")
}

// unproved says that the chosen method assumes what has not been established.
func unproved(f *inspect.Facts, trials []trace.History, c Choice) []string {
	h := chosen(trials, c)
	if f == nil || h == nil || !h.DefiniteA || f.PositiveDefinite.Answer != inspect.Unknown {
		return nil
	}
	return []string{"whether A is positive definite is not known: the method assumes it, and a negative eigenvalue could end it on another b"}
}
