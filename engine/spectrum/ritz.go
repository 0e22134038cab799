package spectrum

import "math"

// lastComponent returns the magnitude of the last component of the unit
// eigenvector of T that belongs to theta, an eigenvalue to twelve digits or
// so, in O(k).
//
// The vector comes from a twisted factorisation (Parlett and Dhillon, Linear
// Algebra Appl. 267, 1997): T − θI is factored from the top and from the
// bottom, the two are joined at the row r where the joining pivot γ_r is
// smallest, and with z_r = 1 the vector follows by multiplications alone. So
// even a component many orders of magnitude down is found, which the
// recurrence from one end alone would drown in rounding.
func (t *Tridiagonal) lastComponent(theta float64) float64 {
	k := len(t.c)
	if k == 1 {
		return 1
	}
	if cap(t.top) < k {
		t.top, t.bottom = make([]float64, k+k/4), make([]float64, k+k/4)
	}
	t.top, t.bottom = t.top[:k], t.bottom[:k]
	if t.form == fromCG {
		return t.twistFactored(theta)
	}
	return t.twistEntries(theta)
}

// twistFactored works on L D Lᵀ with the differential recurrences: s from the
// top (see belowFactored), and from the bottom
//
//	p_{j} = p_{j+1}/(β_{j+1} + p_{j+1} α_j) − θ,   p_{k−1} = 1/α_{k−1} − θ,
//	γ_j = s_j + p_{j+1}/(β_{j+1} + p_{j+1} α_j).
//
// The squared ratios of neighbours, z_j²/z_{j+1}² above r and z_{j+1}²/z_j²
// below it, are β/(1+s_j α_j)² and β/(β+p_{j+1} α_j)².
func (t *Tridiagonal) twistFactored(theta float64) float64 {
	alpha, beta, up, down := t.c, t.e, t.top, t.bottom
	k := len(alpha)
	s := -theta
	for j := 0; j < k-1; j++ {
		up[j] = s // until the way back turns it into the ratio
		d := nonzero(1+s*alpha[j], tinyFactor)
		s = beta[j]*(s/d) - theta
	}
	r, smallest := k-1, math.Abs(s+1/alpha[k-1])
	p := 1/alpha[k-1] - theta
	for j := k - 2; j >= 0; j-- {
		d := nonzero(beta[j]+p*alpha[j], tinyFactor)
		down[j] = beta[j] / d / d
		p /= d
		if g := math.Abs(up[j] + p); g < smallest {
			r, smallest = j, g
		}
		p -= theta
		d = nonzero(1+up[j]*alpha[j], tinyFactor)
		up[j] = beta[j] / d / d
	}
	return tail(up, down, r)
}

// twistEntries works on the entries of T: pivots δ from the top and ε from
// the bottom, γ_j = δ_j + ε_j − (T_jj − θ), and squared ratios
// (T_{j,j+1}/δ_j)² and (T_{j,j+1}/ε_{j+1})².
func (t *Tridiagonal) twistEntries(theta float64) float64 {
	diag, off, up, down := t.c, t.e, t.top, t.bottom
	k, tiny := len(diag), t.tiny()
	d := diag[0] - theta
	for j := 0; j < k-1; j++ {
		d = nonzero(d, tiny)
		up[j] = d
		d = diag[j+1] - theta - off[j]*(off[j]/d)
	}
	r, smallest := k-1, math.Abs(d)
	e := diag[k-1] - theta
	for j := k - 2; j >= 0; j-- {
		e = nonzero(e, tiny)
		q := off[j] / e
		down[j] = q * q
		c := off[j] * q
		if g := math.Abs(up[j] - c); g < smallest {
			r, smallest = j, g
		}
		e = diag[j] - theta - c
		q = off[j] / up[j]
		up[j] = q * q
	}
	return tail(up, down, r)
}

// tail returns |z_{k−1}|/‖z‖ for z_r = 1 and the squared ratios up (z_j² over
// z_{j+1}², used for j < r) and down (z_{j+1}² over z_j², used for j ≥ r).
func tail(up, down []float64, r int) float64 {
	sum, z := 1.0, 1.0
	for j := r - 1; j >= 0 && z > 0; j-- {
		z *= up[j]
		sum += z
	}
	z = 1
	for j := r; j < len(down)-1; j++ {
		z *= down[j]
		sum += z
	}
	return math.Sqrt(z / sum)
}
