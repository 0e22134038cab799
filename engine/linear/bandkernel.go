package linear

// tapsOffPlain computes dst = x − Σ v∘x over the taps, one after the other in
// their order; dst may be x.
func tapsOffPlain[T Stored](dst, x []float64, taps []tapOf[T]) {
	copy(dst, x)
	for _, t := range taps {
		v, x := t.v[:len(dst)], t.x[:len(dst)]
		for i := range dst {
			dst[i] -= float64(float64(v[i]) * x[i])
		}
	}
}

// tapsOffUpPlain computes dst = s∘x − Σ v∘x over the taps, one after the other
// in their order; dst may be x.
func tapsOffUpPlain[T Stored](dst, s, x []float64, taps []tapOf[T]) {
	s, x = s[:len(dst)], x[:len(dst)]
	for i := range dst {
		dst[i] = s[i] * x[i]
	}
	tapsOffPlain(dst, dst, taps)
}

// chain solves rows lo to hi of y_i −= v_i y_{i−1} in turn. The row before
// stays in a register: to wait for it in memory would take longer than all the
// rest.
func chain[T Stored](y []float64, v []T, lo, hi int) {
	last := 0.0
	if lo > 0 {
		last = y[lo-1]
	}
	y = y[lo:hi]
	v = v[lo:hi][:len(y)]
	for i, t := range y {
		last = t - float64(float64(v[i])*last)
		y[i] = last
	}
}

// chainUp solves rows hi−1 down to lo of z_i −= v_{i+1} z_{i+1} in turn.
func chainUp[T Stored](z []float64, v []T, lo, hi int) {
	if hi == len(z) { // no row follows the last
		hi--
	}
	if lo >= hi {
		return
	}
	last := z[hi]
	z = z[lo:hi]
	v = v[lo+1 : hi+1][:len(z)]
	for i := len(z) - 1; i >= 0; i-- {
		last = z[i] - float64(float64(v[i])*last)
		z[i] = last
	}
}
