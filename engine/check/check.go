package check

import (
	"context"
	"errors"
	"math"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// Question is what there is to judge.
type Question struct {
	System linear.System // with entries; its Guess is the x₀ of the other program, nil for zero
	X      []float64     // the solution in question, length n, finite
	Said   *Said         // the number the other program printed; nil if none is known
	Tol    float64       // what the rule's number must come down to
	Rule   string        // rhs, initial, backward or absolute
	// FieldTol is what the residual of each field must come down to as well,
	// 0 for nothing; nil where no field is asked for.
	FieldTol []float64
	Factor   direct.Limits // of the factorisation behind condition and true error
}

// Answer is everything found.
type Answer struct {
	Names       linear.RowNames
	Definitions []Definition // every measure, the residual's first
	Solved      bool         // the rule holds, and so does each field's own tolerance
	Verdict     string       // the same in one sentence
	Hints       []string     // what else the numbers say, one sentence each

	Residual Residual
	Norms    Norms
	Running  Running
	Digits   int     // significant digits that x is written with, at most 17
	Printing float64 // what these digits leave open of ‖b−Ax‖₂/‖b‖₂; 0 for 17 digits

	Componentwise float64          // largest |r_i|/(|A||x|+|b|)_i (Oettli and Prager 1964)
	Unsolved      int              // rows in which it exceeds √tol, and not for a small x alone
	Worst         []trace.RowShare // the rows with the largest, at most trace.MaxRows
	Fields        []trace.Field    // nil where no fields are known

	Factor   *Factor // condition and error by a factorisation; nil where there is none
	NoFactor string  // why not
	Said     *Match  // nil where nothing was said
}

// ErrNoEntries says that the matrix is known by its products only.
var ErrNoEntries = errors.New("a solution can be judged only where the entries of A are known")

// Check answers a question. It stops with the context's error.
func Check(ctx context.Context, q Question) (*Answer, error) {
	a := q.System.Matrix()
	if a == nil {
		return nil, ErrNoEntries
	}
	w := &work{ctx: ctx, q: q, a: a, out: &Answer{Names: q.System.RowNames()}}
	w.out.Residual = w.residual()
	w.out.Norms = w.norms()
	for _, part := range []func() error{w.running, w.factor} {
		if err := part(); err != nil {
			return nil, err
		}
	}
	w.componentwise()
	w.fields()
	w.printing()
	w.define()
	w.judge()
	w.out.Said = w.match()
	w.hints()
	return w.out, ctx.Err()
}

// work is a check under way.
type work struct {
	ctx       context.Context
	q         Question
	a         *linear.CSR
	at        *linear.CSR // Aᵀ; a itself where A is symmetric
	symmetric bool
	r, r0     []float64      // b−Ax and b−Ax₀, length n
	size      []float64      // |A||x|+|b|, length n
	unsolved  trace.RowShare // the worst unsolved row
	tooLarge  bool           // to be factorised: whether A is regular is not known
	out       *Answer
}

// over is a/b with 0/0 = 0.
func over(a, b float64) float64 {
	if a == 0 {
		return 0
	}
	if b == 0 {
		return math.Inf(1)
	}
	return a / b
}
