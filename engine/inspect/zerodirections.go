package inspect

// ZeroLimit is the quotient ‖Av‖/(‖A‖‖v‖), after equilibration, up to which A
// maps a direction to zero as far as rounding lets it be seen.
const ZeroLimit = 1e-13

// ZeroDirections are the vectors, in the user's units and of length n, that
// the study found a symmetric A to map to zero, to rounding; nil if none, or if
// A is known to be positive definite.
func ZeroDirections(f *Facts) (out [][]float64) {
	if f == nil || f.Study == nil || f.Symmetric.Answer != Yes || f.PositiveDefinite.Answer == Yes {
		return nil
	}
	for _, d := range f.Study.Null {
		if d.Quotient <= ZeroLimit && len(d.Vector) == f.N {
			out = append(out, d.Vector)
		}
	}
	return out
}

// LeftDirections are the vectors, in the user's units and of length n, that the
// study found the transpose of a nonsymmetric A to map to zero, to rounding.
func LeftDirections(f *Facts) (out [][]float64) {
	if f == nil || f.Study == nil {
		return nil
	}
	for _, d := range f.Study.Left {
		if len(d.Vector) == f.N {
			out = append(out, d.Vector)
		}
	}
	return out
}
