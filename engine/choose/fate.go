package choose

import (
	"slices"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const fruitless = 3 // preconditioners of a kind that broke down: no more are tried of it

var (
	// asTheyCome divide by pivots as they come, each by its own.
	asTheyCome = []string{"ilu", "ilut", "ras", "block-jacobi", "schur"}
	// otherPivots exchange columns or rows first, or add to the pivots what is
	// dropped.
	otherPivots = []string{"ilutp", "lu", "ldl", "milu"}
)

// fated says that a pairing would break down in its set-up as others have: its
// preconditioner has, built from the same, under another solver; or enough of
// its kind have and none could be built, where the facts or the pivots say why.
// Of a singular A whatever divides by pivots is one kind, else only what takes
// them as they come.
func (r Race) fated(pairing string) bool {
	p := split(pairing)
	kind := asTheyCome
	if r.Facts.Singular.Answer == inspect.Yes {
		kind = slices.Concat(asTheyCome, otherPivots)
	}
	broken, any := map[string]bool{}, false
	explained := r.Facts.Singular.Answer == inspect.Yes || !fullDiagonal(r.Facts)
	for _, h := range r.Trials {
		q := split(h.Pairing)
		of := slices.Contains(kind, bare(q.precond))
		switch {
		case len(h.Records) > 0:
			any = any || of
		case h.Stop == trace.BrokeDown && basis(h.Pairing) == basis(pairing):
			return true
		case h.Stop == trace.BrokeDown && of:
			broken[bare(q.precond)] = true
			explained = explained || zeroPivot(h)
		}
	}
	return slices.Contains(kind, bare(p.precond)) && !any && explained && len(broken) >= fruitless
}

// zeroPivot says that a set-up met a pivot of exactly zero.
func zeroPivot(h trace.History) bool {
	return slices.ContainsFunc(h.Notes.Broke, func(p trace.Pivot) bool { return p.Value == 0 })
}
