package direct

// tile is the number of rows and columns that are worked on at once.
const tile = 4

// dots returns the eight dot products of four rows with two, all of one length.
func dots(a0, a1, a2, a3, b0, b1 []float64) [8]float64 {
	n := len(b0)
	a0, a1, a2, a3, b1 = a0[:n], a1[:n], a2[:n], a3[:n], b1[:n]
	var s00, s01, s10, s11, s20, s21, s30, s31 float64
	for k, y0 := range b0 {
		y1 := b1[k]
		x := a0[k]
		s00 += x * y0
		s01 += x * y1
		x = a1[k]
		s10 += x * y0
		s11 += x * y1
		x = a2[k]
		s20 += x * y0
		s21 += x * y1
		x = a3[k]
		s30 += x * y0
		s31 += x * y1
	}
	return [8]float64{s00, s01, s10, s11, s20, s21, s30, s31}
}
