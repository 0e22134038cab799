package inspect

import (
	"fmt"
	"math"
)

// settle folds what the study has found into those facts that were left open:
// nothing that was proved or measured before is changed.
func (e *exam) settle(f *Facts) {
	e.settleSingular(f)
	e.settleDefinite(f)
	e.settleUnreachable(f)
	e.settleSymmetricPart(f)
}

// freeToRounding are the directions that are free to rounding.
func (e *exam) freeToRounding() []NullDirection {
	var out []NullDirection
	for _, d := range e.out.Null {
		if d.Quotient <= ZeroLimit {
			out = append(out, d)
		}
	}
	return out
}

func sizes(n int) string {
	if n == 1 {
		return "its size"
	}
	return "their size or less"
}

func (e *exam) settleSingular(f *Facts) {
	if f.Singular.Answer != Unknown {
		return
	}
	free, x := e.freeToRounding(), e.out.Equilibrated
	switch {
	case len(free) > 0:
		f.Singular = fact(Yes, Measured, float64(len(free)), free[0].Rows, "to rounding: A equilibrated maps %s to %.2g of %s%s",
			count(len(free), "direction", "directions"), free[len(free)-1].Quotient, sizes(len(free)), openDigits(f, f.Delta > free[0].Quotient, "yours may not be singular"))
	case e.singular:
		f.Singular = unknown("a pivot of A equilibrated vanishes to rounding: singular, or close to it")
	case x == nil || e.solver == nil:
		f.Singular = unknown("no null vector is seen in the pattern or in the sums; a factorisation did not fit the budget")
	default:
		f.Singular = regularBy(f, x)
	}
}

// regularBy judges by the condition of A equilibrated, by its factorisation: the
// larger one of that in the 2-norm and the estimate in the 1-norm, which is a
// lower bound.
func regularBy(f *Facts, x *Spectrum) Fact {
	k, least, norm := x.Condition, unlessMeasured(x), "2"
	if finite(x.Condition1) && x.Condition1 > k {
		k, least, norm = x.Condition1, "at least ", "1"
	}
	if !(k < shaky) {
		return unknown("the condition of A equilibrated is %.2g or more: singular, or close to it", k)
	}
	return fact(No, Measured, k, nil, "the condition of A equilibrated is %s%.2g in the %s-norm, by its factorisation%s", least, k, norm,
		openDigits(f, f.Delta*k >= 1, "yours may be singular"))
}

// unlessMeasured says of a condition whose ends are not settled that it is a
// lower bound.
func unlessMeasured(x *Spectrum) string {
	if x.Certainty == Measured {
		return ""
	}
	return "at least "
}

// openDigits says which digits could overturn a measurement, where they could.
func openDigits(f *Facts, could bool, what string) string {
	if !could || !(f.Delta > 0) {
		return ""
	}
	return fmt.Sprintf("; the file has %d digits and %s: write 17 digits and run again", f.Digits, what)
}

// settleDefinite: where no pivot is negative and A is singular to rounding, A
// is semi-definite as far as it can be seen.
func (e *exam) settleDefinite(f *Facts) {
	if !e.symmetric || f.DiagPositive != f.N || f.NegativeCount.Answer != No || len(e.freeToRounding()) == 0 {
		return
	}
	if f.PositiveDefinite.Answer == Unknown {
		f.PositiveDefinite = fact(No, Measured, 0, f.Singular.Rows, "semi-definite at most: singular to rounding")
	}
	if f.Semidefinite.Answer == Unknown {
		f.Semidefinite = fact(Yes, Measured, 0, f.Singular.Rows, "%s", f.NegativeCount.Why)
	}
}

// settleSymmetricPart says whether (A+Aᵀ)/2 is positive definite, of an A that
// is not symmetric.
func (e *exam) settleSymmetricPart(f *Facts) {
	m := e.out.Normality
	if m == nil || !finite(m.FieldMin) || !finite(m.FieldMax) {
		return
	}
	tiny := 0x1p-53 * max(f.NormFro*math.Sqrt(float64(f.N)), float64(f.N)*max(-m.FieldMin, m.FieldMax))
	switch r := e.half; {
	case r != nil && r.Definite:
		f.SymmetricPart = fact(Yes, Proved, m.FieldMin, nil, "Cholesky of it completes beyond all rounding; x'Ax/x'x %s", m.FieldText(short))
		if f.Delta > 0 {
			f.SymmetricPart.Certainty = Measured
		}
	case m.FieldMin < -tiny:
		f.SymmetricPart = fact(No, Measured, m.FieldMin, nil, "some x has x'Ax/x'x = %.3g", m.FieldMin)
	case m.FieldMin > tiny+m.FieldMinBound && m.FieldSettled:
		f.SymmetricPart = fact(Yes, Measured, m.FieldMin, nil, "x'Ax/x'x %s", m.FieldText(short))
	default:
		f.SymmetricPart = unknown("no x with x'Ax/x'x below %.3g was found", m.FieldMin)
	}
}

func short(x float64) string { return fmt.Sprintf("%.3g", x) }

// SingularAtSight says that the pattern or the sums of rows or columns make A
// singular, without any factorisation.
func (f *Facts) SingularAtSight() bool {
	return f.Singular.Answer == Yes && (f.Singular.Certainty == Proved || f.RowSumsZero.Answer == Yes || f.ColSumsZero.Answer == Yes)
}

// MostlyZeros says that at least half of what the file stores is zero, so that
// products take twice the time they need.
func (f *Facts) MostlyZeros() bool {
	return f.ExplicitZeros < f.Stored && 2*f.ExplicitZeros >= f.Stored && f.Stored > 0
}
