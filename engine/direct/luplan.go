package direct

import (
	"math"

	"dwindle/engine/linear"
)

// LUPlan is the order of the columns for an LU factorisation, with what the
// pattern tells of its size.
type LUPlan struct {
	Columns linear.Permutation // the order of elimination
	// Diagonal: the order is made for pivots on the diagonal, which are
	// preferred; the pattern is nearly symmetric. Otherwise it is made for any
	// choice of pivots, from the pattern of AᵀA.
	Diagonal bool
	// Entries is what L and U together hold: with pivots on the diagonal as
	// long as none is refused, otherwise an upper bound for any choice of
	// pivots (George and Ng, SIAM J. Sci. Stat. Comput. 8 (1987) 877–898),
	// rows of many entries left aside.
	Entries int64
	Work    float64 // floating-point operations, counted in the same way
}

// PlanLU plans the factorisation of a square matrix in the given order, which
// is applied to A + Aᵀ where at least half of the off-diagonal entries have a
// partner and the diagonal has no zeros, else to AᵀA.
func PlanLU(a *linear.CSR, how Ordering) *LUPlan {
	p := &LUPlan{Diagonal: mostlySymmetric(a)}
	var s *Symbolic
	if p.Diagonal {
		s = Predict(a, how)
	} else {
		g := columnGraph(a, max(16, int(10*math.Sqrt(float64(a.NCols)))))
		s = analyse(g, orderGraph(g, how))
	}
	p.Columns, p.Work = s.Order, 2*s.Work
	p.Entries = 2*s.Entries - int64(s.N)
	if how == Unmoved {
		p.Columns = linear.Natural(s.N) // not even the postorder
	}
	return p
}

// mostlySymmetric says whether pivots on the diagonal are a fair choice.
func mostlySymmetric(a *linear.CSR) bool {
	off := 0
	for i := range a.NRows {
		cols, vals := a.Row(i)
		diagonal := false
		for k, j := range cols {
			switch {
			case vals[k] == 0:
			case int(j) == i:
				diagonal = true
			default:
				off++
			}
		}
		if !diagonal {
			return false
		}
	}
	paired := 2*off - len(patternOf(a).adj)
	return 2*paired >= off
}

// Bytes returns the memory of the factors with that many entries.
func (p *LUPlan) Bytes() int64 { return luBytes(len(p.Columns), p.Entries) }

// luBytes is the memory of factors of order n: values and indices, diagonals,
// pointers, permutations, scalings and scratch.
func luBytes(n int, entries int64) int64 { return 12*entries + 64*int64(n) }
