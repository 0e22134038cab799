package precond

import (
	"context"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var ilutEntry = Entry{
	Name: "ilut", Title: "incomplete LU by threshold",
	Source: "Saad, Numer. Linear Algebra Appl. 1 (1994) 387–402",
	Params: thresholdParams,
	Needs:  linear.NeedsEntries,
	Fixed:  true, Transposes: true,
	Estimate: estimateILUT,
	Build: func(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
		w, notes, err := buildILUT(ctx, s, "ilut", v, 0, progress)
		if err != nil {
			return nil, notes, err
		}
		return built(w.f, notes, nil)
	},
}

// thresholdParams are the parameters of ilut; ilutp adds one.
var thresholdParams = []linear.Param{
	{Name: "tau", Kind: linear.Real, Default: 1e-3, Min: 0, Max: 1,
		Meaning: "drops entries up to tau times the 2-norm of their row of A"},
	{Name: "p", Kind: linear.Int, Default: 10, Min: 0, Max: 1 << 30,
		Meaning: "keeps at most p entries of each row of L and of U, besides the diagonal"},
	storeParam,
}

// estimateILUT is what full rows of both factors take.
func estimateILUT(a *linear.CSR, v linear.Values) (int64, bool) {
	if a == nil {
		return 0, false
	}
	half := capped(a.NRows, v.Int("p"))
	return factorBytes(a.NRows, half, half, v), false
}

// capped returns the entries of a strict triangle of order n with at most p in
// a row.
func capped(n, p int) int {
	if p >= n {
		return n * (n - 1) / 2
	}
	return p*(p+1)/2 + (n-p-1)*p
}

// buildILUT factors A row by row with two rules of dropping, relative to
// τ_i = τ‖a_i‖₂ where a_i is row i of A:
//
//	w_ij is skipped left of the diagonal where |w_ij| ≤ τ_i, before it is
//	divided by the pivot u_jj, and dropped right of it where |w_ij| ≤ τ_i;
//	of what is left, the p largest |l_ij| and the p largest |u_ij| stay.
//
// (Saad compares l_ij = w_ij/u_jj instead; w_ij scales as u_ij does.) A rule
// that keeps as many entries as f times the mean row of A, half of them in
// each factor, is p = (⌊f nnz/n⌋ + 1)/2.
func buildILUT(ctx context.Context, s linear.System, name string, v linear.Values, permtol float64, progress func(float64)) (*ilutWork, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(s, name)
	if err != nil {
		return nil, notes, err
	}
	w := newILUTWork(a, name, v.Real("tau"), v.Int("p"), permtol)
	defer w.lower.stop()
	for i := 0; i < a.NRows; i++ {
		if err := look(ctx, progress, i, a.NRows); err != nil {
			return nil, notes, err
		}
		d, err := w.row(i)
		if err != nil {
			notes.Broke = []trace.Pivot{{Row: i, Value: d}}
			return nil, notes, err
		}
		pivot(&notes, d)
	}
	w.finish()
	if err := w.f.settleAs(v, name); err != nil {
		return nil, notes, err
	}
	factorNotes(&notes, w.f, a)
	return w, notes, nil
}

// norm2 returns ‖v‖₂ of a short row.
func norm2(v []float64) float64 {
	s := 0.0
	for _, x := range v {
		s += x * x
	}
	if s > 1e-280 && s < 1e300 {
		return math.Sqrt(s)
	}
	return linear.Norm2(v)
}
