package load

import (
	"math"
	"strconv"
	"unsafe"
)

// decimal is a number as it is written: its value, correctly rounded, and
// what its digits look like.
type decimal struct {
	val    float64 // infinite where the number exceeds every double
	mant   uint64  // the significant digits as a whole number, the first 19 of them
	digits int     // significant digits: from the first that is not 0 to the last written
	last   int     // power of ten that the last written digit counts
	point  bool    // a decimal point is written
	exp    bool    // an exponent is written
}

// pow10 holds the powers of ten that a double holds exactly.
var pow10 = [...]float64{1e0, 1e1, 1e2, 1e3, 1e4, 1e5, 1e6, 1e7, 1e8, 1e9, 1e10, 1e11,
	1e12, 1e13, 1e14, 1e15, 1e16, 1e17, 1e18, 1e19, 1e20, 1e21, 1e22}

// scanDecimal reads the number that stands first in s and returns how many
// bytes it takes, 0 where there is none. The exponent letter may be E or D,
// of either case; with bare, a signed exponent may stand without a letter, as
// Fortran writes one of three digits (0.25-103).
//
// The value equals strconv.ParseFloat's. A number whose digits are below 2^53
// and whose power of ten is exact costs one multiplication or division
// (Clinger, "How to read floating point numbers accurately", PLDI 1990); see
// nearest for the others of up to 19 digits. The library reads the rest.
func scanDecimal(s []byte, bare bool) (x decimal, n int) {
	i, neg := 0, false
	if len(s) > 0 && (s[0] == '-' || s[0] == '+') {
		i, neg = 1, s[0] == '-'
	}
	start := i
	i = x.scanDigits(s, i)
	found := i - start
	if i < len(s) && s[i] == '.' {
		x.point = true
		dot := i
		i = x.scanDigits(s, i+1)
		x.last = dot + 1 - i
		found += -x.last
	}
	if found == 0 {
		return decimal{}, 0
	}
	mantissa := i
	e, i := scanExponent(s, i, bare)
	x.exp = i > mantissa
	x.last += e
	switch {
	case x.mant == 0 && x.digits == 0:
	case x.digits > 19:
		x.val = slowValue(s[:i], mantissa)
		return x, i
	case x.mant >= 1<<53 || x.last < -22 || x.last > 22:
		var ok bool
		if x.val, ok = nearest(x.mant, x.last); !ok {
			x.val = slowValue(s[:i], mantissa)
			return x, i
		}
	case x.last < 0:
		x.val = float64(x.mant) / pow10[-x.last]
	default:
		x.val = float64(x.mant) * pow10[x.last]
	}
	if neg {
		x.val = -x.val
	}
	return x, i
}

// scanDigits takes the digits that stand at i and returns where they end.
func (x *decimal) scanDigits(s []byte, i int) int {
	for x.digits == 0 && i < len(s) && s[i] == '0' {
		i++
	}
	for x.digits <= 11 {
		v, ok := eightDigits(s[i:])
		if !ok {
			break
		}
		x.mant, x.digits, i = x.mant*100_000_000+v, x.digits+8, i+8
	}
	for ; i < len(s); i++ {
		d := s[i] - '0'
		if d > 9 {
			break
		}
		x.digits++
		if x.digits <= 19 {
			x.mant = x.mant*10 + uint64(d)
		}
	}
	return i
}

// scanExponent reads the exponent that may stand at i; end is i where none
// does.
func scanExponent(s []byte, i int, bare bool) (e, end int) {
	if i == len(s) {
		return 0, i
	}
	k := i
	switch s[i] {
	case 'e', 'E', 'd', 'D':
		k++
	case '+', '-':
		if !bare {
			return 0, i
		}
	default:
		return 0, i
	}
	neg := false
	if k < len(s) && (s[k] == '-' || s[k] == '+') {
		neg = s[k] == '-'
		k++
	}
	first := k
	for ; k < len(s) && s[k]-'0' <= 9; k++ {
		if e < 100_000 {
			e = e*10 + int(s[k]-'0')
		}
	}
	if k == first {
		return 0, i
	}
	if neg {
		e = -e
	}
	return e, k
}

// slowValue reads a number by the library, its exponent, which starts at
// mant, put in the form the library knows.
func slowValue(s []byte, mant int) float64 {
	if mant < len(s) && s[mant] != 'e' && s[mant] != 'E' {
		var buf [64]byte
		b := append(buf[:0], s[:mant]...)
		b = append(b, 'e')
		if s[mant] == 'd' || s[mant] == 'D' {
			mant++
		}
		s = append(b, s[mant:]...)
	}
	v, err := strconv.ParseFloat(unsafe.String(&s[0], len(s)), 64)
	if err != nil && !math.IsInf(v, 0) {
		return math.NaN() // cannot happen: the form was checked
	}
	return v
}
