package spectrum

import (
	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// image is a vector and what the operator makes of it.
type image struct{ v, av []float64 } // both of length n

func newImage(n int) *image { return &image{make([]float64, n), make([]float64, n)} }

// orthonormalise makes the image orthogonal to the unit images of basis, by
// two rounds of Gram–Schmidt, and of unit length. It returns false where
// nothing but rounding would be left.
func (m *image) orthonormalise(basis []*image) bool {
	before := linear.Norm2(m.v)
	if before == 0 || !finite(before) {
		return false
	}
	for range 2 {
		for _, b := range basis {
			c := -linear.Dot(b.v, m.v)
			linear.Axpy(c, b.v, m.v)
			linear.Axpy(c, b.av, m.av)
		}
	}
	after := linear.Norm2(m.v)
	if !(after > 1e-10*before) {
		return false
	}
	linear.Scale(m.v, 1/after, m.v)
	linear.Scale(m.av, 1/after, m.av)
	return true
}

// lowest solves the Rayleigh–Ritz problem on an orthonormal basis and returns
// the unit coefficients of the smallest Ritz value.
func lowest(basis []*image) (lead []float64, ok bool) {
	k := len(basis)
	h := mat.NewSymDense(k, nil)
	for i, b := range basis {
		for j := i; j < k; j++ {
			h.SetSym(i, j, linear.Dot(b.v, basis[j].av))
			if !finite(h.At(i, j)) {
				return nil, false
			}
		}
	}
	var eigen mat.EigenSym
	if !eigen.Factorize(h, true) {
		return nil, false
	}
	var vectors mat.Dense
	eigen.VectorsTo(&vectors)
	return mat.Col(nil, 0, &vectors), true
}
