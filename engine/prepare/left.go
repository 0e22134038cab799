package prepare

// lefter is a way back that also turns left null vectors y, those with yᵀA = 0,
// into those of the prepared matrix: dst and y have length n and do not
// overlap.
type lefter interface{ left(dst, y []float64) }

// CarryLeft turns left null vectors of a matrix into those of the one prepared
// from it; nil where the preparation does not tell how.
func CarryLeft(vectors [][]float64, b Back) (out [][]float64) {
	l, ok := b.(lefter)
	if !ok {
		return nil
	}
	for _, y := range vectors {
		w := make([]float64, len(y))
		l.left(w, y)
		out = append(out, w)
	}
	return out
}

func (same) left(dst, y []float64) { copy(dst, y) }

// left computes dst = Dr⁻¹ y.
func (s scaling) left(dst, y []float64) {
	for i, r := range s.row {
		dst[i] = y[i] / r
	}
}

// left computes dst = Q Dr⁻¹ y.
func (m matched) left(dst, y []float64) {
	for k, i := range m.q {
		dst[k] = y[i] / m.row[i]
	}
}

// left computes dst = P y.
func (m permuted) left(dst, y []float64) { m.p.Forward(dst, y) }
