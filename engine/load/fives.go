package load

import "math/big"

// The powers of ten with which a number of at most 19 digits can be a normal
// double.
const (
	leastTen = -327
	mostTen  = 308
)

// wide is a whole number of 128 bits.
type wide struct{ hi, lo uint64 }

// fives holds, at q-leastTen, the 128 leading bits of 5^q, the first of them 1.
var fives = makeFives()

// makeFives computes the table. Positive powers are cut off. Of the negative
// ones, down to 5^-27 < 2^-62, products with a 64-bit number must not come out
// below an exact quotient: these are rounded up, and the others cut off.
func makeFives() (t [mostTen - leastTen + 1]wide) {
	five, one := big.NewInt(5), big.NewInt(1)
	p := big.NewInt(1)
	for q := 0; q <= mostTen; q++ {
		t[q-leastTen] = leading(p)
		p.Mul(p, five)
	}
	p.SetInt64(1)
	inverse := new(big.Int)
	for q := -1; q >= leastTen; q-- {
		p.Mul(p, five)
		inverse.Lsh(one, uint(p.BitLen()+127))
		inverse.Quo(inverse, p)
		if q >= -27 {
			inverse.Add(inverse, one)
		}
		t[q-leastTen] = leading(inverse)
	}
	return t
}

// leading returns the 128 leading bits of x > 0, shifted up where it has fewer.
func leading(x *big.Int) wide {
	var cut big.Int
	if over := x.BitLen() - 128; over > 0 {
		cut.Rsh(x, uint(over))
	} else {
		cut.Lsh(x, uint(-over))
	}
	var low big.Int
	low.And(&cut, new(big.Int).SetUint64(1<<64-1))
	return wide{cut.Rsh(&cut, 64).Uint64(), low.Uint64()}
}
