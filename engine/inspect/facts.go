// Package inspect establishes what can be known of a system before any
// trial: each fact with its answer, how surely, why, and in which rows.
package inspect

import "dwindle/engine/linear"

// Answer of a fact.
type Answer string

// The answers.
const (
	Yes     Answer = "yes"
	No      Answer = "no"
	Unknown Answer = "unknown"
)

// Certainty says what a statement rests on.
type Certainty string

// The certainties. Proved: true of the numbers in the file in exact
// arithmetic, rounding accounted for. Measured: a number and a threshold.
// Estimated: a model or an extrapolation.
const (
	Proved    Certainty = "proved"
	Measured  Certainty = "measured"
	Estimated Certainty = "estimated"
)

// Fact is one thing established about the system. The zero Fact is not yet
// known.
type Fact struct {
	Answer    Answer
	Certainty Certainty
	Why       string  // one phrase with its numbers
	Value     float64 // the number behind it; NaN if none
	Rows      []int   // from 0, at most 16, the most telling first
}

// Range is an interval of numbers with the rows that attain its ends.
type Range struct {
	Min, Max       float64
	MinRow, MaxRow int // from 0
}

// Facts is everything established about a system. All row numbers count from
// 0. Facts are filled in order of cost; Complete is set at the end.
type Facts struct {
	Name       string
	N          int
	Entries    int  // after symmetric expansion and summing, explicit zeros included
	MatrixFree bool // no entries: most facts stay unknown
	// Names are those its owner gave the rows; every row that is told to a
	// person is told through them.
	Names linear.RowNames

	Format        string
	Stored        int
	Duplicates    int
	ExplicitZeros int
	Notes         []string
	Digits        int
	Delta         float64 // relative change of an entry the digits leave open

	RHS     linear.RHS
	RHSNorm float64 // ‖b‖₂
	ZeroRHS bool
	Guess   *Guess // what is known of the starting guess; nil without one

	RowEntries                   Range // entries a row
	EmptyRows                    []int // the first 16
	EmptyCols                    []int
	EmptyRowCount, EmptyColCount int
	Bandwidth                    int // max |i−j|

	Symmetric        Fact // exact or to rounding: yes; Value is the largest |a_ij−a_ji|/√|a_ii a_jj|
	PatternSymmetric Fact
	Asymmetry        float64 // ‖A−Aᵀ‖_F/‖A‖_F, shown, decides nothing

	DiagPositive, DiagNegative, DiagZero, DiagMissing int
	DiagRows                                          []int // rows of the minority sign or missing/zero, the first 16
	DiagZeroRows                                      []int // those missing or zero, the first 16
	Diag                                              Range // of |a_ii| over nonzero ones

	RowNorm, ColNorm          Range   // ‖·‖∞ of rows and columns, over nonempty ones
	NormInf, NormFro, NormOne float64 // ‖A‖∞, ‖A‖_F, ‖A‖₁

	Dominant         int // rows with |a_ii| ≥ Σ|a_ij|
	StrictlyDominant int
	Gershgorin       Range // union of the intervals (real parts); rows of the ends

	Singletons     int   // rows whose only nonzero is the diagonal, and whose column too
	SingletonRows  []int // the first 16
	SingletonDiag  Range // their diagonal values
	RestGershgorin Range // of the rest
	RestDiag       Range // |a_ii| of the rest

	TriangleOnly Fact // a "general" file that holds one strict triangle only
	Components   int  // connected components of the pattern of A+Aᵀ

	Singular         Fact // structurally, or by an exact null vector; else measured or unknown
	PositiveDefinite Fact
	NegativeDefinite Fact // −A is positive definite: the opposite sign convention
	NegativeCount    Fact // whether A has negative eigenvalues; Value is how many, by LDLᵀ
	ZeroPivots       int  // pivots of LDLᵀ that vanish to rounding; 0 too where it was not computed
	Semidefinite     Fact // xᵀA x ≥ 0 for every x; no: some x has negative curvature
	SymmetricPart    Fact // of an A that is not symmetric: whether (A+Aᵀ)/2 is positive definite; Value is its smallest eigenvalue
	RowSumsZero      Fact // constants (per component) are null vectors of A
	ColSumsZero      Fact // and of Aᵀ
	NullComponents   int  // components whose rows sum to zero
	Unreachable      Fact // Value: norm of the part of b out of A's range, relative to ‖b‖

	Fields []FieldFacts // of each field of unknowns; nil where none are known

	// Study is what the second, costlier look found; nil before it.
	Study *Study

	Complete bool
	Pattern  [][]float64 `json:"-"` // density picture of the pattern, at most 64 x 64, each 0 to 1
}
