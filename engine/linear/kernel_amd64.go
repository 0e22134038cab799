package linear

import "golang.org/x/sys/cpu"

// vectored says whether the processor has AVX2; tests take it away.
var vectored = cpu.X86.HasAVX2

// dotAVX2 writes the eight strands of xᵀ y to s. n is a multiple of 8.
//
//go:noescape
func dotAVX2(x, y *float64, n int, s *[8]float64)

// tapsAVX2 computes dst = Σ v∘x over the first k taps. n is a multiple of 16,
// k at least 1.
//
//go:noescape
func tapsAVX2(dst *float64, n int, taps *tap, k int)

// dot is the sum of one block.
func dot(x, y []float64) float64 {
	y = y[:len(x)]
	whole := len(x) &^ 7
	if !vectored || whole == 0 {
		return dotPlain(x, y)
	}
	var s [8]float64
	dotAVX2(&x[0], &y[0], whole, &s)
	return endDot(x[whole:], y[whole:], &s)
}

// sumTaps computes dst = Σ v∘x over the taps, in their order; there is at
// least one, each as long as dst.
func sumTaps(dst []float64, taps []tap) {
	whole := len(dst) &^ 15
	if !vectored || whole == 0 {
		tapsPlain(dst, taps)
		return
	}
	tapsAVX2(&dst[0], whole, &taps[0], len(taps))
	if whole == len(dst) {
		return
	}
	for k := range taps {
		taps[k].v, taps[k].x = taps[k].v[whole:], taps[k].x[whole:]
	}
	tapsPlain(dst[whole:], taps)
}

// axpyAVX2 computes y += a x. n is a multiple of 8.
//
//go:noescape
func axpyAVX2(y, x *float64, n int, a float64)

// stepAVX2 computes x += a p, then p = z + b p. n is a multiple of 8.
//
//go:noescape
func stepAVX2(x, p, z *float64, n int, a, b float64)

// axpy computes y += a x.
func axpy(y, x []float64, a float64) {
	x = x[:len(y)]
	whole := 0
	if vectored && len(y) >= 8 {
		whole = len(y) &^ 7
		axpyAVX2(&y[0], &x[0], whole, a)
	}
	axpyPlain(y[whole:], x[whole:], a)
}

// step computes x += a p, then p = z + b p.
func step(x, p, z []float64, a, b float64) {
	p, z = p[:len(x)], z[:len(x)]
	whole := 0
	if vectored && len(x) >= 8 {
		whole = len(x) &^ 7
		stepAVX2(&x[0], &p[0], &z[0], whole, a, b)
	}
	stepPlain(x[whole:], p[whole:], z[whole:], a, b)
}
