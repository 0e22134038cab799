package diagnose

import (
	"fmt"
	"math"
	"slices"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// A pattern counts as a mesh for these rules from this dimension on: on lines
// and trees a direct solve costs next to nothing.
const meshDimension = 1.7

// onMesh returns the couplings of a symmetric system on a mesh, else nil.
func onMesh(f *inspect.Facts) *inspect.Couplings {
	if f.Study == nil || f.Study.Couplings == nil || f.Symmetric.Answer != inspect.Yes {
		return nil
	}
	if k := f.Study.Couplings; k.Mesh && k.Dimension >= meshDimension {
		return k
	}
	return nil
}

// anisotropy: most rows are coupled far more strongly one way.
var anisotropy = Rule{"anisotropy", func(c Case) []Finding {
	k := onMesh(c.Facts)
	if k == nil || !k.Scalar || k.OneWay < 0.5 || !(k.Ratio >= 10) {
		return nil
	}
	return []Finding{{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Claim:  fmt.Sprintf("%.0f %% of rows are coupled far more strongly one way than the other (median ratio %s)", 100*k.OneWay, num(k.Ratio)),
		Advice: "point methods hardly move what varies along the strong couplings: incomplete Cholesky with the rows ordered along them, or algebraic multigrid, which follows them",
		Try:    smoothers(c.Facts),
		Evidence: []Evidence{number("share of rows", k.OneWay, ""), number("median ratio of strong to weak", k.Ratio, ""),
			number("dimension of the mesh", k.Dimension, "")}}}
}}

// smoothers are pairings for a definite system on a mesh, or for another
// symmetric one.
func smoothers(f *inspect.Facts) []string {
	if f.PositiveDefinite.Answer != inspect.Yes {
		return instead(f)
	}
	return []string{"cg+ic:0", "cg+amg:aggregation"}
}

// greatJump is the ratio of the diagonals of neighbours from which a jump of
// the coefficients is worth a word.
const greatJump = 100

// jumps: coefficients jump between neighbouring rows.
var jumps = Rule{"coefficient-jump", func(c Case) []Finding {
	k := onMesh(c.Facts)
	if k == nil || !k.Scalar || k.OneWay >= 0.5 || k.Jump < greatJump {
		return nil
	}
	return []Finding{{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("coefficients jump by up to %s between neighbours (%s and %s)", num(k.Jump),
			c.name(k.JumpRows[0]), c.name(k.JumpRows[1])),
		Advice:   "each part that is nearly cut off by a jump leaves one small eigenvalue after diagonal scaling: use a preconditioner that couples rows",
		Try:      smoothers(c.Facts),
		Evidence: []Evidence{{Quantity: "largest ratio of neighbouring diagonals", Value: k.Jump, Iteration: none, Rows: k.JumpRows}}}}
}}

// What growth must look like to be that of a mesh: iterations ∝ n^p with p·d
// between these, d being the dimension (1 is that of a second-order operator
// under a one-level method).
const leastGrowth, mostGrowth = 0.7, 1.5

// growsFrom is the order from which a multilevel method is worth its set-up.
const growsFrom = 1000

// sameSlope is how far the local exponents of a power law may lie apart.
const sameSlope = 0.1

// oneLaw says whether the counts follow one power of the size: each step from
// one part to the next has the exponent of the others.
func oneLaw(g *inspect.Growth) bool {
	low, high := math.Inf(1), math.Inf(-1)
	for i := 1; i < len(g.Unknowns); i++ {
		p := math.Log(float64(g.Iterations[i])/float64(g.Iterations[i-1])) / math.Log(float64(g.Unknowns[i])/float64(g.Unknowns[i-1]))
		low, high = math.Min(low, p), math.Max(high, p)
	}
	return high-low <= sameSlope
}

// multilevelRan says whether a multilevel preconditioner has been measured.
func multilevelRan(c Case) bool {
	return slices.ContainsFunc(c.Trials, func(h trace.History) bool {
		_, _, m := cut(h.Pairing)
		return kindOfM(m) == "amg" && h.Stop.Ended()
	})
}

// growth: iterations of a one-level pairing grow with the mesh.
var growth = Rule{"mesh-growth", func(c Case) []Finding {
	f, k := c.Facts, onMesh(c.Facts)
	if k == nil || f.Study.Growth == nil || f.N < growsFrom {
		return nil
	}
	g := f.Study.Growth
	last := len(g.Unknowns) - 1
	if g.Unknowns[last] < f.N && !definiteSoFar(c) {
		return nil // parts of an indefinite A may be definite
	}
	if p := g.Exponent * k.Dimension; last < 2 || p < leastGrowth || p > mostGrowth {
		return nil
	}
	sizes := ""
	for i, n := range g.Unknowns {
		if i > 0 {
			sizes += ", "
		}
		sizes += fmt.Sprintf("%d at %d", g.Iterations[i], n)
	}
	out := Finding{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Claim:    fmt.Sprintf("iterations of %s grow with the mesh (%s, parts of this system)", g.Pairing, sizes),
		Advice:   "the growth is ended by a multilevel preconditioner, if by any",
		Try:      []string{"cg+amg:aggregation"},
		Evidence: []Evidence{number("exponent", g.Exponent, ""), number("dimension of the mesh", k.Dimension, "")}}
	for i, n := range g.Unknowns {
		out.Evidence = append(out.Evidence, number(fmt.Sprintf("iterations at %d unknowns", n), float64(g.Iterations[i]), ""))
	}
	if oneLaw(g) {
		ten := float64(g.Iterations[last]) * math.Pow(10*float64(f.N)/float64(g.Unknowns[last]), g.Exponent)
		out.Claim = fmt.Sprintf("iterations of %s grow as n^%.2f (%s, parts of this system): the condition of a mesh; by that law ten times the unknowns would take about %.0f (estimated)",
			g.Pairing, g.Exponent, sizes, ten)
	}
	if best, ok := quickest(c); ok && multilevelRan(c) {
		out.Try = []string{best.Pairing}
		out.Advice = fmt.Sprintf("at this size %s serves best of what ran (%s, %s)", best.Pairing, steps(best.Iterations), seconds(best.OwnTime.Seconds()))
		if _, _, m := cut(best.Pairing); kindOfM(m) != "amg" {
			out.Advice += "; on larger ones hold it against a multilevel preconditioner"
		}
	}
	if x := f.Study.Jacobi; x != nil && x.Condition > 0 {
		out.Evidence = append(out.Evidence, number("condition of A scaled by its diagonal", x.Condition, ""))
	}
	return []Finding{out}
}}
