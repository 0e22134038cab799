package linear

// The products of block rows first:last, for each order of blocks: the sums of
// a block row stay in registers.

func (b *blocks) rows2(dst, x []float64, first, last int) {
	k := b.ptr[first]
	for I := first; I < last; I++ {
		s0, s1 := 0.0, 0.0
		for end := b.ptr[I+1]; k < end; k++ {
			v := (*[4]float64)(b.val[4*k:])
			u := (*[2]float64)(x[2*int(b.col[k]):])
			s0 += v[0] * u[0]
			s1 += v[2] * u[0]
			s0 += v[1] * u[1]
			s1 += v[3] * u[1]
		}
		*(*[2]float64)(dst[2*I:]) = [2]float64{s0, s1}
	}
}

func (b *blocks) rows3(dst, x []float64, first, last int) {
	k := b.ptr[first]
	for I := first; I < last; I++ {
		s0, s1, s2 := 0.0, 0.0, 0.0
		for end := b.ptr[I+1]; k < end; k++ {
			v := (*[9]float64)(b.val[9*k:])
			u := (*[3]float64)(x[3*int(b.col[k]):])
			s0 += v[0] * u[0]
			s1 += v[3] * u[0]
			s2 += v[6] * u[0]
			s0 += v[1] * u[1]
			s1 += v[4] * u[1]
			s2 += v[7] * u[1]
			s0 += v[2] * u[2]
			s1 += v[5] * u[2]
			s2 += v[8] * u[2]
		}
		*(*[3]float64)(dst[3*I:]) = [3]float64{s0, s1, s2}
	}
}

func (b *blocks) rows4(dst, x []float64, first, last int) {
	k := b.ptr[first]
	for I := first; I < last; I++ {
		s0, s1, s2, s3 := 0.0, 0.0, 0.0, 0.0
		for end := b.ptr[I+1]; k < end; k++ {
			v := (*[16]float64)(b.val[16*k:])
			u := (*[4]float64)(x[4*int(b.col[k]):])
			for c, uc := range u {
				s0 += v[c] * uc
				s1 += v[4+c] * uc
				s2 += v[8+c] * uc
				s3 += v[12+c] * uc
			}
		}
		*(*[4]float64)(dst[4*I:]) = [4]float64{s0, s1, s2, s3}
	}
}

func (b *blocks) rows6(dst, x []float64, first, last int) {
	k := b.ptr[first]
	for I := first; I < last; I++ {
		var s0, s1, s2, s3, s4, s5 float64
		for end := b.ptr[I+1]; k < end; k++ {
			v := (*[36]float64)(b.val[36*k:])
			u := (*[6]float64)(x[6*int(b.col[k]):])
			for c, uc := range u {
				s0 += v[c] * uc
				s1 += v[6+c] * uc
				s2 += v[12+c] * uc
				s3 += v[18+c] * uc
				s4 += v[24+c] * uc
				s5 += v[30+c] * uc
			}
		}
		*(*[6]float64)(dst[6*I:]) = [6]float64{s0, s1, s2, s3, s4, s5}
	}
}
