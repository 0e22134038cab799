package diagnose

import (
	"fmt"
	"math"
	"slices"

	"dwindle/engine/inspect"
)

// scaleLimit is the ratio of row norms from which scaling is worth a word.
const scaleLimit = 1e4

// A condition is laid to scaling where it is large, and equilibration takes
// most of its decimal digits away.
const (
	largeCondition = 1e5
	greatGain      = 100
	mostly         = 0.6
	almostAll      = 0.35
)

// scaling: rows live in very different units.
var scaling = Rule{"row-scaling", func(c Case) []Finding {
	f := c.Facts
	span, rows := f.RowNorm, []int{f.RowNorm.MinRow, f.RowNorm.MaxRow}
	if f.Singletons > 0 && f.Singletons < f.N {
		span, rows = f.RestDiag, []int{f.RestDiag.MinRow, f.RestDiag.MaxRow}
	}
	before, after, share := byScaling(f.Study)
	helped, words, gains := scaledTrials(c)
	wide := span.Min > 0 && span.Max/span.Min >= scaleLimit
	if share == "" && (!wide || !helped && gainsLittle(f, before, after)) {
		return nil
	}
	try := []string{"scale/gmres:30+none"}
	switch {
	case outOfReach(c): // scaled or not, what is out of reach spoils them
		try = projected(f)
	case f.Symmetric.Answer == inspect.Yes && (f.PositiveDefinite.Answer != inspect.No || semidefinite(f)):
		try = []string{"cg+jacobi", "scale/cg+none"}
	case f.Symmetric.Answer == inspect.Yes:
		try = []string{"scale/minres+none"}
	}
	g := Finding{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Advice:   scalingAdvice(c, try),
		Try:      try,
		Evidence: []Evidence{{Quantity: "largest over smallest row", Value: span.Max / span.Min, Iteration: none, Rows: rows}}}
	g.Evidence = append(g.Evidence, gains...)
	if helped || share != "" {
		g.Weight = Drag
	}
	differ := fmt.Sprintf("rows differ in size by %s (%s to %s)", num(span.Max/span.Min), c.name(rows[0]), c.name(rows[1]))
	if share == "" {
		switch {
		case f.Singular.Answer != inspect.Yes && before != nil && before.Condition > 0 && after.Condition > 0:
			g.Claim = fmt.Sprintf("%s; the condition of %s is %s, and %s once rows and columns are equilibrated",
				differ, before.Of, num(before.Condition), num(after.Condition))
		case helped:
			g.Claim = differ
		default:
			g.Claim = differ + ": a norm over all of them hides the small ones"
		}
		if helped {
			g.Claim += "; " + words
		}
		foreseeScaled(c, &g)
		return []Finding{g}
	}
	g.Claim = fmt.Sprintf("the condition %s of %s is %s scaling: %s once rows and columns are equilibrated; %s",
		num(before.Condition), before.Of, share, num(after.Condition), differ)
	if helped {
		g.Claim += "; " + words
	}
	g.Certainty = lesser(before.Certainty, after.Certainty)
	g.Evidence = append(g.Evidence, number("condition of "+before.Of, before.Condition, ""), number("condition after equilibration", after.Condition, ""))
	foreseeScaled(c, &g)
	return []Finding{g}
}}

// littleGain is the part of the condition that equilibration must take away
// before it can halve the count of cg, which goes with the root.
const littleGain = 4

// gainsLittle says whether A is known to be hardly better conditioned once it
// is equilibrated.
func gainsLittle(f *inspect.Facts, before, after *inspect.Spectrum) bool {
	return f.Singular.Answer != inspect.Yes && before != nil && before.Condition > 0 && after.Condition > 0 &&
		before.Condition < littleGain*after.Condition
}

// scalingGain is by how much scaling must cut a count to be called a help.
const scalingGain = 1.5

// scaledTrials holds a trial against the same one scaled, where both have run:
// whether scaling has helped, and the words that say so.
func scaledTrials(c Case) (helped bool, words string, evidence []Evidence) {
	for _, h := range c.Trials {
		prep, solver, m := cut(h.Pairing)
		if prep != "" || m != "none" || !solved(h) && !failed(h) {
			continue
		}
		for _, p := range []string{solver + "+jacobi", "scale/" + solver + "+none"} {
			s, ok := find(c, p)
			if !ok || !solved(s) || solved(h) && float64(h.Iterations) < scalingGain*float64(s.Iterations) {
				continue
			}
			came := "took " + steps(h.Iterations)
			if !solved(h) {
				came = "ended " + h.Stop.String()
			}
			return true, fmt.Sprintf("%s %s, %s %d", h.Pairing, came, p, s.Iterations),
				[]Evidence{number("iterations of "+h.Pairing, float64(h.Iterations), ""), number("iterations of "+p, float64(s.Iterations), "")}
		}
	}
	return false, "", nil
}

// scalingAdvice names what has solved the system by other means, before scaling.
func scalingAdvice(c Case, try []string) string {
	const plain = "scale the system, or use jacobi at the least"
	if best, ok := quickest(c); ok && !slices.Contains(try, best.Pairing) {
		return fmt.Sprintf("%s has solved the system in %s and %s; else %s", best.Pairing,
			steps(best.Iterations), seconds(best.OwnTime.Seconds()), plain)
	}
	return plain
}

// foreseeScaled adds what cg needs once A is scaled by its diagonal, where it
// can be foreseen. Of a singular A the steps on its eigenvalues would count the
// one at zero, by what rounding has made of it.
func foreseeScaled(c Case, g *Finding) {
	const scaled = "cg+jacobi"
	if c.Facts.Study == nil || c.Facts.Singular.Answer == inspect.Yes || !slices.Contains(g.Try, scaled) {
		return
	}
	its, ok := foresee(c.Facts.Study.Jacobi, c.Tol)
	if !ok {
		return
	}
	if h, ran := find(c, scaled); !ran || !solved(h) {
		g.Claim += fmt.Sprintf("; %s is foreseen to take about %d its", scaled, its)
	}
	g.Evidence = append(g.Evidence, number("iterations of "+scaled, float64(its), "foreseen"))
	g.Predicts = []Predicted{{Pairing: scaled, Quantity: "iterations", Value: float64(its)}}
}

// byScaling says how much of the condition is scaling: "almost all", "mostly",
// or "" for less. Singleton rows are left out where they are told apart.
func byScaling(s *inspect.Study) (before, after *inspect.Spectrum, share string) {
	if s == nil || s.Raw == nil || s.Equilibrated == nil {
		return nil, nil, ""
	}
	before, after = s.Raw, s.Equilibrated
	if s.Rest != nil {
		before = s.Rest
	}
	if math.IsInf(before.Condition, 0) || math.IsInf(after.Condition, 0) { // beyond all numbers: nothing is known
		return nil, nil, ""
	}
	if !(before.Condition >= largeCondition) || !(before.Condition >= greatGain*after.Condition) {
		return before, after, ""
	}
	switch left := math.Log(after.Condition) / math.Log(before.Condition); {
	case left <= almostAll:
		return before, after, "almost all"
	case left <= mostly:
		return before, after, "mostly"
	}
	return before, after, ""
}

// lesser is the less certain of two.
func lesser(a, b inspect.Certainty) inspect.Certainty {
	if certaintyOrder(a) > certaintyOrder(b) {
		return a
	}
	return b
}
