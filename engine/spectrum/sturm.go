package spectrum

// epsilon is the unit of rounding times two, 2⁻⁵².
const epsilon = 0x1p-52

// probes is how many shifts one pass over the matrix counts at: the divisions
// of the recurrences overlap, so that four cost little more than one.
const probes = 4

// below counts, for each shift σ, the eigenvalues of T less than σ: the
// negative pivots of T − σI, by Sylvester's law of inertia.
func (t *Tridiagonal) below(sigma [probes]float64) [probes]int {
	if t.form == fromCG {
		return belowFactored(t.c, t.e, sigma)
	}
	return belowEntries(t.c, t.e, sigma, t.tiny())
}

// belowFactored counts with the stationary differential recurrence
//
//	pivot_j = (1 + s_j α_j)/α_j,   s_{j+1} = β_{j+1} s_j/(1 + s_j α_j) − σ,   s_0 = −σ.
func belowFactored(alpha, beta []float64, sigma [probes]float64) (count [probes]int) {
	beta = beta[:len(alpha)]
	s0, s1, s2, s3 := -sigma[0], -sigma[1], -sigma[2], -sigma[3]
	for j, a := range alpha {
		b := beta[j]
		d0, d1, d2, d3 := nonzero(1+s0*a, tinyFactor), nonzero(1+s1*a, tinyFactor), nonzero(1+s2*a, tinyFactor), nonzero(1+s3*a, tinyFactor)
		count[0] += negativeProduct(d0, a)
		count[1] += negativeProduct(d1, a)
		count[2] += negativeProduct(d2, a)
		count[3] += negativeProduct(d3, a)
		s0, s1 = b*(s0/d0)-sigma[0], b*(s1/d1)-sigma[1]
		s2, s3 = b*(s2/d2)-sigma[2], b*(s3/d3)-sigma[3]
	}
	return count
}

// belowEntries counts with the Sturm sequence pivot_j = T_jj − σ −
// T_{j−1,j}²/pivot_{j−1}.
func belowEntries(diag, off []float64, sigma [probes]float64, tiny float64) (count [probes]int) {
	for p, s := range sigma {
		c := 0.0
		for j, a := range diag {
			d := nonzero(a-s-c, tiny)
			if d < 0 {
				count[p]++
			}
			c = off[j] * (off[j] / d)
		}
	}
	return count
}

// tinyFactor stands for a pivot 1 + sα that cancelled exactly.
const tinyFactor = 0x1p-60

// tiny stands for a pivot of T − σI that cancelled exactly.
func (t *Tridiagonal) tiny() float64 { return epsilon*epsilon*t.radius + 0x1p-1000 }

// nonzero replaces a pivot that cancelled exactly by one a rounding error
// below zero.
func nonzero(d, tiny float64) float64 {
	if d == 0 {
		return -tiny
	}
	return d
}

func negativeProduct(x, y float64) int {
	if (x < 0) != (y < 0) {
		return 1
	}
	return 0
}
