package inspect

import (
	"fmt"
	"math"

	"dwindle/engine/linear"
)

// pushes is the part of b along the free directions above which rounding does
// not explain it.
const pushes = 1e-10

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

// regularBy judges by the condition of A equilibrated, by its factorisation.
func regularBy(f *Facts, x *Spectrum) Fact {
	k, norm := x.Condition, "2"
	if finite(x.Condition1) {
		k, norm = max(k, x.Condition1), "1"
	}
	if !(k < shaky) {
		return unknown("the condition of A equilibrated is %.2g or more: singular, or close to it", k)
	}
	return fact(No, Measured, k, nil, "the condition of A equilibrated is %.2g in the %s-norm, by its factorisation%s", k, norm,
		openDigits(f, f.Delta*k >= 1, "yours may be singular"))
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

// settleUnreachable: b is in A's range where A is regular, and of a symmetric A
// where b is orthogonal to all that is free.
func (e *exam) settleUnreachable(f *Facts) {
	if f.Unreachable.Answer != Unknown || len(e.s.B) != f.N {
		return
	}
	free := e.freeToRounding()
	switch {
	case f.Singular.Answer == No:
		f.Unreachable = fact(No, f.Singular.Certainty, 0, nil, "A is regular")
	case len(free) == 0 || len(free) == mostFree:
	case !e.symmetric:
		f.Unreachable = unknown("A is singular to rounding; its left null vectors were not looked for")
	default:
		f.Unreachable = e.unreachableBy(free)
	}
}

// unreachableBy measures the part of b in the span of the free directions of a
// symmetric A.
func (e *exam) unreachableBy(free []NullDirection) Fact {
	b, what := e.s.B, count(len(free), "direction", "directions")
	sum, basis := 0.0, [][]float64(nil)
	for _, d := range free {
		v := append([]float64(nil), d.Vector...)
		for range 2 {
			for _, w := range basis {
				linear.Axpy(-linear.Dot(w, v), w, v)
			}
		}
		linear.Scale(v, 1/max(linear.Norm2(v), tinyDivide), v)
		basis = append(basis, v)
		sum += linear.Dot(v, b) * linear.Dot(v, b)
	}
	part := math.Sqrt(sum) / e.f.RHSNorm
	if part > pushes {
		return fact(Yes, Measured, part, free[0].Rows, "%.6g of b lies along %s, free to rounding", part, what)
	}
	return fact(No, Measured, part, nil, "%.1g of b lies along %s, free to rounding", part, what)
}

// settleSymmetricPart says whether (A+Aᵀ)/2 is positive definite, of an A that
// is not symmetric.
func (e *exam) settleSymmetricPart(f *Facts) {
	m := e.out.Normality
	if m == nil || !finite(m.FieldMin) || !finite(m.FieldMax) {
		return
	}
	tiny := 0x1p-53 * f.NormFro * math.Sqrt(float64(f.N))
	switch r := e.half; {
	case r != nil && r.Definite:
		f.SymmetricPart = fact(Yes, Proved, m.FieldMin, nil, "Cholesky of it completes beyond all rounding; x'Ax/x'x from %.3g to %.3g", m.FieldMin, m.FieldMax)
		if f.Delta > 0 {
			f.SymmetricPart.Certainty = Measured
		}
	case m.FieldMin < -tiny:
		f.SymmetricPart = fact(No, Measured, m.FieldMin, nil, "some x has x'Ax/x'x = %.3g", m.FieldMin)
	case m.FieldMin > tiny+m.FieldMinBound && m.FieldSettled:
		f.SymmetricPart = fact(Yes, Measured, m.FieldMin, nil, "x'Ax/x'x from %.3g to %.3g", m.FieldMin, m.FieldMax)
	default:
		f.SymmetricPart = unknown("no x with x'Ax/x'x below %.3g was found", m.FieldMin)
	}
}

// SingularAtSight says that the pattern or the sums of rows or columns make A
// singular, without any factorisation.
func (f *Facts) SingularAtSight() bool {
	return f.Singular.Answer == Yes && (f.Singular.Certainty == Proved || f.RowSumsZero.Answer == Yes || f.ColSumsZero.Answer == Yes)
}
