package precond

import "math"

// square is a small matrix stored by rows, n x n.
type square struct {
	n int
	v []float64
}

// row returns row i.
func (d square) row(i int) []float64 { return d.v[i*d.n : (i+1)*d.n] }

// cholesky overwrites the lower triangle of d with L of d = L Lᵀ. It returns
// the row of the first pivot that is not positive beyond rounding, or −1.
func (d square) cholesky() int {
	for i := 0; i < d.n; i++ {
		ri := d.row(i)
		diag := ri[i]
		for j := 0; j <= i; j++ {
			rj := d.row(j)
			s := ri[j]
			for k := 0; k < j; k++ {
				s -= ri[k] * rj[k]
			}
			if j < i {
				ri[j] = s / rj[j]
				continue
			}
			if !(s > least*diag) || math.IsInf(s, 0) {
				ri[i] = s
				return i
			}
			ri[i] = math.Sqrt(s)
		}
	}
	return -1
}

// solveCholesky solves L Lᵀ x = b in place.
func (d square) solveCholesky(b []float64) {
	for i := 0; i < d.n; i++ {
		r := d.row(i)
		s := b[i]
		for k := 0; k < i; k++ {
			s -= r[k] * b[k]
		}
		b[i] = s / r[i]
	}
	for i := d.n - 1; i >= 0; i-- {
		b[i] /= d.v[i*d.n+i]
		for k := 0; k < i; k++ {
			b[k] -= d.v[i*d.n+k] * b[i]
		}
	}
}

// lu overwrites d with its factors L U by partial pivoting, row i being row
// p[i] of d. It returns the first row without a pivot, or −1.
func (d square) lu(p []int) int {
	for i := range p {
		p[i] = i
	}
	for c := 0; c < d.n; c++ {
		best := c
		for i := c + 1; i < d.n; i++ {
			if math.Abs(d.v[i*d.n+c]) > math.Abs(d.v[best*d.n+c]) {
				best = i
			}
		}
		if unusable(d.v[best*d.n+c]) {
			return c
		}
		if best != c {
			p[c], p[best] = p[best], p[c]
			rc, rb := d.row(c), d.row(best)
			for k := range rc {
				rc[k], rb[k] = rb[k], rc[k]
			}
		}
		rc := d.row(c)
		for i := c + 1; i < d.n; i++ {
			ri := d.row(i)
			ri[c] /= rc[c]
			for k := c + 1; k < d.n; k++ {
				ri[k] -= ri[c] * rc[k]
			}
		}
	}
	return -1
}

// solveLU solves L U x = b in place, b in the order of the factors.
func (d square) solveLU(b []float64) {
	for i := 0; i < d.n; i++ {
		r := d.row(i)
		for k := 0; k < i; k++ {
			b[i] -= r[k] * b[k]
		}
	}
	for i := d.n - 1; i >= 0; i-- {
		r := d.row(i)
		for k := i + 1; k < d.n; k++ {
			b[i] -= r[k] * b[k]
		}
		b[i] /= r[i]
	}
}
