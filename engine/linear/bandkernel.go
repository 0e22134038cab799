package linear

// tapsOffPlain computes dst = x − Σ v∘x over the taps, one after the other in
// their order; dst may be x.
func tapsOffPlain(dst, x []float64, taps []tap) {
	copy(dst, x)
	for _, t := range taps {
		v, x := t.v[:len(dst)], t.x[:len(dst)]
		for i := range dst {
			dst[i] -= float64(v[i] * x[i])
		}
	}
}

// tapsOffUpPlain computes dst = s∘x − Σ v∘x over the taps, one after the other
// in their order; dst may be x.
func tapsOffUpPlain(dst, s, x []float64, taps []tap) {
	s, x = s[:len(dst)], x[:len(dst)]
	for i := range dst {
		dst[i] = s[i] * x[i]
	}
	tapsOffPlain(dst, dst, taps)
}

// chain solves rows lo to hi of y_i −= v_i y_{i−1} in turn. The row before
// stays in a register: to wait for it in memory would take longer than all the
// rest.
func chain(y, v []float64, lo, hi int) {
	last := 0.0
	if lo > 0 {
		last = y[lo-1]
	}
	y, v = y[lo:hi], v[lo:hi]
	v = v[:len(y)]
	for i, t := range y {
		last = t - float64(v[i]*last)
		y[i] = last
	}
}

// chainUp solves rows hi−1 down to lo of z_i −= v_{i+1} z_{i+1} in turn.
func chainUp(z, v []float64, lo, hi int) {
	if hi == len(z) { // no row follows the last
		hi--
	}
	if lo >= hi {
		return
	}
	last := z[hi]
	z, v = z[lo:hi], v[lo+1:hi+1]
	v = v[:len(z)]
	for i := len(z) - 1; i >= 0; i-- {
		last = z[i] - float64(v[i]*last)
		z[i] = last
	}
}
