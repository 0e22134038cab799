package inspect

import (
	"context"
	"fmt"
	"math"

	"dwindle/engine/linear"
)

// Inspect establishes the facts of a system, cheapest first. After each group
// it calls seen (if not nil) with a new value, which it never changes again;
// the last one, with Complete set, is also returned. It stops with the
// context's error when cancelled.
func Inspect(ctx context.Context, s linear.System, seen func(*Facts)) (*Facts, error) {
	l := &look{ctx: ctx, s: s, a: s.Matrix(), delta: s.Delta()}
	groups := []func(*look) error{(*look).heading, (*look).guess, (*look).rows, (*look).transpose, (*look).nullVectors, (*look).signs, (*look).definite, (*look).fields}
	if l.a == nil {
		groups = []func(*look) error{(*look).heading, (*look).guess, (*look).matrixFree}
	}
	for k, group := range groups {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		if err := group(l); err != nil {
			return nil, err
		}
		l.f.Complete = k == len(groups)-1
		if given := l.f; seen != nil {
			seen(&given)
		}
	}
	return &l.f, nil
}

// look is one inspection under way.
type look struct {
	ctx   context.Context
	s     linear.System
	f     Facts
	a, at *linear.CSR // at is a itself where it equals its transpose
	delta float64     // relative change of an entry that the digits leave open
	flags []flag      // length n
	parts *linear.Components

	negative, positive, zeroDiag top     // rows by the sign of their diagonal entry
	slack                        float64 // delta and what A lacks to symmetry, relative to its entries
}

// flag notes of each row and column what later groups need.
type flag uint8

const (
	rowOff  flag = 1 << iota // the row has a nonzero off the diagonal
	colOff                   // the column has
	colFull                  // the column has a nonzero at all
	strict                   // |a_ii| > Σ|a_ij|, exactly
	weak                     // |a_ii| ≥ Σ|a_ij|, exactly
	near                     // the same to rounding
	beyond                   // |a_ii| > Σ|a_ij| beyond rounding
)

// heading fills in what needs no look at the entries.
func (l *look) heading() error {
	f, s := &l.f, l.s
	f.Name, f.N, f.MatrixFree, f.Names = s.Name, s.N(), l.a == nil, s.RowNames()
	f.Format, f.Stored, f.Duplicates = s.Source.Format, s.Source.Stored, s.Source.Duplicates
	f.ExplicitZeros = s.Source.ExplicitZeros
	f.Notes = append([]string(nil), s.Source.Notes...)
	f.Digits, f.Delta = s.Digits, l.delta
	if l.a != nil {
		f.Entries = l.a.Entries()
	}
	f.RHS = s.RHS
	f.RHSNorm = linear.Norm2(s.B)
	f.ZeroRHS = len(s.B) > 0 && f.RHSNorm == 0
	return nil
}

// matrixFree says that only products are known.
func (l *look) matrixFree() error {
	open := unknown("the matrix is known by its products only")
	f := &l.f
	for _, p := range []*Fact{&f.Symmetric, &f.PatternSymmetric, &f.TriangleOnly, &f.Singular, &f.PositiveDefinite,
		&f.NegativeDefinite, &f.Semidefinite, &f.RowSumsZero, &f.ColSumsZero, &f.Unreachable} {
		*p = open
	}
	return nil
}

// every returns the context's error once in a while: for row loops.
func (l *look) every(i int) error {
	if i&4095 == 0 {
		return l.ctx.Err()
	}
	return nil
}

func fact(a Answer, c Certainty, value float64, rows []int, why string, args ...any) Fact {
	return Fact{Answer: a, Certainty: c, Value: value, Rows: rows, Why: fmt.Sprintf(why, args...)}
}

func unknown(why string, args ...any) Fact {
	return fact(Unknown, Measured, math.NaN(), nil, why, args...)
}
