package direct

// Solve computes dst = A⁻¹ b, of length n each; b may be dst. Not for two
// goroutines at once.
func (f *LU) Solve(dst, b []float64) {
	y := f.work
	for k, i := range f.rows {
		y[k] = f.left[i] * b[i]
	}
	for k := range y {
		f.l.scatter(k, y)
	}
	for k := f.n - 1; k >= 0; k-- {
		y[k] /= f.diag[k]
		f.u.scatter(k, y)
	}
	for k, j := range f.cols {
		dst[j] = f.right[j] * y[k]
	}
}

// SolveT computes dst = A⁻ᵀ b, of length n each; b may be dst. Not for two
// goroutines at once.
func (f *LU) SolveT(dst, b []float64) {
	y := f.work
	for k, j := range f.cols {
		y[k] = f.right[j] * b[j]
	}
	for k := range y {
		y[k] = (y[k] - f.u.gather(k, y)) / f.diag[k]
	}
	for k := f.n - 1; k >= 0; k-- {
		y[k] -= f.l.gather(k, y)
	}
	for k, i := range f.rows {
		dst[i] = f.left[i] * y[k]
	}
}

// scatter takes y_k times column k from y.
func (c *columns) scatter(k int, y []float64) {
	v := y[k]
	if v == 0 {
		return
	}
	s, e := c.ptr[k], c.ptr[k+1]
	rows, vals := c.row[s:e], c.val[s:e]
	vals = vals[:len(rows)]
	for p, r := range rows {
		y[r] -= vals[p] * v
	}
}

// gather returns the dot product of column k with y.
func (c *columns) gather(k int, y []float64) float64 {
	s, e := c.ptr[k], c.ptr[k+1]
	rows, vals := c.row[s:e], c.val[s:e]
	vals = vals[:len(rows)]
	sum := 0.0
	for p, r := range rows {
		sum += vals[p] * y[r]
	}
	return sum
}

// Entries returns the entries of L and U, the diagonal counted once.
func (f *LU) Entries() int64 { return int64(len(f.l.row)+len(f.u.row)) + int64(f.n) }

// Bytes returns the memory of the factors.
func (f *LU) Bytes() int64 { return luBytes(f.n, f.Entries()) }

// Transposed solves with Aᵀ.
type Transposed struct{ *LU }

// Solve computes dst = A⁻ᵀ b.
func (t Transposed) Solve(dst, b []float64) { t.SolveT(dst, b) }
