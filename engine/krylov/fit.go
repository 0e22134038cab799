package krylov

import "math"

// fit is the least-squares problem min ‖c − H y‖ for a matrix H that grows by
// columns, each with its own number of rows from the top. Rotations of
// neighbouring rows keep it as R y = g.
type fit struct {
	h   []float64   // H, (m+1) x m by rows
	r   [][]float64 // columns of R, length m+1 each
	g   []float64   // rotated c, length m+1
	y   []float64   // scratch of solve, length m
	rot []rotation
	k   int // columns so far
}

// rotation turns rows i and i+1.
type rotation struct {
	i    int
	c, s float64
}

// turn applies the rotation to a column.
func (q rotation) turn(x []float64) {
	a, b := x[q.i], x[q.i+1]
	x[q.i], x[q.i+1] = q.c*a+q.s*b, q.c*b-q.s*a
}

// newFit allocates for m columns, of which the first dense ones may be full
// down to row dense.
func newFit(m, dense int) fit {
	return fit{h: make([]float64, (m+1)*m), r: rows(m, m+1), g: make([]float64, m+1), y: make([]float64, m),
		rot: make([]rotation, 0, m+dense*(dense+1)/2)}
}

// fitBytes returns the memory newFit takes.
func fitBytes(m, dense int) int64 {
	k, d := int64(m), int64(dense)
	return 8*(2*k*(k+1)+2*k+1) + 24*(k+k+d*(d+1)/2)
}

// start empties H.
func (f *fit) start() {
	f.k, f.rot = 0, f.rot[:0]
	clear(f.h)
	clear(f.g)
}

// column returns the column to fill, all zero below what is filled.
func (f *fit) column() []float64 { return f.r[f.k] }

// rotate copies the filled column, with the given number of rows, into H and
// turns it into one of R. It returns the size of R's new diagonal entry;
// nothing counts until accept.
func (f *fit) rotate(rows int) float64 {
	col, m := f.r[f.k], len(f.r)
	for i := range rows {
		f.h[i*m+f.k] = col[i]
	}
	for _, q := range f.rot {
		q.turn(col)
	}
	for i := rows - 2; i >= f.k; i-- {
		q := rotation{i, 1, 0}
		if d := math.Hypot(col[i], col[i+1]); d > 0 {
			q.c, q.s = col[i]/d, col[i+1]/d
		}
		q.turn(col)
		f.rot = append(f.rot, q)
		q.turn(f.g)
	}
	return math.Abs(col[f.k])
}

// accept takes the rotated column in and returns the norm of the residual.
func (f *fit) accept() float64 {
	f.k++
	s := 0.0
	for _, x := range f.g[f.k:] {
		s = math.Hypot(s, x)
	}
	return s
}

// solve returns y of R y = g by back substitution; it is valid until the next
// call and changes nothing else.
func (f *fit) solve() []float64 {
	y := f.y[:f.k]
	for i := f.k - 1; i >= 0; i-- {
		t := f.g[i]
		for j := i + 1; j < f.k; j++ {
			t -= f.r[j][i] * y[j]
		}
		y[i] = t / f.r[i][i]
	}
	return y
}
