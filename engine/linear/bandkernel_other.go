//go:build !amd64

package linear

// tapsOff computes dst = x − Σ v∘x over the taps, one after the other in their
// order; dst may be x.
func tapsOff[T Stored](dst, x []float64, taps []tapOf[T]) { tapsOffPlain(dst, x, taps) }

// tapsOffUp computes dst = s∘x − Σ v∘x over the taps, one after the other in
// their order; dst may be x.
func tapsOffUp[T Stored](dst, s, x []float64, taps []tapOf[T]) { tapsOffUpPlain(dst, s, x, taps) }
