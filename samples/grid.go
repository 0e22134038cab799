package samples

import "dwindle/engine/linear"

// stencil is one row of a five-point operator.
type stencil struct{ south, west, centre, east, north float64 }

// fivePoint builds the operator of an nx by ny grid, unknown j·nx+i at column
// i and row j, straight in compressed rows. Neighbours outside the grid are
// left out, whatever at says of them.
func fivePoint(nx, ny int, at func(i, j int) stencil) *linear.CSR {
	n := nx * ny
	size := fivePointEntries(nx, ny)
	a := &linear.CSR{NRows: n, NCols: n, Ptr: linear.Bulk[int](n + 1),
		Col: linear.Bulk[int32](size), Val: linear.Bulk[float64](size)}
	p, k := 0, 0
	put := func(col int, v float64) {
		a.Col[p], a.Val[p] = int32(col), v
		p++
	}
	for j := 0; j < ny; j++ {
		for i := 0; i < nx; i++ {
			s := at(i, j)
			if j > 0 {
				put(k-nx, s.south)
			}
			if i > 0 {
				put(k-1, s.west)
			}
			put(k, s.centre)
			if i < nx-1 {
				put(k+1, s.east)
			}
			if j < ny-1 {
				put(k+nx, s.north)
			}
			k++
			a.Ptr[k] = p
		}
	}
	return a
}

func fivePointEntries(nx, ny int) int { return 5*nx*ny - 2*nx - 2*ny }

// harmonic is the conductivity of a face between two cells.
func harmonic(a, b float64) float64 {
	if a == b {
		return a
	}
	return 2 * a * b / (a + b)
}
