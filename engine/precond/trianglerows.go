package precond

import "dwindle/engine/linear"

// triangleRows is a strict triangle by rows whose values are stored as T: row i
// is ptr[i]:ptr[i+1], columns ascending.
type triangleRows[T linear.Stored] struct {
	ptr []int
	col []int32
	val []T
}

// rowsOf views a strict triangle; it copies nothing.
func rowsOf(t *linear.CSR) triangleRows[float64] { return triangleRows[float64]{t.Ptr, t.Col, t.Val} }

func (t *triangleRows[T]) bytes() int64 { return linear.RowsBytes[T](len(t.ptr)-1, len(t.val)) }

// lowerUnit solves L y = x for unit lower triangular L, whose strict lower
// part is l. y may be x.
func lowerUnit[T linear.Stored](l triangleRows[T], y, x []float64) {
	cols := l.col
	vals := l.val[:len(cols)]
	ends := l.ptr[1:]
	x, y = x[:len(ends)], y[:len(ends)]
	k := 0
	for i, end := range ends {
		end = min(end, len(cols)) // no change; it spares the compiler a check an entry
		t := x[i]
		for ; k < end; k++ {
			t -= float64(float64(vals[k]) * y[uint32(cols[k])])
		}
		y[i] = t
	}
}

// upperScaled solves U z = y for U = D (I + D⁻¹R), from the last row to the
// first, as z_i = y_i/d_i − Σ r_ij z_j, where r holds the strict upper part
// already divided by the pivots of its rows. The farthest column comes first,
// since the nearest is known last. z may be y.
func upperScaled[T linear.Stored](r triangleRows[T], inverse, z, y []float64) {
	cols := r.col
	vals := r.val[:len(cols)]
	starts := r.ptr[:len(r.ptr)-1]
	inverse, y, z = inverse[:len(starts)], y[:len(starts)], z[:len(starts)]
	k := len(cols) - 1
	for i := len(starts) - 1; i >= 0; i-- {
		start := max(starts[i], 0) // no change; as above
		t := float64(y[i] * inverse[i])
		for ; k >= start; k-- {
			t -= float64(float64(vals[k]) * z[uint32(cols[k])])
		}
		z[i] = t
	}
}
