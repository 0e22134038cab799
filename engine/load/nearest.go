package load

import (
	"math"
	"math/bits"
)

// nearest returns the double nearest to w·10^q, ties to even, for w > 0. It
// returns false where 128 bits do not decide, or the result is not a normal
// double.
//
// The method is Eisel and Lemire's (D. Lemire, "Number parsing at a gigabyte
// per second", Software: Practice and Experience 51, 2021): w·5^q is found to
// as many bits as rounding needs, since 10^q = 5^q·2^q.
func nearest(w uint64, q int) (v float64, ok bool) {
	if q < leastTen || q > mostTen {
		return 0, false
	}
	zeros := bits.LeadingZeros64(w)
	w <<= zeros
	five := fives[q-leastTen]
	hi, lo := bits.Mul64(w, five.hi)
	if hi&0x1ff == 0x1ff { // a carry from below could reach the 55 bits that count
		below, _ := bits.Mul64(w, five.lo)
		var carry uint64
		lo, carry = bits.Add64(lo, below, 0)
		hi += carry
	}
	if lo == math.MaxUint64 && (q < -27 || q > 55) {
		return 0, false // the table is cut off there, so that one more carry may be missing
	}
	top := int(hi >> 63)
	m := hi >> (9 + top) // 54 bits: the last one rounds
	if lo <= 1 && q >= -4 && q <= 23 && m&3 == 1 && m<<(9+top) == hi {
		m-- // halfway between two doubles, and the lower one is even
	}
	m = (m + m&1) >> 1
	e := 1086 + log2Five(q) + q + top - zeros // biased exponent
	if m == 1<<53 {
		m, e = 1<<52, e+1
	}
	if e < 1 || e > 2046 {
		return 0, false
	}
	return math.Float64frombits(m&^(1<<52) | uint64(e)<<52), true
}

// log2Five is ⌊log₂ 5^q⌋, exact for |q| ≤ 350.
func log2Five(q int) int { return q * 152170 >> 16 }
