package spectrum

import "math"

// TwoSides is a spectrum on both sides of zero: [−A,−B] and [C,D], all
// positive.
type TwoSides struct{ A, B, C, D float64 }

// Rate is the factor by which two steps of a method of minimal residuals cut
// the residual at least, in the long run:
//
//	(√(ad) − √(bc)) / (√(ad) + √(bc))
//
// for intervals of equal length, the shorter one being drawn out to the longer
// (Greenbaum, Iterative Methods for Solving Linear Systems, 1997, section 3.1).
func (s TwoSides) Rate() float64 {
	length := math.Max(s.A-s.B, s.D-s.C)
	outer, inner := math.Sqrt((s.B+length)*(s.C+length)), math.Sqrt(s.B*s.C)
	return (outer - inner) / (outer + inner)
}
