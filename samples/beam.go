package samples

import "dwindle/engine/linear"

// bending is the stiffness of an Euler-Bernoulli element of length l and
// bending stiffness ei, for (deflection, rotation) at its two ends: cubic
// Hermite shape functions, K = ei/l^3 [12 6l -12 6l; ...].
func bending(ei, l float64) [4][4]float64 {
	a, b, c, d := 12*ei/(l*l*l), 6*ei/(l*l), 4*ei/l, 2*ei/l
	return [4][4]float64{
		{a, b, -a, b},
		{b, c, -b, d},
		{-a, -b, a, -b},
		{b, d, -b, c},
	}
}

// geometric is the geometric stiffness of the same element under a unit
// compressive load: the work of the load along w'^2/2.
func geometric(l float64) [4][4]float64 {
	a, b, c, d := 6/(5*l), 1.0/10, 2*l/15, -l/30
	return [4][4]float64{
		{a, b, -a, b},
		{b, c, -b, d},
		{-a, -b, a, -b},
		{b, d, -b, c},
	}
}

// assembly collects element matrices.
type assembly struct{ entries []linear.Entry }

// add adds k for the unknowns dof, each with a sign that turns the element's
// direction into the structure's; a negative unknown is held and left out.
func (s *assembly) add(dof []int, sign []float64, k func(i, j int) float64) {
	for i, p := range dof {
		for j, q := range dof {
			if p >= 0 && q >= 0 {
				s.entries = append(s.entries, linear.Entry{I: p, J: q, V: sign[i] * sign[j] * k(i, j)})
			}
		}
	}
}
