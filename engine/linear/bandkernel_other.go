//go:build !amd64

package linear

// tapsOff computes dst = x − Σ v∘x over the taps, one after the other in their
// order; dst may be x.
func tapsOff(dst, x []float64, taps []tap) { tapsOffPlain(dst, x, taps) }

// tapsOffUp computes dst = s∘x − Σ v∘x over the taps, one after the other in
// their order; dst may be x.
func tapsOffUp(dst, s, x []float64, taps []tap) { tapsOffUpPlain(dst, s, x, taps) }
