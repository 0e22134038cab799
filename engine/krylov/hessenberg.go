package krylov

import "math"

// hessenberg solves the least-squares problem min ‖βe₁ − H y‖ of GMRES while
// H grows a column at a time: Givens rotations keep it as R y = g.
type hessenberg struct {
	r    [][]float64 // column j of R, length j+2; holds H's column on the way in
	c, s []float64   // rotations, length m
	g    []float64   // rotated right-hand side, length m+1
	y    []float64   // scratch of solve, length m
	k    int         // columns so far
}

func newHessenberg(m int) hessenberg {
	h := hessenberg{r: make([][]float64, m), c: make([]float64, m), s: make([]float64, m),
		g: make([]float64, m+1), y: make([]float64, m)}
	for j := range h.r {
		h.r[j] = make([]float64, j+2)
	}
	return h
}

// hessenbergBytes returns the memory newHessenberg takes, slice headers included.
func hessenbergBytes(m int) int64 { return int64(m) * (4*8 + 4*(int64(m)+3) + 24) }

// start empties H for a cycle whose first residual has norm beta.
func (h *hessenberg) start(beta float64) {
	h.k = 0
	h.g[0] = beta
}

// column returns the column to fill: k+2 entries of H.
func (h *hessenberg) column() []float64 { return h.r[h.k] }

// rotate turns the filled column into one of R. It returns the size of R's
// new diagonal entry; nothing counts until accept.
func (h *hessenberg) rotate() float64 {
	col, k := h.r[h.k], h.k
	for j := 0; j < k; j++ {
		a, b := col[j], col[j+1]
		col[j], col[j+1] = h.c[j]*a+h.s[j]*b, h.c[j]*b-h.s[j]*a
	}
	d := math.Hypot(col[k], col[k+1])
	if d == 0 {
		return 0
	}
	h.c[k], h.s[k] = col[k]/d, col[k+1]/d
	col[k], col[k+1] = d, 0
	return d
}

// accept takes the rotated column in and returns the norm of the residual.
func (h *hessenberg) accept() float64 {
	k := h.k
	h.g[k+1] = -h.s[k] * h.g[k]
	h.g[k] *= h.c[k]
	h.k++
	return math.Abs(h.g[k+1])
}

// solve returns y of R y = g by back substitution; it is valid until the next
// call and changes nothing else.
func (h *hessenberg) solve() []float64 {
	y := h.y[:h.k]
	for i := h.k - 1; i >= 0; i-- {
		t := h.g[i]
		for j := i + 1; j < h.k; j++ {
			t -= h.r[j][i] * y[j]
		}
		y[i] = t / h.r[i][i]
	}
	return y
}
