package linear

// The products of block rows first:last, for each order of blocks. The sums of
// a block row stay in registers, and each waits for one addition a block only:
// a block's products are added among themselves before.

func (b *blocks) rows3(dst, x []float64, first, last int) {
	k := b.ptr[first]
	for I := first; I < last; I++ {
		s0, s1, s2 := 0.0, 0.0, 0.0
		for end := b.ptr[I+1]; k < end; k++ {
			v := (*[9]float64)(b.val[9*k:])
			u := (*[3]float64)(x[3*int(b.col[k]):])
			s0 += v[0]*u[0] + v[1]*u[1] + v[2]*u[2]
			s1 += v[3]*u[0] + v[4]*u[1] + v[5]*u[2]
			s2 += v[6]*u[0] + v[7]*u[1] + v[8]*u[2]
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
			s0 += (v[0]*u[0] + v[1]*u[1]) + (v[2]*u[2] + v[3]*u[3])
			s1 += (v[4]*u[0] + v[5]*u[1]) + (v[6]*u[2] + v[7]*u[3])
			s2 += (v[8]*u[0] + v[9]*u[1]) + (v[10]*u[2] + v[11]*u[3])
			s3 += (v[12]*u[0] + v[13]*u[1]) + (v[14]*u[2] + v[15]*u[3])
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
			s0 += (v[0]*u[0] + v[1]*u[1] + v[2]*u[2]) + (v[3]*u[3] + v[4]*u[4] + v[5]*u[5])
			s1 += (v[6]*u[0] + v[7]*u[1] + v[8]*u[2]) + (v[9]*u[3] + v[10]*u[4] + v[11]*u[5])
			s2 += (v[12]*u[0] + v[13]*u[1] + v[14]*u[2]) + (v[15]*u[3] + v[16]*u[4] + v[17]*u[5])
			s3 += (v[18]*u[0] + v[19]*u[1] + v[20]*u[2]) + (v[21]*u[3] + v[22]*u[4] + v[23]*u[5])
			s4 += (v[24]*u[0] + v[25]*u[1] + v[26]*u[2]) + (v[27]*u[3] + v[28]*u[4] + v[29]*u[5])
			s5 += (v[30]*u[0] + v[31]*u[1] + v[32]*u[2]) + (v[33]*u[3] + v[34]*u[4] + v[35]*u[5])
		}
		*(*[6]float64)(dst[6*I:]) = [6]float64{s0, s1, s2, s3, s4, s5}
	}
}
