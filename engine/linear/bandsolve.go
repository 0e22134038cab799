package linear

// Forward solves (I + L) y = x, row by row:
//
//	y_i = x_i − Σ l_ij y_j,  the farthest column first.
//
// y may be x; both have the length of the matrix.
func (b *Bands[T]) Forward(y, x []float64) {
	var taps [maxDiagonals]tapOf[T]
	from := len(b.far) // far[from:] reach back from row lo
	for lo := 0; lo < b.n; {
		for from > 0 && b.far[from-1].d <= lo {
			from--
		}
		hi := min(lo+b.block, b.n)
		if from > 0 {
			hi = min(hi, b.far[from-1].d)
		}
		for k, f := range b.far[from:] {
			taps[k] = tapOf[T]{f.v[lo:hi], y[lo-f.d : hi-f.d]}
		}
		tapsOff(y[lo:hi], x[lo:hi], taps[:len(b.far)-from])
		if b.next != nil {
			chain(y[:b.n], b.next, lo, hi)
		}
		lo = hi
	}
}

// Backward solves (I + Lᵀ) z = s∘y, from the last row to the first:
//
//	z_i = s_i y_i − Σ l_ji z_j,  the farthest j first.
//
// z may be y; all have the length of the matrix.
func (b *Bands[T]) Backward(z, y, s []float64) {
	var taps [maxDiagonals]tapOf[T]
	from := len(b.far) // far[from:] reach forward from row hi−1
	for hi := b.n; hi > 0; {
		for from > 0 && b.far[from-1].d <= b.n-hi {
			from--
		}
		lo := max(hi-b.block, 0)
		if from > 0 {
			lo = max(lo, b.n-b.far[from-1].d)
		}
		for k, f := range b.far[from:] {
			taps[k] = tapOf[T]{f.v[lo+f.d : hi+f.d], z[lo+f.d : hi+f.d]}
		}
		tapsOffUp(z[lo:hi], s[lo:hi], y[lo:hi], taps[:len(b.far)-from])
		if b.next != nil {
			chainUp(z[:b.n], b.next, lo, hi)
		}
		hi = lo
	}
}
