package inspect

import (
	"errors"
	"math"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

// normalToRounding is the departure from normality, a root of the difference of
// two sums that are equal for a normal matrix, that rounding alone makes.
const normalToRounding = 1e-7

// Normal says whether A is normal to rounding.
func (n *Normality) Normal() bool { return n.Exact && n.Henrici <= normalToRounding }

// balancingSweeps of the bound on the departure from normality, at about
// balancingWork operations an entry.
const balancingSweeps, balancingWork = 60, 40

// normality tells how far the eigenvalues of a nonsymmetric A can be trusted;
// of A equilibrated too, so that a difference of units is not taken for it.
func (e *exam) normality() error {
	if e.symmetric || e.scaled == nil || !e.spend(2*balancingSweeps*balancingWork*float64(len(e.a.Val))) {
		return nil
	}
	m := &Normality{LeftmostRe: math.NaN(), RightRe: math.NaN(), FieldMin: math.NaN(), FieldMax: math.NaN(), SkewMax: math.NaN()}
	at, bt := e.a.Transpose(), e.scaled.Transpose()
	m.Henrici = spectrum.HenriciBound(e.a, at, balancingSweeps)
	m.Equilibrated = spectrum.HenriciBound(e.scaled, bt, balancingSweeps)
	if rows := e.f.RowEntries.Max; e.spend(40 * rows * float64(len(e.a.Val))) {
		m.Henrici = max(m.Henrici, spectrum.CommutatorBound(e.a, at))
	}
	if x := e.out.Raw; x != nil && x.Exact {
		m.LeftmostRe, m.RightRe = real(x.Values[0]), real(x.Values[len(x.Values)-1])
		m.Henrici, m.Exact = orMore(spectrum.Henrici(x.Values, e.f.NormFro), m.Henrici), true
	}
	if m.Exact && e.densely(e.f.N, 10) {
		if values := spectrum.DenseEigenvalues(e.scaled); values != nil {
			m.Equilibrated = orMore(spectrum.Henrici(values, linear.Norm2(e.scaled.Val)), m.Equilibrated)
		}
	}
	e.out.Normality = m
	if err := e.field(m, e.a, at); err != nil || m.Exact {
		return err
	}
	return e.outermost(m)
}

// orMore is the value, or its lower bound where that is a number and more.
func orMore(value, bound float64) float64 {
	if bound > value {
		return bound
	}
	return value
}

// ritzSteps is how many steps of the Arnoldi process look for the outermost
// eigenvalues.
const ritzSteps = 40

// outermost tells the extreme real parts of the eigenvalues, where not all are
// known, by Ritz values.
func (e *exam) outermost(m *Normality) error {
	if !e.spend(ritzSteps * (e.product() + 4*ritzSteps*float64(e.f.N))) {
		return nil
	}
	values, err := spectrum.Arnoldi(e.ctx, e.f.N, e.a.Apply, ritzSteps)
	for _, v := range values {
		if !(m.LeftmostRe <= real(v)) {
			m.LeftmostRe = real(v)
		}
		if !(m.RightRe >= real(v)) {
			m.RightRe = real(v)
		}
	}
	return err
}

// field measures the field of values: the ends of the symmetric part, densely
// where that is affordable, and the largest magnitude of the skew one.
func (e *exam) field(m *Normality, b, bt *linear.CSR) error {
	if !e.denseField(m, b) {
		h := spectrum.Combined(b, bt, b.NRows, 1)
		out, err := e.ends(b.NRows, h, 1, 1, 2*e.product(), endProducts)
		if err != nil || len(out.Low) == 0 {
			return err
		}
		m.FieldMin, m.FieldMinBound, m.FieldMax, m.FieldSettled = out.Low[0].Value, out.Low[0].Bound, out.High[0].Value, out.Settled
	}
	m.FieldHoldsZero = m.FieldMin < 0 && m.FieldMax > 0
	k, w := spectrum.Combined(b, bt, b.NRows, -1), make([]float64, b.NRows)
	out, err := e.ends(b.NRows, func(dst, x []float64) {
		k(w, x)
		k(dst, w)
		linear.Scale(dst, -1, dst)
	}, 0, 1, 4*e.product(), endProducts)
	if err == nil && len(out.High) > 0 {
		m.SkewMax = math.Sqrt(max(0, out.High[0].Value))
	}
	return err
}

// denseField takes the ends of the symmetric part from all its eigenvalues: to
// the rounding of the largest, and below a few times that they are not settled.
func (e *exam) denseField(m *Normality, b *linear.CSR) bool {
	if !e.densely(b.NRows, 1.4) {
		return false
	}
	values := spectrum.DenseSymmetric(symmetricHalf(b))
	if values == nil {
		return false
	}
	m.FieldMin, m.FieldMax = values[0], values[len(values)-1]
	m.FieldMinBound = float64(len(values)) * 0x1p-53 * max(-m.FieldMin, m.FieldMax)
	m.FieldSettled = m.FieldMinBound <= endTolerance*min(math.Abs(m.FieldMin), math.Abs(m.FieldMax))
	return true
}

// FieldText tells the ends of the field of values, a from and a to; ends that
// are not settled lie inside.
func (m *Normality) FieldText(number func(float64) string) string {
	if m.FieldSettled {
		return "from " + number(m.FieldMin) + " to " + number(m.FieldMax)
	}
	return "from at most " + number(m.FieldMin) + " to at least " + number(m.FieldMax)
}

// symmetricPart proves (A+Aᵀ)/2 definite where no field of values was found on
// both sides of zero, by a verified Cholesky factorisation where one fits the
// budget.
func (e *exam) symmetricPart() error {
	m := e.out.Normality
	if m == nil || !(m.FieldMin > 0) {
		return nil
	}
	h := symmetricHalf(e.a)
	sym := direct.Predict(h, direct.Best)
	if !e.within(sym.Work, sym.Bytes()+sym.Stack) {
		return nil
	}
	r, err := direct.VerifiedDefinite(e.ctx, h, 0x1p-53) // what the sums round
	switch {
	case errors.Is(err, direct.ErrTooLarge):
		return nil
	case err != nil:
		return err
	case r.WithinDelta:
		e.half = &r
	}
	return nil
}

// symmetricHalf returns (A+Aᵀ)/2.
func symmetricHalf(a *linear.CSR) *linear.CSR {
	entries := make([]linear.Entry, 0, 2*len(a.Val))
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			entries = append(entries, linear.Entry{I: i, J: int(j), V: vals[k] / 2}, linear.Entry{I: int(j), J: i, V: vals[k] / 2})
		}
	}
	return linear.FromEntries(a.NRows, a.NRows, entries)
}
