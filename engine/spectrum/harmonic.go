package spectrum

import (
	"math"

	"gonum.org/v1/gonum/blas"
	blasimpl "gonum.org/v1/gonum/blas/gonum"
	"gonum.org/v1/gonum/lapack"
	lapackimpl "gonum.org/v1/gonum/lapack/gonum"
)

// Harmonic finds harmonic Ritz vectors of an Arnoldi relation
// A V_m = V_{m+1} H̄, of order m. It allocates nothing after NewHarmonic.
type Harmonic struct {
	m       int
	q, r, n []float64 // (m+1) x m, m x m, m x m, by rows
	vr      []float64 // m x m: eigenvectors, by columns
	tau     []float64 // length m
	work    []float64 // of the library
	re, im  []float64 // length m: 1/θ
	order   []int     // length m, from the smallest |θ|
}

// NewHarmonic allocates for order m ≥ 1.
func NewHarmonic(m int) *Harmonic {
	return &Harmonic{m: m, q: make([]float64, (m+1)*m), r: make([]float64, m*m), n: make([]float64, m*m),
		vr: make([]float64, m*m), tau: make([]float64, m), work: make([]float64, harmonicWork(m)),
		re: make([]float64, m), im: make([]float64, m), order: make([]int, m)}
}

// HarmonicBytes returns the memory of NewHarmonic(m).
func HarmonicBytes(m int) int64 {
	k := int64(m)
	return 8 * (k*(k+1) + 3*k*k + 4*k + int64(harmonicWork(m)))
}

// harmonicWork is the length of the library's work space: with 34 columns it
// works in blocks where that is faster.
func harmonicWork(m int) int { return 34 * (m + 1) }

// Smallest writes an orthonormal basis of the k harmonic Ritz vectors with
// values of least magnitude to p (vectors of length m), and returns how many
// it wrote: conjugate pairs stay together, as real and imaginary part, so
// that it is k + 1 where a pair is cut and limit allows it, and else k − 1.
// hbar is H̄, (m+1) x m by rows, of full rank, and is not changed.
//
// Harmonic Ritz pairs (Paige, Parlett and van der Vorst 1995) solve
// H̄ᵀH̄ g = θ H_mᵀ g. With H̄ = QR and Q_m the first m rows of Q that is
// R⁻¹Q_mᵀ g = θ⁻¹ g, which needs no inverse of H_m. The count is 0 where the
// eigenvalues are not found.
func (h *Harmonic) Smallest(hbar []float64, k, limit int, p [][]float64) int {
	h.inverse(hbar)
	first := lapackimpl.Implementation{}.Dgeev(lapack.LeftEVNone, lapack.RightEVCompute, h.m, h.n, h.m,
		h.re, h.im, nil, 1, h.vr, h.m, h.work, len(h.work))
	if first != 0 {
		return 0
	}
	h.sort()
	kept := 0
	for at := 0; at < h.m && kept < k; {
		j := h.order[at]
		width := 1
		if h.im[j] != 0 {
			width = 2
			j = min(j, h.order[at+1]) // the first of the pair holds the real part
		}
		if kept+width > limit {
			break
		}
		at += width
		for i := range width {
			kept += h.take(j+i, p, kept)
		}
	}
	return kept
}

// Values returns the finite harmonic Ritz values of H̄, of full rank and not
// changed, by rising magnitude; nil where they are not found.
func (h *Harmonic) Values(hbar []float64) []complex128 {
	h.inverse(hbar)
	first := lapackimpl.Implementation{}.Dgeev(lapack.LeftEVNone, lapack.RightEVNone, h.m, h.n, h.m,
		h.re, h.im, nil, 1, nil, 1, h.work, len(h.work))
	if first != 0 {
		return nil
	}
	h.sort()
	out := make([]complex128, 0, h.m)
	for _, j := range h.order {
		if h.re[j] != 0 || h.im[j] != 0 {
			out = append(out, 1/complex(h.re[j], h.im[j]))
		}
	}
	return out
}

// inverse computes n = R⁻¹Q_mᵀ.
func (h *Harmonic) inverse(hbar []float64) {
	m, lib := h.m, lapackimpl.Implementation{}
	copy(h.q, hbar)
	lib.Dgeqr2(m+1, m, h.q, m, h.tau, h.work)
	copy(h.r, h.q[:m*m])
	lib.Dorg2r(m+1, m, m, h.q, m, h.tau, h.work)
	for i := range m {
		for j := range m {
			h.n[i*m+j] = h.q[j*m+i]
		}
	}
	blasimpl.Implementation{}.Dtrsm(blas.Left, blas.Upper, blas.NoTrans, blas.NonUnit, m, m, 1, h.r, m, h.n, m)
}

// sort orders the eigenvalues from the largest |1/θ|; equal ones, as those of
// a pair, keep their order.
func (h *Harmonic) sort() {
	size := func(j int) float64 { return math.Hypot(h.re[j], h.im[j]) }
	for i := range h.order {
		h.order[i] = i
		for k := i; k > 0 && size(h.order[k]) > size(h.order[k-1]); k-- {
			h.order[k], h.order[k-1] = h.order[k-1], h.order[k]
		}
	}
}

// take orthonormalises column j of the eigenvectors against the first kept
// vectors of p and adds it there; it returns 0 where it lies in their span.
func (h *Harmonic) take(j int, p [][]float64, kept int) int {
	v := p[kept]
	for i := range v {
		v[i] = h.vr[i*h.m+j]
	}
	before := length(v)
	for range 2 {
		for _, w := range p[:kept] {
			d := 0.0
			for i := range v {
				d += w[i] * v[i]
			}
			for i := range v {
				v[i] -= d * w[i]
			}
		}
	}
	after := length(v)
	if !(after > 1e-12*before) {
		return 0
	}
	for i := range v {
		v[i] /= after
	}
	return 1
}

func length(v []float64) float64 {
	s := 0.0
	for _, x := range v {
		s += x * x
	}
	return math.Sqrt(s)
}
