package precond

import "dwindle/engine/linear"

// semidefinite is the dense factorisation A = L D Lᵀ of a small symmetric
// positive semi-definite matrix. Where a pivot is zero to rounding, 1/d is
// taken as 0: M⁻¹ = L⁻ᵀ D⁺ L⁻¹ is then a symmetric generalised inverse, as a
// singular but consistent system needs.
type semidefinite struct {
	n        int
	l        []float64 // by rows, n·n; strict lower part of L
	inverse  []float64 // 1/d, length n
	replaced int       // pivots taken as infinite
}

// A pivot counts as zero below nought of its diagonal entry, and as negative
// beyond nought·100 below zero: the coarse operators carry the rounding of
// several sparse products.
const nought = 1e-12

// factorSemidefinite reads the lower triangle of a.
func factorSemidefinite(a *linear.CSR) (*semidefinite, error) {
	n := a.NRows
	f := &semidefinite{n: n, l: make([]float64, n*n), inverse: make([]float64, n)}
	for i := 0; i < n; i++ {
		row, diag := f.l[i*n:i*n+i], a.At(i, i)
		cols, vals := a.Row(i)
		for k, c := range cols {
			if int(c) < i {
				row[c] = vals[k]
			}
		}
		switch d := f.eliminate(row, diag); {
		case d > nought*diag:
			f.inverse[i] = 1 / d
		case d < -100*nought*diag:
			return nil, &Breakdown{Method: "amg", Row: -1, Pivot: d, Why: "a pivot of the coarsest operator is negative, " + indefinite}
		default:
			f.replaced++
		}
	}
	return f, nil
}

// eliminate turns the strict lower part of a row of A into that of L and
// returns the pivot:
//
//	w_j = a_ij − Σ_{k<j} w_k l_jk,  l_ij = w_j/d_j,  d_i = a_ii − Σ_j w_j l_ij
func (f *semidefinite) eliminate(w []float64, d float64) float64 {
	for j := range w {
		t := w[j]
		for k, l := range f.l[j*f.n : j*f.n+j] {
			t -= l * w[k]
		}
		w[j] = t
	}
	for j, t := range w {
		l := t * f.inverse[j]
		d -= t * l
		w[j] = l
	}
	return d
}

// Apply computes dst = L⁻ᵀ D⁺ L⁻¹ x; dst may be x.
func (f *semidefinite) Apply(dst, x []float64) {
	copy(dst, x)
	for i := range dst {
		t := dst[i]
		for j, v := range f.l[i*f.n : i*f.n+i] {
			t -= v * dst[j]
		}
		dst[i] = t
	}
	for i := range dst {
		dst[i] *= f.inverse[i]
	}
	for i := f.n - 1; i > 0; i-- {
		t := dst[i]
		for j, v := range f.l[i*f.n : i*f.n+i] {
			dst[j] -= v * t
		}
	}
}

func (f *semidefinite) bytes() int64 { return 8 * int64(len(f.l)+len(f.inverse)) }
