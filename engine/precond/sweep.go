package precond

import (
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// bandsFrom is the order from which factors may be stored by their diagonals;
// smaller ones stay in the cache.
const bandsFrom = 10_000

// factors is a preconditioner M = L D R with unit lower L and unit upper R:
// the incomplete factorisations end as one. Its triangles are stored by rows,
// or both by diagonals where that pays; either way gives the same bits. Off
// the diagonal values are kept in double or in single precision.
type factors struct {
	lower, upper *linear.CSR            // strict parts of L and R, rows ascending; nil where another form serves
	below, above *triangleRows[float32] // the same in single precision
	down, up     bands                  // strict parts of L and Rᵀ by diagonals
	inverse      []float64              // 1/d_i, length n
	self         bool                   // R = Lᵀ: M is symmetric
	entries      int                    // of both strict parts
}

// bands are triangles by diagonals; see linear.Bands.
type bands interface {
	Forward(y, x []float64)
	Backward(z, y, s []float64)
	Bytes() int64
}

// settle stores the finished triangles for their sweeps; the upper one may be
// missing where it is the transpose of the lower.
func (f *factors) settle() {
	f.count()
	if !byDiagonals[float64](f) {
		f.bothTriangles()
	}
}

// count keeps the number of entries, which the forms no longer tell.
func (f *factors) count() {
	f.entries = 2 * f.lower.Entries()
	if !f.self {
		f.entries = f.lower.Entries() + f.upper.Entries()
	}
}

// bothTriangles makes the upper triangle where only the lower one is there.
func (f *factors) bothTriangles() {
	if f.upper == nil {
		f.upper = f.lower.Transpose()
	}
}

// byDiagonals stores the triangles by diagonals with values of type T, if that
// pays for both.
func byDiagonals[T linear.Stored](f *factors) bool {
	if len(f.inverse) < bandsFrom {
		return false
	}
	down := linear.BandsOf[T](f.lower)
	up := down
	if !f.self && down != nil {
		up = linear.BandsOf[T](f.upper)
	}
	if up == nil {
		return false
	}
	f.down, f.up, f.lower, f.upper = down, up, nil, nil
	return true
}

// Apply computes dst = R⁻¹ D⁻¹ L⁻¹ x.
func (f *factors) Apply(dst, x []float64) {
	switch {
	case f.down != nil:
		f.down.Forward(dst, x)
		f.up.Backward(dst, dst, f.inverse)
	case f.below != nil:
		lowerUnit(*f.below, dst, x)
		upperScaled(*f.above, f.inverse, dst, dst)
	default:
		lowerUnit(rowsOf(f.lower), dst, x)
		upperScaled(rowsOf(f.upper), f.inverse, dst, dst)
	}
}

// built ends the build of factors.
func built(f *factors, notes trace.BuildNotes, err error) (linear.Applier, trace.BuildNotes, error) {
	if err != nil {
		return nil, notes, err
	}
	return f, notes, nil
}

// ApplyDot computes dst = M⁻¹ x and returns xᵀ dst.
func (f *factors) ApplyDot(dst, x []float64) float64 {
	f.Apply(dst, x)
	return linear.Dot(x, dst)
}

// bytes returns the memory of the factors.
func (f *factors) bytes() int64 {
	diagonal := 8 * int64(len(f.inverse))
	switch {
	case f.down != nil && f.self:
		return f.down.Bytes() + diagonal
	case f.down != nil:
		return f.down.Bytes() + f.up.Bytes() + diagonal
	case f.below != nil:
		return f.below.bytes() + f.above.bytes() + diagonal
	}
	return f.lower.Bytes() + f.upper.Bytes() + diagonal
}

// factorBytes returns what factors with so many entries below and above the
// diagonal will take, stored by rows as the parameters say; by diagonals it is
// less.
func factorBytes(n, lower, upper int, v linear.Values) int64 {
	size := linear.RowsBytes[float64]
	if inSingle(v) {
		size = linear.RowsBytes[float32]
	}
	return size(n, lower) + size(n, upper) + 8*int64(n)
}
