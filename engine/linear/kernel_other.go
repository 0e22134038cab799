//go:build !amd64

package linear

// vectored says that there are no vector instructions here.
var vectored = false

// dot is the sum of one block.
func dot(x, y []float64) float64 { return dotPlain(x, y[:len(x)]) }

// sumTaps computes dst = Σ v∘x over the taps, in their order; there is at
// least one, each as long as dst.
func sumTaps(dst []float64, taps []tap) { tapsPlain(dst, taps) }

// axpy computes y += a x.
func axpy(y, x []float64, a float64) { axpyPlain(y, x, a) }

// step computes x += a p, then p = z + b p.
func step(x, p, z []float64, a, b float64) { stepPlain(x, p, z, a, b) }
