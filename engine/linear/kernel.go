package linear

// Stored is how a value is stored; sums of products are always in double.
type Stored interface{ float32 | float64 }

// tapOf is one term of a sum of elementwise products: v∘x, both of the same
// length, v stored as T.
type tapOf[T Stored] struct {
	v []T
	x []float64
}

type tap = tapOf[float64]

// dotPlain is xᵀ y in eight strands: strand s takes the elements s, s+8, …, the
// strands are added by halving, and the last up to seven elements one by one
// after them. The vector instructions follow the same order, so that both give
// the same bits. A product is rounded before it is added, on every machine.
func dotPlain(x, y []float64) float64 {
	var s [8]float64
	whole := len(x) &^ 7
	dotStrands(x[:whole], y[:whole], &s)
	return endDot(x[whole:], y[whole:], &s)
}

// dotStrands adds the products to the eight strands; the length is a multiple
// of eight.
func dotStrands(x, y []float64, s *[8]float64) {
	y = y[:len(x)]
	s0, s1, s2, s3, s4, s5, s6, s7 := s[0], s[1], s[2], s[3], s[4], s[5], s[6], s[7]
	for len(x) >= 8 && len(y) >= 8 {
		s0 += float64(x[0] * y[0])
		s1 += float64(x[1] * y[1])
		s2 += float64(x[2] * y[2])
		s3 += float64(x[3] * y[3])
		s4 += float64(x[4] * y[4])
		s5 += float64(x[5] * y[5])
		s6 += float64(x[6] * y[6])
		s7 += float64(x[7] * y[7])
		x, y = x[8:], y[8:]
	}
	*s = [8]float64{s0, s1, s2, s3, s4, s5, s6, s7}
}

// endDot adds the strands by halving and the products of what is left.
func endDot(x, y []float64, s *[8]float64) float64 {
	sum := ((s[0] + s[4]) + (s[2] + s[6])) + ((s[1] + s[5]) + (s[3] + s[7]))
	for i, v := range x {
		sum += float64(v * y[i])
	}
	return sum
}

// tapsPlain computes dst = Σ v∘x over the taps, in their order; there is at
// least one.
func tapsPlain(dst []float64, taps []tap) {
	for k, t := range taps {
		v, x := t.v[:len(dst)], t.x[:len(dst)]
		if k == 0 {
			for i := range dst {
				dst[i] = v[i] * x[i]
			}
			continue
		}
		for i := range dst {
			dst[i] += float64(v[i] * x[i])
		}
	}
}

// axpyPlain computes y += a x.
func axpyPlain(y, x []float64, a float64) {
	x = x[:len(y)]
	for i, v := range x {
		y[i] += float64(a * v)
	}
}

// stepPlain computes x += a p, then p = z + b p.
func stepPlain(x, p, z []float64, a, b float64) {
	p, z = p[:len(x)], z[:len(x)]
	for i := range x {
		q := p[i]
		x[i] += float64(a * q)
		p[i] = z[i] + float64(b*q)
	}
}
