package linear

// Apply computes dst = A x on the thread team.
func (a *CSR) Apply(dst, x []float64) {
	j := begin(applyKernel, a.NRows)
	j.m, j.x, j.w = a, x[:a.NCols], dst[:a.NRows]
	j.finish()
}

func applyKernel(j *job, lo, hi, _ int) { j.m.rows(j.w, j.x, lo, hi) }

// rows computes dst[lo:hi] of A x. One index runs through the entries of all
// the rows; four products at a time are added by halving.
func (a *CSR) rows(dst, x []float64, lo, hi int) {
	dst = dst[lo:hi]
	ends := a.Ptr[lo+1 : hi+1]
	ends = ends[:len(dst)]
	cols := a.Col
	vals := a.Val[:len(cols)]
	k := a.Ptr[lo]
	for i, end := range ends {
		end = min(end, len(cols)) // no change; it spares the compiler a check an entry
		s := 0.0
		for ; k <= end-4; k += 4 {
			c, v := cols[k:k+4:k+4], vals[k:k+4:k+4]
			s += (v[0]*x[uint32(c[0])] + v[1]*x[uint32(c[1])]) + (v[2]*x[uint32(c[2])] + v[3]*x[uint32(c[3])])
		}
		for ; k < end; k++ {
			s += vals[k] * x[uint32(cols[k])]
		}
		dst[i] = s
	}
}

// ApplyDot computes dst = A x and returns xᵀ dst; A is square.
func (a *CSR) ApplyDot(dst, x []float64) float64 {
	j := begin(applyDotKernel, a.NRows)
	j.m, j.x, j.w = a, x[:a.NCols], dst[:a.NRows]
	return j.finishSum()
}

func applyDotKernel(j *job, lo, hi, block int) {
	j.m.rows(j.w, j.x, lo, hi)
	j.part[block] = dot(j.x[lo:hi], j.w[lo:hi])
}

// ApplyT computes dst = Aᵀ x on the thread team. Each thread takes its columns
// and adds to them in order of the rows, so that the result does not depend on
// the number of threads.
func (a *CSR) ApplyT(dst, x []float64) {
	parts := 1
	if a.NCols >= serialBelow*Block {
		parts = Threads()
	}
	if parts == 1 {
		a.scatter(dst, x, 0, a.NCols)
		return
	}
	j := begin(scatterKernel, parts*partStride*Block)
	j.m, j.x, j.w = a, x[:a.NRows], dst[:a.NCols]
	j.finish()
}

func scatterKernel(j *job, _, _, block int) {
	parts, p, n := j.n/(partStride*Block), block/partStride, j.m.NCols
	if block%partStride == 0 {
		j.m.scatter(j.w, j.x, n*p/parts, n*(p+1)/parts)
	}
}

// scatter computes dst[lo:hi] of Aᵀ x. Rows that end before these columns or
// begin behind them are passed over; of a matrix whose rows lie near the
// diagonal that is most of the others.
func (a *CSR) scatter(dst, x []float64, lo, hi int) {
	clear(dst[lo:hi])
	from, to := int32(lo), int32(hi)
	whole := hi-lo == a.NCols
	for i, xi := range x[:a.NRows] {
		cols, vals := a.Row(i)
		if len(cols) == 0 || cols[0] >= to || cols[len(cols)-1] < from {
			continue
		}
		if !whole {
			k := 0
			for k < len(cols) && cols[k] < from {
				k++
			}
			cols, vals = cols[k:], vals[k:]
		}
		vals = vals[:len(cols)]
		for k, c := range cols {
			if c >= to {
				break
			}
			dst[uint32(c)] += float64(vals[k] * xi)
		}
	}
}

// Residual computes dst = b − A x and returns ‖dst‖₂.
func Residual(dst []float64, a Applier, x, b []float64) float64 {
	a.Apply(dst, x)
	Lin(dst, 1, b, -1, dst)
	return Norm2(dst)
}
