package inspect

import (
	"context"
	"math"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
	"dwindle/engine/prepare"
)

// Budget bounds a second look, in counted work, so that what it finds does not
// depend on the machine or its load.
type Budget struct {
	Work  float64 // operations, foreseen before each part: one that does not fit is left out
	Dense int     // order up to which all eigenvalues are computed
	Bytes int64   // of memory; 0: no limit but that of a factor
}

// The budgets. Quick is under a second, for the look before a run: it factorises
// meshes of the plane up to some 150 000 unknowns. Thorough is about ten, for a
// look that was asked for.
var (
	Quick    = Budget{Work: 1.5e9, Dense: 500}
	Thorough = Budget{Work: 1.2e10, Dense: 2000}
)

// holds says whether the vectors of a study, and the copies of A that it makes,
// fit the memory.
func (b Budget) holds(a *linear.CSR) bool {
	return b.Bytes == 0 || 3*a.Bytes()+8*int64(a.NRows)*(endBasis+16) <= b.Bytes
}

// most is the share of a budget that a factorisation may take.
const most = 0.4

// Examine takes a second, costlier look at an inspected system, within the
// budget: conditions of A and of what scaling makes of it, nearly free
// directions, normality, couplings, rows that constrain, growth with size. It
// returns f with Study filled in, and with answers to what it had left open; f
// itself is not changed. After each part it calls seen (if not nil) with a new
// value that it never changes again. A system without entries has no study. It
// stops with the context's error.
func Examine(ctx context.Context, s linear.System, f *Facts, b Budget, seen func(*Facts)) (*Facts, error) {
	a := s.Matrix()
	if a == nil || f.N < 2 || f.EmptyRowCount+f.EmptyColCount > 0 || !finite(f.NormFro) || !b.holds(a) {
		return f, nil
	}
	e := &exam{ctx: ctx, s: s, f: f, a: a, left: b.Work, budget: b, symmetric: f.Symmetric.Answer == Yes}
	e.out.Digits = math.NaN()
	parts := []func(*exam) error{(*exam).pattern, (*exam).factor, (*exam).spectra, (*exam).freeDirections,
		(*exam).restore, (*exam).normality, (*exam).symmetricPart, (*exam).growth, (*exam).density}
	result := f
	for _, part := range parts {
		if err := ctx.Err(); err != nil {
			return nil, err
		}
		if err := part(e); err != nil {
			return nil, err
		}
		result = e.facts()
		if seen != nil {
			seen(result)
		}
	}
	return result, nil
}

// exam is a second look under way.
type exam struct {
	ctx       context.Context
	s         linear.System
	f         *Facts
	a         *linear.CSR
	symmetric bool // exactly or to rounding
	budget    Budget
	left      float64 // operations
	reserved  float64 // of them, for what comes after the spectra
	out       Study

	scaled    *linear.CSR          // A equilibrated: B = R A C
	row, col  []float64            // R and C
	solver    solver               // of B; nil where there is no factorisation
	shift     float64              // solver is that of B + shift·I
	singular  bool                 // B has no factorisation: a pivot vanishes to rounding
	mirror    *linear.Mirror       // of a nonsymmetric A
	replaced  []bool               // rows of the identity whose columns are not; nil: none
	penalised map[int]bool         // rows with a penalty on the diagonal; nil: none
	half      *direct.Definiteness // of (A+Aᵀ)/2; nil: not looked at
	free      [][]float64          // nearly free directions of B, orthonormal
	fixed     int                  // of free: motions of coordinates and constants, which are told as they are
	parts     *linear.Components   // of A; nil: not yet asked for
	reach     *reach               // of a symmetric A; nil: not looked for
	dense     *pairs               // of B, where its free directions were found densely
}

// facts returns the facts with a copy of the study so far.
func (e *exam) facts() *Facts {
	f, s := *e.f, e.out
	f.Study = &s
	e.settle(&f)
	return &f
}

// spend takes the work from the budget, if it is there.
func (e *exam) spend(work float64) bool {
	if work > e.left {
		return false
	}
	e.left -= work
	return true
}

// product is the work of one product with A.
func (e *exam) product() float64 { return 2*float64(len(e.a.Val)) + 4*float64(e.f.N) }

// equilibrate fills in B, R and C.
func (e *exam) equilibrate() error {
	scale, _ := prepare.Lookup("scale")
	one := make([]float64, e.f.N)
	for i := range one {
		one[i] = 1
	}
	s, back, err := scale.Apply(e.ctx, linear.System{A: e.a, B: one}, linear.Values{})
	if err != nil {
		return err
	}
	e.scaled, e.row, e.col = s.Matrix(), s.B, make([]float64, e.f.N)
	back.Solution(e.col, one)
	return nil
}

func finite(x float64) bool { return x-x == 0 }
