package inspect

import (
	"math"
	"slices"
)

// signs judges definiteness by what single entries and pairs of rows tell:
// the diagonal, the 2 x 2 principal minors, diagonal dominance and the null
// vectors seen.
func (l *look) signs() error {
	f := &l.f
	f.PositiveDefinite = l.diagonalSays(f.DiagNegative, l.negative, "negative")
	f.NegativeDefinite = l.diagonalSays(f.DiagPositive, l.positive, "positive")
	if f.DiagNegative > 0 {
		f.Semidefinite = f.PositiveDefinite
	}
	if f.Symmetric.Answer == No {
		return l.notSymmetric()
	}
	if err := l.minors(); err != nil {
		return err
	}
	l.semidefinite()
	l.constants()
	l.dominant()
	return nil
}

// diagonalSays rules definiteness out where a diagonal entry has the wrong
// sign or is zero. A relative change of an entry alters no sign.
func (l *look) diagonalSays(wrong int, rows top, sign string) Fact {
	f := &l.f
	switch {
	case wrong > 0:
		return fact(No, Proved, float64(wrong), rows.list(), "%s on the diagonal, the largest in %s",
			count(wrong, sign+" entry", sign+" entries"), l.f.Names.Both(rows.rows[0]))
	case f.DiagZero+f.DiagMissing > 0:
		return fact(No, Proved, float64(f.DiagZero+f.DiagMissing), l.zeroDiag.list(), "%s on the diagonal, first in %s",
			count(f.DiagZero+f.DiagMissing, "zero", "zeros"), l.f.Names.Both(l.zeroDiag.rows[0]))
	}
	return Fact{}
}

// notSymmetric leaves open what the diagonal did not settle.
func (l *look) notSymmetric() error {
	f := &l.f
	for _, p := range []*Fact{&f.PositiveDefinite, &f.NegativeDefinite, &f.Semidefinite} {
		if p.Answer == "" {
			*p = unknown("A is not symmetric; what counts is (A+Aᵀ)/2")
		}
	}
	return nil
}

// constants rules definiteness out where constants are null vectors.
func (l *look) constants() {
	f := &l.f
	if f.RowSumsZero.Answer != Yes {
		return
	}
	words := "not definite"
	if f.Semidefinite.Answer == Yes {
		words = "semi-definite, not definite"
	}
	no := fact(No, f.RowSumsZero.Certainty, 0, f.RowSumsZero.Rows, "%s: %s", words, f.RowSumsZero.Why)
	for _, p := range []*Fact{&f.PositiveDefinite, &f.NegativeDefinite} {
		if p.Answer == "" {
			*p = no
		}
	}
}

// dominant settles definiteness by diagonal dominance (Gershgorin; Taussky
// 1949 where it is not strict in every row).
func (l *look) dominant() {
	f := &l.f
	if f.DiagNegative > 0 && f.DiagPositive > 0 {
		return
	}
	side := &f.PositiveDefinite
	if f.DiagNegative > 0 {
		side = &f.NegativeDefinite
	}
	if side.Answer != "" {
		return
	}
	if l.chained(weak, strict) {
		yes := fact(Yes, Proved, math.NaN(), nil, "diagonally dominant, strictly in %s, at least one of each component",
			count(f.StrictlyDominant, "row", "rows"))
		if l.slack > 0 && !l.robust(l.slack) {
			yes = l.doubt(yes, "yours may not be definite")
		}
		*side = yes
	}
}

// semidefinite notes that dominance with a diagonal that is nowhere negative
// leaves no negative curvature.
func (l *look) semidefinite() {
	f := &l.f
	switch {
	case f.DiagNegative > 0 || f.Semidefinite.Answer != "":
	case f.Dominant == f.N:
		f.Semidefinite = fact(Yes, Proved, math.NaN(), nil, "diagonally dominant, no diagonal entry negative")
		if l.slack > 0 && !l.robust(l.slack) {
			f.Semidefinite = l.doubt(f.Semidefinite, "yours may be less dominant")
		}
	case l.all(near):
		f.Semidefinite = fact(Yes, Measured, math.NaN(), nil, "diagonally dominant to rounding, no diagonal entry negative")
	}
}

// all reports whether every row has the property.
func (l *look) all(g flag) bool {
	return !slices.ContainsFunc(l.flags, func(h flag) bool { return h&g == 0 })
}
