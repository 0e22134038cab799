package inspect

import (
	"math"

	"dwindle/engine/linear"
)

// leftSteps is how many steps of inverse iteration find one left direction:
// each takes off the square of how far it stands apart.
const leftSteps = 4

// leftDirections finds the directions y with yᵀA = 0 to rounding of an A that
// is not symmetric, as many as there are v with A v = 0: the two belong to the
// same singular values. Where B was factorised each is the image of one v under
// B⁻ᵀ, improved by inverse iteration with B Bᵀ (Golub and Van Loan, Matrix
// Computations, 2013, section 8.6); a small B without factors has them from its
// dense singular vectors. Each is held against Bᵀ afresh.
func (e *exam) leftDirections(norm float64) error {
	right := e.freeToRounding()
	if e.symmetric || len(right) == 0 {
		return nil
	}
	bt := e.scaled.Transpose()
	var candidates [][]float64
	if e.dense != nil {
		candidates = e.dense.left
	} else if e.solver != nil {
		candidates = e.leftOf(e.free[:len(right)])
	}
	var found [][]float64
	for _, y := range candidates[:min(len(right), len(candidates))] {
		if q := imageOf(bt, y) / norm; q <= ZeroLimit {
			found = append(found, y)
		}
	}
	for _, y := range localise(found, 0) {
		if e.dense != nil {
			e.dense.sharpen(y, bt, norm)
		}
		d := e.direction(y, e.row, imageOf(bt, y)/norm)
		d.Next, d.Load, d.Rounding = right[len(right)-1].Next, e.load(d.Vector), roundings(bt, y)
		e.out.Left = append(e.out.Left, d)
	}
	return e.ctx.Err()
}

// leftOf returns unit vectors, orthogonal to each other, that Bᵀ is likely to
// map to zero, where B maps the right ones to zero.
func (e *exam) leftOf(right [][]float64) [][]float64 {
	var found [][]float64
	w := make([]float64, e.f.N)
	for _, v := range right {
		if !e.spend(2 * leftSteps * e.solveWork()) {
			break
		}
		y := make([]float64, e.f.N)
		e.solver.SolveT(y, v)
		for range leftSteps {
			if !orthonormal(y, found) {
				break
			}
			e.solver.Solve(w, y)
			e.solver.SolveT(y, w)
		}
		if !orthonormal(y, found) {
			continue
		}
		if e.shift != 0 {
			y = e.unshifted(y, found, e.solver.SolveT)
		}
		found = append(found, y)
	}
	return found
}

// unshifted turns a direction that the inverse of B + shift·I stretches into one
// that B maps to zero, by inverse iteration: what B maps to zero is an
// eigenvector of both, to the eigenvalue shift of the latter. beside are unit
// vectors found before.
func (e *exam) unshifted(v []float64, beside [][]float64, solve func(dst, x []float64)) []float64 {
	if !e.spend(leftSteps * e.solveWork()) {
		return v
	}
	y := append([]float64(nil), v...)
	for range leftSteps {
		solve(y, y)
		if !orthonormal(y, beside) {
			return v
		}
	}
	return y
}

// imageOf is the norm of what a matrix makes of a vector.
func imageOf(a *linear.CSR, v []float64) float64 {
	w := make([]float64, len(v))
	a.Apply(w, v)
	return linear.Norm2(w)
}

// roundings is ‖a v‖ in units of what rounding the entries of a could make of
// it, 2⁻⁵³ ‖|a| |v|‖.
func roundings(a *linear.CSR, v []float64) float64 {
	got, could := 0.0, 0.0
	for i := range v {
		cols, vals := a.Row(i)
		sum, size := 0.0, 0.0
		for k, j := range cols {
			sum += vals[k] * v[j]
			size += math.Abs(vals[k] * v[j])
		}
		got, could = got+sum*sum, could+size*size
	}
	return math.Sqrt(got) / max(0x1p-53*math.Sqrt(could), tinyDivide)
}
