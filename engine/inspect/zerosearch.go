package inspect

import "dwindle/engine/linear"

const (
	// mostZero is how many directions that A maps to zero are held, beside as many
	// constants at most.
	mostZero = 24
	// zeroSteps is how many steps of inverse iteration find one: each takes off
	// tinyShift over the quotient of the next.
	zeroSteps = 4
)

// searchZero adds directions that B maps to zero, to rounding, as many as LDLᵀ
// has left pivots zero, where that is known, and no more than are held: by
// inverse iteration on B + shift·I from random vectors (Golub and Van Loan,
// Matrix Computations, 2013, section 8.2), each beside those found before. The
// first that is not mapped to zero ends it.
func (e *exam) searchZero(norm float64, quotients *[]float64) {
	if !e.symmetric || e.solver == nil || e.shift == 0 {
		return
	}
	rigid := len(e.free)
	e.constants(norm, quotients)
	e.fixed = len(e.free)
	most := mostZero + e.fixed - rigid
	if p := e.out.ZeroPivots; p > 0 {
		most = min(most, p)
	}
	for k := len(e.free); k < most && e.spend(e.zeroWork()); k++ {
		v := make([]float64, e.f.N)
		linear.Uniform(v, uint64(k+1))
		for range zeroSteps {
			if !orthonormal(v, e.free) {
				return
			}
			e.solver.Solve(v, v)
		}
		if !orthonormal(v, e.free) {
			return
		}
		q := e.quotient(v, norm)
		if q > ZeroLimit {
			return
		}
		e.free, *quotients = append(e.free, v), append(*quotients, q)
	}
}

// constants adds what the sums of rows show: one number on a connected part, in
// the user's units, and zero on all others. In wild units a vector found by
// factors may hold enough of what is only nearly free to be taken for another.
func (e *exam) constants(norm float64, quotients *[]float64) {
	parts, most := linear.FindComponents(e.a), len(e.free)+mostZero
	for k, z := range parts.RowSums(e.a, 0) {
		if z == linear.NotZero || len(e.free) >= most {
			continue
		}
		v := make([]float64, e.f.N)
		for i, of := range parts.Of {
			if int(of) == k {
				v[i] = 1 / e.col[i]
			}
		}
		if !orthonormal(v, e.free) {
			continue
		}
		if q := e.quotient(v, norm); q <= ZeroLimit {
			e.free, *quotients = append(e.free, v), append(*quotients, q)
		}
	}
}

// zeroWork is the work of finding one direction so.
func (e *exam) zeroWork() float64 {
	return zeroSteps * (e.solveWork() + 8*float64(e.f.N)*mostZero)
}
