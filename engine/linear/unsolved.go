package linear

import (
	"math"
	"slices"
)

// Unsolved judges the rows of A x = b one by one. A row whose residual is large
// against its own terms (Oettli and Prager 1964) may be one where x merely
// dies away, as beyond the front of a Krylov space: there |A||x| is small,
// and so is what is missing. It is unsolved where the residual is also large
// against what the row would have with the largest x of its component, or where
// the row's norm lies far below those of the others, so that a norm over all does
// not see it.
type Unsolved struct {
	a     *CSR
	x     []float64
	parts *Components
	xMax  []float64 // the largest |x| of each component; nil before it is asked for
	limit float64
	usual float64 // see norm; NaN before it is asked for
}

// NewUnsolved judges the rows of a for the iterate x; shares above limit are
// large, and a row whose norm is below that part of the others' is in small
// units.
func NewUnsolved(a *CSR, x []float64, limit float64) *Unsolved {
	return &Unsolved{a: a, x: x, limit: limit, usual: math.NaN()}
}

// Row returns |r|/(|A||x|+|b|) of row i, at most 1, whether the row is unsolved,
// and if so, whether it is in small units.
func (u *Unsolved) Row(i int, r, b float64) (share float64, unsolved, small bool) {
	r, b = math.Abs(r), math.Abs(b)
	own, sum, largest := b, 0.0, 0.0
	cols, vals := u.a.Row(i)
	for k, c := range cols {
		v := math.Abs(vals[k])
		own += v * math.Abs(u.x[c])
		sum += v
		largest = max(largest, v)
	}
	if r != 0 {
		share = math.Min(r/own, 1)
	}
	if !(share > u.limit) {
		return share, false, false
	}
	small = largest > 0 && largest < u.limit*u.norm()
	return share, small || r > u.limit*(sum*u.largestNear(i)+b), small
}

// largestNear is the largest |x| in the component of row i: an island of small x
// is not judged by another's.
func (u *Unsolved) largestNear(i int) float64 {
	if u.xMax == nil {
		u.parts = FindComponents(u.a)
		u.xMax = make([]float64, u.parts.Count)
		for j, k := range u.parts.Of {
			u.xMax[k] = max(u.xMax[k], math.Abs(u.x[j]))
		}
	}
	return u.xMax[u.parts.Of[i]]
}

// norm is the norm that a quarter of the rows reach: few rows in large units,
// such as penalties, do not make the others small.
func (u *Unsolved) norm() float64 {
	if math.IsNaN(u.usual) {
		norms := make([]float64, u.a.NRows)
		for i := range norms {
			_, vals := u.a.Row(i)
			norms[i] = NormInf(vals)
		}
		slices.Sort(norms)
		u.usual = norms[len(norms)-1-len(norms)/4]
	}
	return u.usual
}
