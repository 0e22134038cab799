package precond

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var amgEntry = Entry{
	Name: "amg", Title: "algebraic multigrid",
	Source: "aggregation: Vaněk, Mandel and Brezina, Computing 56 (1996) 179–196; classical: Ruge and Stüben (1987), " +
		"Stüben, J. Comput. Appl. Math. 128 (2001) 281–309, De Sterck, Falgout, Nolting and Yang, Numer. Linear Algebra Appl. 15 (2008) 115–139; " +
		"smoother: Baker, Falgout, Kolev and Yang, SIAM J. Sci. Comput. 33 (2011) 2864–2887",
	Params: []linear.Param{
		{Name: "kind", Kind: linear.Choice, Choices: []string{"aggregation", "classical"},
			Meaning: "coarse unknowns: smoothed aggregates, or a subset of the fine ones"},
		{Name: "theta", Kind: linear.Real, Quiet: true, Default: 0, Min: 0, Max: 0.99,
			Meaning: "couplings weaker than this share are not followed; 0: 0.08 for aggregation, 0.25 for classical"},
		{Name: "sweeps", Kind: linear.Int, Quiet: true, Default: 1, Min: 1, Max: 8, Meaning: "Gauss-Seidel sweeps before and after each coarse correction"},
		{Name: "cycle", Kind: linear.Choice, Quiet: true, Choices: []string{"auto", "v", "w"},
			Meaning: "coarse levels visited once or twice a cycle; auto: w for aggregation, v for classical"},
	},
	Needs:     linear.NeedsEntries | linear.NeedsDiagonal,
	Assumes:   linear.AssumesSymmetric | linear.AssumesDefinite,
	Fixed:     true,
	Symmetric: true,
	Estimate:  estimateAMG,
	Build:     buildAMG,
}

// estimateAMG bounds the memory from experience: on the meshes and networks
// tried, coarse operators and transfers with their transposes have together
// less than 4 times the entries of A; see the test.
func estimateAMG(a *linear.CSR, _ linear.Values) (int64, bool) {
	if a == nil {
		return 0, false
	}
	return 12*4*int64(a.Entries()) + 80*int64(a.NRows) + 8*coarsest*coarsest, false
}

// buildAMG builds the hierarchy and the cycle. An A that is not symmetric is
// replaced by its symmetric part (A + Aᵀ)/2, so that M is symmetric for any A.
func buildAMG(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(s, "amg")
	if err != nil {
		return nil, notes, err
	}
	notes.Symmetric = true // and positive definite if A is
	part := a
	if !symmetric(a) {
		part = symmetricPart(a)
		notes.Bytes = part.Bytes()
		notes.Remarks = append(notes.Remarks, "A is not symmetric: M is built from its symmetric part (A + A')/2.")
	}
	how, err := coarseningOf(v, s)
	if err != nil {
		return nil, notes, err
	}
	c, err := newCycle(ctx, part, how, progress)
	if err != nil {
		return nil, notes, err
	}
	c.sweeps, c.visits = v.Int("sweeps"), visits(v)
	c.note(&notes)
	return c, notes, nil
}

// symmetricPart returns (A + Aᵀ)/2.
func symmetricPart(a *linear.CSR) *linear.CSR {
	t := a.Transpose()
	addHalf := func(w *linear.RowWork, b *linear.CSR, i int) {
		cols, vals := b.Row(i)
		for k, c := range cols {
			w.Add(c, vals[k]/2)
		}
	}
	return linear.ByRows(a.NRows, a.NCols, func(w *linear.RowWork, i int) {
		addHalf(w, a, i)
		addHalf(w, t, i)
	})
}

// visits returns how often a cycle visits each next level. Aggregates are so
// large that two visits cost little, and keep the count of iterations level.
func visits(v linear.Values) int {
	cycle := v.Choice("cycle")
	if cycle == "w" || cycle == "auto" && v.Choice("kind") == "aggregation" {
		return 2
	}
	return 1
}

// coarseningOf returns how the next level is made.
func coarseningOf(v linear.Values, s linear.System) (coarsening, error) {
	theta := v.Real("theta")
	if v.Choice("kind") == "classical" {
		if theta == 0 {
			theta = 0.25
		}
		return &classical{theta: theta}, nil
	}
	if theta == 0 {
		theta = 0.08
	}
	return newAggregation(theta, s.N(), s.Dofs, s.NearNull)
}
