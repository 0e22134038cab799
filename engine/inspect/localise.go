package inspect

import (
	"math"

	"dwindle/engine/linear"
)

// localise turns an orthonormal basis, from its member start on, into one whose
// members each take all that the span has in one row, the largest first: what
// is free at one place is told apart from what is free at another.
func localise(v [][]float64, start int) [][]float64 {
	out := append([][]float64(nil), v[:start]...)
	rest := append([][]float64(nil), v[start:]...)
	for len(rest) > 1 {
		turn(rest, largestRow(rest))
		out, rest = append(out, rest[0]), rest[1:]
	}
	return append(out, rest...)
}

// largestRow is the row in which the span of an orthonormal basis holds most.
func largestRow(basis [][]float64) (row int) {
	most := -1.0
	for i := range basis[0] {
		s := 0.0
		for _, x := range basis {
			s += x[i] * x[i]
		}
		if s > most*(1+1e-9) {
			row, most = i, s
		}
	}
	return row
}

// turn replaces an orthonormal basis by one of the same span of which the first
// member alone holds the row: by the reflection of the basis that takes its
// entries in that row to the first axis (Householder, J. ACM 5, 1958).
func turn(basis [][]float64, row int) {
	k := len(basis)
	u, size := make([]float64, k), 0.0
	for j, x := range basis {
		u[j] = x[row]
		size += x[row] * x[row]
	}
	if size == 0 {
		return
	}
	size = math.Sqrt(size)
	u[0] += math.Copysign(size, u[0])
	half := linear.Dot(u, u) / 2
	w := make([]float64, len(basis[0]))
	for j, x := range basis {
		linear.Axpy(u[j]/half, x, w)
	}
	for j, x := range basis {
		y := append([]float64(nil), x...)
		linear.Axpy(-u[j], w, y)
		basis[j] = y
	}
	if basis[0][row] < 0 {
		linear.Scale(basis[0], -1, basis[0])
	}
}
