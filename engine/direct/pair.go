package direct

import "math"

// pair is the symmetric matrix [[a, b], [b, c]].
type pair struct{ a, b, c float64 }

// solve returns the pair's inverse times (x, y).
func (p pair) solve(x, y float64) (float64, float64) {
	s := p.largest()
	a, b, c := p.a/s, p.b/s, p.c/s
	det := a*c - b*b
	return (c*(x/s) - b*(y/s)) / det, (a*(y/s) - b*(x/s)) / det
}

func (p pair) largest() float64 { return max(math.Abs(p.a), math.Abs(p.b), math.Abs(p.c)) }

// bounded says whether the multipliers of a column pair with entries of at
// most x and y are at most limit: |B⁻¹|·(x, y) ≤ limit (Duff and Reid, ACM
// Trans. Math. Softw. 22 (1996) 227–257).
func (p pair) bounded(x, y, limit float64) bool {
	s := p.largest()
	if s == 0 {
		return false
	}
	a, b, c := math.Abs(p.a/s), math.Abs(p.b/s), math.Abs(p.c/s)
	det := math.Abs(p.a/s*(p.c/s) - b*b)
	// A determinant of the size of its own rounding is no determinant.
	if !(det > 4*unit*(a*c+b*b)) {
		return false
	}
	limit *= det * s
	return c*x+b*y <= limit && b*x+a*y <= limit
}

// eigenvalues returns both, the smaller first.
func (p pair) eigenvalues() (low, high float64) {
	mean, half := (p.a+p.c)/2, math.Hypot((p.a-p.c)/2, p.b)
	if s := p.largest(); mean < 0 {
		low = mean - half
		high = s * ((p.a/s*(p.c/s) - p.b/s*(p.b/s)) / (low / s))
	} else {
		high = mean + half
		low = s * ((p.a/s*(p.c/s) - p.b/s*(p.b/s)) / (high / s))
	}
	return low, high
}
