package inspect

import (
	"errors"
	"math"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
)

// FieldFacts is what is established of the rows of one field of unknowns.
type FieldFacts struct {
	Name                                 string
	Rows                                 int
	RHSNorm                              float64 // ‖b_f‖₂
	RowNorm                              Range   // ‖·‖∞ of its rows, over nonempty ones
	Diag                                 Range   // |a_ii| over nonzero ones
	DiagPositive, DiagNegative, DiagZero int     // a missing entry is zero
	Coupled                              bool    // its rows reach columns of other fields
	// Block tells whether the field's diagonal block is positive definite, or,
	// where its diagonal is all negative, the block's negative.
	Block Fact
}

// fields looks at each field of unknowns by itself, where fields are known.
func (l *look) fields() error {
	s := l.s
	if s.FieldOf == nil {
		return nil
	}
	facts := make([]FieldFacts, len(s.Fields))
	norm, diag := make([]gather, len(facts)), make([]gather, len(facts))
	for f := range facts {
		facts[f].Name = s.Fields[f]
	}
	for i := range l.f.N {
		if err := l.every(i); err != nil {
			return err
		}
		k := s.FieldOf[i]
		facts[k].row(l, i, &norm[k], &diag[k])
	}
	for k := range facts {
		facts[k].RowNorm, facts[k].Diag = norm[k].Range, diag[k].Range
		facts[k].RHSNorm = math.Sqrt(facts[k].RHSNorm)
		if err := l.block(&facts[k], int32(k)); err != nil {
			return err
		}
	}
	l.f.Fields = facts
	return nil
}

// row adds row i to its field.
func (f *FieldFacts) row(l *look, i int, norm, diag *gather) {
	cols, vals := l.a.Row(i)
	d, most := 0.0, 0.0
	for k, c := range cols {
		if int(c) == i {
			d = vals[k]
		}
		most = math.Max(most, math.Abs(vals[k]))
		f.Coupled = f.Coupled || vals[k] != 0 && l.s.FieldOf[c] != l.s.FieldOf[i]
	}
	f.Rows++
	if b := l.s.B; b != nil {
		f.RHSNorm += b[i] * b[i]
	}
	if most > 0 {
		norm.add(i, most)
	}
	switch {
	case d > 0:
		f.DiagPositive++
	case d < 0:
		f.DiagNegative++
	default:
		f.DiagZero++
	}
	if d != 0 {
		diag.add(i, math.Abs(d))
	}
}

// block judges the definiteness of a field's diagonal block.
func (l *look) block(f *FieldFacts, field int32) error {
	switch {
	case l.f.Symmetric.Answer != Yes:
		f.Block = unknown("A is not symmetric")
		return nil
	case f.DiagZero == f.Rows:
		f.Block = fact(No, Proved, 0, nil, "no diagonal entry is nonzero")
		return nil
	case f.DiagZero > 0 || f.DiagPositive > 0 && f.DiagNegative > 0:
		f.Block = fact(No, Proved, math.NaN(), nil, "%d positive, %d negative and %d zero diagonal entries", f.DiagPositive, f.DiagNegative, f.DiagZero)
		return nil
	}
	b, rows := diagonalBlock(l.a, l.s.FieldOf, field)
	if f.DiagNegative > 0 {
		b = negated(b)
	}
	within := direct.FactLimits
	within.Work /= float64(len(l.s.Fields))
	r, err := direct.VerifiedDefiniteWithin(l.ctx, b, l.slack, within)
	if err != nil && !errors.Is(err, direct.ErrTooLarge) {
		return err
	}
	sign, sure := "", Proved
	if f.DiagNegative > 0 {
		sign = "its negative: "
	}
	if !r.WithinDelta {
		sure = Measured
	}
	switch {
	case err != nil:
		f.Block = unknown("%stoo large to be proved here", sign)
	case r.Definite:
		f.Block = fact(Yes, sure, r.Shift, nil, "%sCholesky completes with %.2g to spare", sign, r.Shift)
	case r.Negative:
		var named []int
		for _, i := range r.Rows {
			named = first16(named, rows[i])
		}
		f.Block = fact(No, sure, r.Rayleigh, named, "%sx'Ax/x'x = %.3g for an x in this field", sign, r.Rayleigh)
	default:
		f.Block = unknown("%sCholesky breaks, yet no negative curvature beyond rounding was found", sign)
	}
	return nil
}

// diagonalBlock returns the part of a whose rows and columns are of the field,
// and the rows of a that it is made of.
func diagonalBlock(a *linear.CSR, of []int32, field int32) (*linear.CSR, []int) {
	place := make([]int32, a.NCols)
	var rows []int
	for i, k := range of {
		if k == field {
			place[i] = int32(len(rows))
			rows = append(rows, i)
		}
	}
	b := &linear.CSR{NRows: len(rows), NCols: len(rows), Ptr: make([]int, 1, len(rows)+1)}
	for _, i := range rows {
		cols, vals := a.Row(i)
		for k, c := range cols {
			if of[c] == field {
				b.Col, b.Val = append(b.Col, place[c]), append(b.Val, vals[k])
			}
		}
		b.Ptr = append(b.Ptr, len(b.Col))
	}
	return b, rows
}
