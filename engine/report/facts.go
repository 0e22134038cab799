package report

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
)

// named is a fact under the name it has in JSON and in text.
type named struct {
	name string
	fact inspect.Fact
}

// allFacts lists the yes-or-no facts, those made from counts included, in the
// order they are told. Without facts all are unknown.
func allFacts(f *inspect.Facts) []named {
	if f == nil {
		f = &inspect.Facts{}
	}
	return []named{
		{"symmetric", f.Symmetric},
		{"pattern_symmetric", f.PatternSymmetric},
		{"positive_definite", f.PositiveDefinite},
		{"symmetric_part_definite", symmetricPart(f)},
		{"semidefinite", f.Semidefinite},
		{"negative_eigenvalues", f.NegativeCount},
		{"negative_definite", f.NegativeDefinite},
		{"singular", f.Singular},
		{"components", components(f)},
		{"diagonal", diagonal(f)},
		{"singletons", singletons(f)},
		{"dominant", dominant(f)},
		{"triangle_only", f.TriangleOnly},
		{"row_sums_zero", f.RowSumsZero},
		{"column_sums_zero", f.ColSumsZero},
		{"empty_rows", empty(f, "row", f.EmptyRowCount, f.EmptyRows)},
		{"empty_columns", empty(f, "column", f.EmptyColCount, f.EmptyCols)},
		{"unreachable", f.Unreachable},
	}
}

// symmetricPart: is (A+Aᵀ)/2 positive definite? Of a symmetric A it is A.
func symmetricPart(f *inspect.Facts) inspect.Fact {
	switch {
	case f.Symmetric.Answer == inspect.Yes:
		return f.PositiveDefinite
	case f.SymmetricPart.Answer == "":
		return notYet()
	}
	return f.SymmetricPart
}

// counted is a fact that rests on counting entries.
func counted(yes bool, value int, why string, rows []int) inspect.Fact {
	f := inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved, Why: why, Value: float64(value), Rows: rows}
	if yes {
		f.Answer = inspect.Yes
	}
	return f
}

// notYet is a fact that was not looked into, or cannot be.
func notYet() inspect.Fact { return inspect.Fact{Answer: inspect.Unknown, Value: math.NaN()} }

// components: does the pattern hang together? The value is how many parts.
func components(f *inspect.Facts) inspect.Fact {
	if f.Components == 0 {
		return notYet()
	}
	return counted(f.Components == 1, f.Components,
		"the pattern of A+A^T hangs together in "+plural(f.Components, "part", "parts"), nil)
}

// diagonal: is every diagonal entry there and nonzero? The value is how many
// are not.
func diagonal(f *inspect.Facts) inspect.Fact {
	if f.DiagPositive+f.DiagNegative+f.DiagZero+f.DiagMissing == 0 {
		return notYet()
	}
	bad := f.DiagZero + f.DiagMissing
	why := fmt.Sprintf("%d positive, %d negative, %d zero, %d missing", f.DiagPositive, f.DiagNegative, f.DiagZero, f.DiagMissing)
	return counted(bad == 0, bad, why, f.DiagRows)
}

func singletons(f *inspect.Facts) inspect.Fact {
	if !f.Complete || f.MatrixFree {
		return notYet()
	}
	why := plural(f.Singletons, "row holds", "rows hold") + " nothing but the diagonal"
	if f.Singletons > 0 {
		why += fmt.Sprintf(", from %.3g to %.3g", f.SingletonDiag.Min, f.SingletonDiag.Max)
	}
	return counted(f.Singletons > 0, f.Singletons, why, f.SingletonRows)
}

// dominant: is |a_ii| at least the sum of the others in every row? Sums are
// rounded, so it is measured.
func dominant(f *inspect.Facts) inspect.Fact {
	if !f.Complete || f.MatrixFree {
		return notYet()
	}
	d := counted(f.Dominant == f.N, f.Dominant,
		fmt.Sprintf("%d of %d rows, %d of them strictly", f.Dominant, f.N, f.StrictlyDominant), nil)
	d.Certainty = inspect.Measured
	return d
}

func empty(f *inspect.Facts, what string, count int, rows []int) inspect.Fact {
	if !f.Complete || f.MatrixFree {
		return notYet()
	}
	return counted(count > 0, count, plural(count, what+" is", what+"s are")+" empty", rows)
}
