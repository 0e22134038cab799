package linear

// tapsOffAVX2 computes dst = x − Σ v∘x over the first k taps, k at least 1. n
// is a multiple of 16.
//
//go:noescape
func tapsOffAVX2(dst, x *float64, n int, taps *tap, k int)

// tapsOffUpAVX2 computes dst = s∘x − Σ v∘x over the first k taps, k at least
// 1, from the last row to the first. n is a multiple of 16.
//
//go:noescape
func tapsOffUpAVX2(dst, s, x *float64, n int, taps *tap, k int)

// tapsOffSingleAVX2 is tapsOffAVX2 for values stored in single precision.
//
//go:noescape
func tapsOffSingleAVX2(dst, x *float64, n int, taps *tapOf[float32], k int)

// tapsOffUpSingleAVX2 is tapsOffUpAVX2 for values stored in single precision.
//
//go:noescape
func tapsOffUpSingleAVX2(dst, s, x *float64, n int, taps *tapOf[float32], k int)

// tapsOff computes dst = x − Σ v∘x over the taps, one after the other in their
// order; dst may be x. The taps are changed.
func tapsOff[T Stored](dst, x []float64, taps []tapOf[T]) {
	x = x[:len(dst)]
	whole := len(dst) &^ 15
	if vectored && whole > 0 && len(taps) > 0 {
		switch first := any(&taps[0]).(type) {
		case *tapOf[float64]:
			tapsOffAVX2(&dst[0], &x[0], whole, first, len(taps))
		case *tapOf[float32]:
			tapsOffSingleAVX2(&dst[0], &x[0], whole, first, len(taps))
		}
		dst, x = dst[whole:], x[whole:]
		skip(taps, whole)
	}
	tapsOffPlain(dst, x, taps)
}

// tapsOffUp computes dst = s∘x − Σ v∘x over the taps, one after the other in
// their order; dst may be x. The taps are changed.
func tapsOffUp[T Stored](dst, s, x []float64, taps []tapOf[T]) {
	s, x = s[:len(dst)], x[:len(dst)]
	rest := len(dst) & 15
	if !vectored || rest == len(dst) || len(taps) == 0 {
		tapsOffUpPlain(dst, s, x, taps)
		return
	}
	start := len(dst) - rest
	for k := range taps {
		taps[k].v, taps[k].x = taps[k].v[:len(dst)], taps[k].x[:len(dst)]
	}
	switch first := any(&taps[0]).(type) {
	case *tapOf[float64]:
		tapsOffUpAVX2(&dst[0], &s[0], &x[0], start, first, len(taps))
	case *tapOf[float32]:
		tapsOffUpSingleAVX2(&dst[0], &s[0], &x[0], start, first, len(taps))
	}
	skip(taps, start)
	tapsOffUpPlain(dst[start:], s[start:], x[start:], taps)
}

// skip leaves out the first rows of the taps.
func skip[T Stored](taps []tapOf[T], rows int) {
	for k := range taps {
		taps[k].v, taps[k].x = taps[k].v[rows:], taps[k].x[rows:]
	}
}
