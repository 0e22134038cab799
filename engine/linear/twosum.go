package linear

import "math"

// TwoSum returns s = fl(a+b) and the rounding error: a+b = s+err exactly
// (Knuth, The Art of Computer Programming 2, §4.2.2).
func TwoSum(a, b float64) (s, err float64) {
	s = a + b
	t := s - a
	return s, (a - (s - t)) + (b - t)
}

// TwoProduct returns p = fl(a·b) and the rounding error: a·b = p+err exactly
// unless something underflows or overflows.
func TwoProduct(a, b float64) (p, err float64) {
	p = a * b
	return p, math.FMA(a, b, -p)
}
