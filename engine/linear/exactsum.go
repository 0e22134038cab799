package linear

// ExactSum adds numbers without any rounding: it holds the sum as an expansion
// of non-overlapping parts of ascending size (Shewchuk, Adaptive Precision
// Floating-Point Arithmetic, 1997). Sums must stay below the overflow limit.
type ExactSum struct{ parts []float64 }

// Reset makes the sum zero and keeps the memory.
func (e *ExactSum) Reset() { e.parts = e.parts[:0] }

// Add adds x.
func (e *ExactSum) Add(x float64) {
	kept := 0
	for _, p := range e.parts {
		s, err := TwoSum(x, p)
		if err != 0 {
			e.parts[kept] = err
			kept++
		}
		x = s
	}
	e.parts = e.parts[:kept]
	if x != 0 {
		e.parts = append(e.parts, x)
	}
}

// AddProduct adds the product x·y. It is exact unless x·y, or its rounding
// error, underflows.
func (e *ExactSum) AddProduct(x, y float64) {
	p, err := TwoProduct(x, y)
	e.Add(err)
	e.Add(p)
}

// Sign returns -1, 0 or 1: the sign of the exact sum.
func (e *ExactSum) Sign() int {
	switch v := e.Value(); {
	case v < 0:
		return -1
	case v > 0:
		return 1
	}
	return 0
}

// Value returns the sum to within one unit of the last place; its sign is
// exact.
func (e *ExactSum) Value() float64 {
	s := 0.0
	for _, p := range e.parts {
		s += p
	}
	return s
}
