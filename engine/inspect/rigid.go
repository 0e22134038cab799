package inspect

import (
	"math"
	"slices"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

// support is how many rows carry 99 % of a unit vector.
func support(v []float64) int {
	shares := make([]float64, len(v))
	for i, x := range v {
		shares[i] = x * x
	}
	slices.Sort(shares)
	sum, k := 0.0, len(shares)
	for k > 0 && sum < 0.99 {
		k--
		sum += shares[k]
	}
	return len(shares) - k
}

// rigidMotions finds the motions of the coordinates, and the combinations of
// them, that A leaves nearly free, in each connected part of several nodes; it
// adds them to the free directions and returns their quotients.
func (e *exam) rigidMotions(norm float64) []float64 {
	if e.s.Coordinates == nil || len(e.s.NearNull) == 0 || !e.symmetric {
		return nil
	}
	parts := linear.FindComponents(e.a)
	var quotients []float64
	for k, size := range parts.Size {
		if int(size) <= len(e.s.NearNull) || len(quotients) >= mostFree {
			continue
		}
		quotients = append(quotients, e.rigidIn(parts, int32(k), norm)...)
	}
	return quotients
}

// rigidIn does so for one part: a motion that is free by itself is taken as it
// is, and of the others the combinations that are.
func (e *exam) rigidIn(parts *linear.Components, part int32, norm float64) (quotients []float64) {
	var basis, held, images [][]float64
	for _, m := range e.s.NearNull {
		v, w := make([]float64, len(m)), make([]float64, len(m))
		for i, x := range m {
			if parts.Of[i] == part {
				v[i] = x / e.col[i]
			}
		}
		if !orthonormal(v, basis) {
			continue
		}
		basis = append(basis, v)
		e.scaled.Apply(w, v)
		if q := linear.Norm2(w) / norm; q <= freeLimit {
			e.free, quotients = append(e.free, v), append(quotients, q)
			continue
		}
		held, images = append(held, v), append(images, w)
	}
	for _, v := range combined(held, images) {
		if q := e.quotient(v, norm); q <= freeLimit {
			e.free, quotients = append(e.free, v), append(quotients, q)
		}
	}
	return quotients
}

// combined returns the singular vectors of an operator on the span of an
// orthonormal basis, given its images.
func combined(basis, images [][]float64) [][]float64 {
	k := len(basis)
	gram, values := make([]float64, k*k), make([]float64, k)
	for i := range k {
		for j := range k {
			gram[i*k+j] = linear.Dot(images[i], images[j])
		}
	}
	if k == 0 || !spectrum.Symmetric(gram, values, make([]float64, 3*k)) {
		return nil
	}
	out := make([][]float64, k)
	for j := range out {
		out[j] = make([]float64, len(basis[0]))
		for i := range k {
			linear.Axpy(gram[i*k+j], basis[i], out[j])
		}
	}
	return out
}

// orthonormal makes v orthogonal to the basis and of unit length; false where
// nothing but rounding is left.
func orthonormal(v []float64, basis [][]float64) bool {
	before := linear.Norm2(v)
	if before == 0 {
		return false
	}
	for range 2 {
		for _, b := range basis {
			linear.Axpy(-linear.Dot(b, v), b, v)
		}
	}
	after := linear.Norm2(v)
	if !(after > 1e-8*before) {
		return false
	}
	linear.Scale(v, 1/after, v)
	return true
}

// rigidKind names a rigid motion: a translation where the first motions, those
// along the axes, hold 99 % of it.
func (e *exam) rigidKind(v []float64) string {
	var basis [][]float64
	axes := len(e.s.Coordinates[0])
	for _, m := range e.s.NearNull[:min(axes, len(e.s.NearNull))] {
		w := append([]float64(nil), m...)
		if orthonormal(w, basis) {
			basis = append(basis, w)
		}
	}
	x := make([]float64, len(v))
	for i := range v {
		x[i] = e.col[i] * v[i]
	}
	held, all := 0.0, linear.Norm2(x)
	for _, b := range basis {
		c := linear.Dot(b, x) / all
		held += c * c
	}
	if held > 0.99 && !math.IsNaN(held) {
		return "translation"
	}
	return "rotation"
}
