package direct

import (
	"context"
	"errors"

	"dwindle/engine/linear"
)

// ErrTooLarge says that a factorisation would pass the limits of work or
// memory; nothing was computed.
var ErrTooLarge = errors.New("too large to be factorised here")

// Limits bound a factorisation.
type Limits struct {
	Work  float64 // floating-point operations, as predicted
	Bytes int64   // of the factor and of the memory needed beside it, as predicted
	Rows  int     // beyond which not even an order is sought
}

// FactLimits are the limits of a factorisation that is made for a fact: about
// two seconds.
var FactLimits = Limits{Work: 4e9, Bytes: 512 << 20, Rows: 1_500_000}

// analyse predicts the factorisation of a and refuses what passes the limits.
func (l Limits) analyse(ctx context.Context, a *linear.CSR) (*Symbolic, error) {
	if a.NRows > l.Rows {
		return nil, ErrTooLarge
	}
	if err := ctx.Err(); err != nil {
		return nil, err
	}
	sym := Predict(a, Best)
	if sym.Work > l.Work || sym.Bytes()+sym.Stack > l.Bytes {
		return nil, ErrTooLarge
	}
	return sym, ctx.Err()
}

// CountSigns returns the inertia of a symmetric matrix by its LDLᵀ
// factorisation, within the limits: how many eigenvalues are negative. Counts
// are measured: each pivot is held against rounding, not against a bound of
// all errors. Beyond the limits the error is ErrTooLarge.
func CountSigns(ctx context.Context, a *linear.CSR, within Limits) (Inertia, error) {
	sym, err := within.analyse(ctx, a)
	if err != nil {
		return Inertia{}, err
	}
	f, err := FactorLDL(ctx, a, sym, nil)
	if err != nil {
		return Inertia{}, err
	}
	return f.Inertia, nil
}
