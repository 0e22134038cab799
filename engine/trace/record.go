package trace

import (
	"math"
	"time"
)

// Reading is what a solver reports after Begin and after each Step.
type Reading struct {
	// Residual is the method's own number: the norm it watches, not yet
	// divided by that of b.
	Residual float64
	// Alpha and Beta are the recurrence coefficients of this step as the
	// method's paper names them; NaN where it has none.
	Alpha, Beta float64
	// Done says that no further step is possible: the Krylov space is
	// exhausted, the residual is exactly zero, or the method broke down
	// (then an event says with what).
	Done bool
	// Events are what happened in this step; nil almost always.
	Events []Event
}

// Record is what one iteration left behind, at most 64 bytes.
type Record struct {
	Iter, MatVecs, Solves uint32        // iteration, products and preconditioner uses so far
	Clock                 time.Duration // the trial's own time so far, set-up included
	Residual              float64       // own norm, relative to b in that norm
	Audit                 float64       // ‖b−Ax‖₂/‖b‖₂ measured afresh; NaN where not audited
	Alpha, Beta           float64       // NaN where the method has none
}

// Audited says whether the record carries a freshly measured true residual.
func (r Record) Audited() bool { return !math.IsNaN(r.Audit) }

// RowShare is one row's part of a quantity. Row counts from 0; screens and
// reports print it from 1, as the file does.
type RowShare struct {
	Row   int
	Share float64 // between 0 and 1
}

// Kind names what an event is about.
type Kind string

// The kinds of events.
const (
	// NegativeCurvature: pᵀAp < 0. Value is pᵀAp/pᵀp; proved when it lies
	// below −Scale, the rounding bound in the same units.
	NegativeCurvature Kind = "negative curvature"
	// ZeroCurvature: pᵀAp is zero to rounding.
	ZeroCurvature Kind = "zero curvature"
	// PrecondIndefinite: rᵀM⁻¹r < 0 (Value relative to ‖r‖‖M⁻¹r‖).
	PrecondIndefinite Kind = "preconditioner indefinite"
	// Breakdown: a quantity the method divides by vanished; Value is it,
	// normalised by Scale's meaning in Quantity.
	Breakdown Kind = "breakdown"
	// HalfStep: BiCGStab reached its solution in the half step (s = 0).
	HalfStep Kind = "half step"
	// Restart: a restarted method began a new cycle; Value is the factor by
	// which the last cycle cut the residual.
	Restart Kind = "restart"
	// NonFinite: a number overflowed or became undefined.
	NonFinite Kind = "non-finite"
	// FalseStop: the method's own number met the target, the audit (Value)
	// did not; Scale is the own number.
	FalseStop Kind = "false stop"
)

// Event is something that happened at one iteration.
type Event struct {
	Iter     uint32
	Kind     Kind
	Quantity string  // such as "p'Ap/p'p" or "rho"
	Value    float64 // the quantity
	Scale    float64 // what it is held against
	Slack    float64 // how far the printed digits of the file could move Value
	Rows     []RowShare
}

// Proved says whether the event's value lies beyond its rounding bound.
func (e Event) Proved() bool {
	return e.Kind == NegativeCurvature && e.Scale > 0 && e.Value < -e.Scale
}

// MaxRows is how many of the largest shares an event carries.
const MaxRows = 16

// Pivot is where a factorisation broke down, and with what.
type Pivot struct {
	Row   int     // from 0
	Value float64 // the pivot
	Shift float64 // the shift (relative to the diagonal) of that attempt
}

// BuildNotes is what building a preconditioner left behind.
type BuildNotes struct {
	Entries   int64   // stored entries of the factors or of M
	Fill      float64 // entries relative to A's
	Bytes     int64   // memory of the preconditioner
	MinPivot  float64 // smallest and largest pivot in magnitude; 0 if none
	MaxPivot  float64
	Replaced  int      // values replaced to go on (must be said to the user)
	Shift     float64  // diagonal shift used, relative to diag A; 0 if none
	Broke     []Pivot  // attempts that broke down, in order
	Symmetric bool     // M is symmetric by construction
	Definite  bool     // M is positive definite by construction
	Growth    float64  // ‖(LU)⁻¹1‖∞·‖A‖∞ for factorisations; 0 if not measured
	Levels    []Level  // of a multilevel method, finest first
	Remarks   []string // what the user should know of how M was built, one sentence each
}

// Level is one operator of a multilevel method: its order and stored entries.
type Level struct {
	Unknowns int
	Entries  int64
}
