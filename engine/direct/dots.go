package direct

// tile is the number of rows and columns that are worked on at once.
const tile = 4

// dots returns the eight dot products of four rows with two, all of one
// length: a₀b₀, a₀b₁, a₁b₀ and so on. Each is summed in four strands, the k-th
// product to strand k mod 4; the strands are added as (s₀+s₂)+(s₁+s₃), and what
// is left of the length comes last. Vector registers and the portable twin
// give the same bits.
func dots(a0, a1, a2, a3, b0, b1 []float64) (s [8]float64) {
	n := len(b0)
	a0, a1, a2, a3, b1 = a0[:n], a1[:n], a2[:n], a3[:n], b1[:n]
	whole := n &^ 3
	if whole > 0 {
		strands(a0, a1, a2, a3, b0, b1, whole, &s)
	}
	for k := whole; k < n; k++ {
		y0, y1 := b0[k], b1[k]
		s[0] += a0[k] * y0
		s[1] += a0[k] * y1
		s[2] += a1[k] * y0
		s[3] += a1[k] * y1
		s[4] += a2[k] * y0
		s[5] += a2[k] * y1
		s[6] += a3[k] * y0
		s[7] += a3[k] * y1
	}
	return s
}

// strandsPlain writes the eight products of the first n entries; n is a
// multiple of 4.
func strandsPlain(a0, a1, a2, a3, b0, b1 []float64, n int, s *[8]float64) {
	for i, a := range [4][]float64{a0, a1, a2, a3} {
		s[2*i] = strand(a[:n], b0[:n])
		s[2*i+1] = strand(a[:n], b1[:n])
	}
}

// strand returns one dot product in four strands.
func strand(x, y []float64) float64 {
	var s0, s1, s2, s3 float64
	for len(x) >= 4 && len(y) >= 4 {
		s0 += x[0] * y[0]
		s1 += x[1] * y[1]
		s2 += x[2] * y[2]
		s3 += x[3] * y[3]
		x, y = x[4:], y[4:]
	}
	return (s0 + s2) + (s1 + s3)
}
