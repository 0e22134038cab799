package spectrum

import "math"

// Tridiagonal is the Lanczos matrix T of an iteration in progress, order k
// after k steps, built from the coefficients the iteration computes anyway.
// Its eigenvalues are the Ritz values: of A, or of M⁻¹A with a preconditioner.
//
// From conjugate gradients it is kept as T = L D Lᵀ with D = diag(1/α_j) and
// L unit lower bidiagonal with √β_{j+1} below the diagonal, never multiplied
// out (Golub and Van Loan, Matrix Computations, §11.3; Dhillon and Parlett,
// Linear Algebra Appl. 387, 2004): so the smallest eigenvalue keeps its
// relative accuracy however large the condition number, and its sign is that
// of the α_j. From Lanczos itself (MINRES) it is kept by its entries.
//
// The zero value is empty and ready. It is for one goroutine at a time.
type Tridiagonal struct {
	form    form
	c       []float64 // length k: α_j of CG, or T_jj
	e       []float64 // length k: β_{j+1} of CG, or T_{j,j+1}; the last leads out of T
	stopped bool      // no further step fits

	minDiag, maxDiag float64 // of T_jj
	radius           float64 // Gershgorin bound of |θ|
	negatives        int     // α_j < 0
	diagTail         float64 // β_j/α_{j−1}, the part of the next T_jj that is known

	low, high   float64 // verified inner ends of the last search
	last        Extremes
	top, bottom []float64 // work, length k
}

type form uint8

const (
	empty form = iota
	fromCG
	fromLanczos
)

// AddCG appends step j of conjugate gradients: alpha = α_j = rᵀz/pᵀAp and
// beta = β_{j+1} = (rᵀz)_{j+1}/(rᵀz)_j. Steps come in order without a gap.
// A negative α_j (an indefinite A) is welcome. A β that is not finite or is
// negative (an indefinite M) ends the matrix with this step, and an α that is
// zero or not finite ends it before; later steps are ignored. It returns
// whether the matrix can still grow.
func (t *Tridiagonal) AddCG(alpha, beta float64) bool {
	t.enter(fromCG)
	if t.stopped || alpha == 0 || !finite(alpha) || !finite(1/alpha) {
		t.stopped = true
		return false
	}
	if alpha < 0 {
		t.negatives++
	}
	diag := 1/alpha + t.diagTail
	t.stopped = !(beta > 0) || math.IsInf(beta, 1)
	if beta < 0 {
		beta = math.NaN()
	}
	t.diagTail = beta / alpha
	t.append(alpha, beta, diag, math.Sqrt(beta)/math.Abs(alpha))
	return !t.stopped
}

// AddLanczos appends step j of the Lanczos process: alpha = T_jj and beta =
// T_{j,j+1} ≥ 0, the norm of the next vector before it is normalised. A beta
// that is zero, negative or not finite ends the matrix with this step, an
// alpha that is not finite before it. It returns whether the matrix can still
// grow.
func (t *Tridiagonal) AddLanczos(alpha, beta float64) bool {
	t.enter(fromLanczos)
	if t.stopped || !finite(alpha) {
		t.stopped = true
		return false
	}
	t.stopped = !(beta > 0) || math.IsInf(beta, 1)
	if beta < 0 {
		beta = math.NaN()
	}
	t.append(alpha, beta, alpha, beta)
	return !t.stopped
}

// Order returns k, the number of steps taken in.
func (t *Tridiagonal) Order() int { return len(t.c) }

// Stopped says whether the matrix has come to its end: an invariant subspace,
// or a coefficient that no real symmetric matrix can hold.
func (t *Tridiagonal) Stopped() bool { return t.stopped }

func (t *Tridiagonal) enter(f form) {
	if t.form != empty && t.form != f {
		panic("spectrum: steps of CG and of Lanczos mixed in one matrix")
	}
	t.form = f
}

func (t *Tridiagonal) append(c, e, diag, out float64) {
	in := 0.0
	if k := len(t.c); k == 0 {
		t.minDiag, t.maxDiag = diag, diag
	} else {
		in = t.coupling(k - 1)
	}
	t.c, t.e = append(t.c, c), append(t.e, e)
	t.minDiag, t.maxDiag = math.Min(t.minDiag, diag), math.Max(t.maxDiag, diag)
	if !finite(out) {
		out = 0
	}
	t.radius = math.Max(t.radius, math.Abs(diag)+in+out)
}

// coupling returns |T_{j,j+1}|.
func (t *Tridiagonal) coupling(j int) float64 {
	if t.form == fromCG {
		return math.Sqrt(t.e[j]) / math.Abs(t.c[j])
	}
	return t.e[j]
}

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }
