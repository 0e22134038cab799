package linear

// blockSizes are the orders of dense blocks that storage by blocks may take.
var blockSizes = []int{2, 3, 4, 6}

// blocks is a square matrix with its second form: dense r×r blocks, one column
// index each, for systems with r unknowns at every node. Places of a block
// that hold no entry are 0. A row's products are added in order of columns.
type blocks struct {
	*CSR
	r   int
	ptr []int     // length n/r+1; block row I is ptr[I]:ptr[I+1]
	col []int32   // block columns, ascending within a block row
	val []float64 // r·r each, row by row
}

// walkBlocks calls visit for each r×r block of block row I that holds an
// entry, in order of columns.
func (a *CSR) walkBlocks(r, I int, visit func(J int32)) {
	var at [6]int
	for q := range r {
		at[q] = a.Ptr[I*r+q]
	}
	for {
		J := int32(-1)
		for q := range r {
			if at[q] < a.Ptr[I*r+q+1] {
				if b := a.Col[at[q]] / int32(r); J < 0 || b < J {
					J = b
				}
			}
		}
		if J < 0 {
			return
		}
		visit(J)
		for q := range r {
			for end := (J + 1) * int32(r); at[q] < a.Ptr[I*r+q+1] && a.Col[at[q]] < end; at[q]++ {
			}
		}
	}
}

// countBlocks returns how many r×r blocks each sampled block row holds in all,
// and the entries of those rows; every stride-th block row is looked at.
func (a *CSR) countBlocks(r, stride int) (blocks, entries int) {
	for I := 0; I < a.NRows/r; I += stride {
		a.walkBlocks(r, I, func(int32) { blocks++ })
		entries += a.Ptr[(I+1)*r] - a.Ptr[I*r]
	}
	return blocks, entries
}

// byBlocks builds the second form; r divides the order of a.
func byBlocks(a *CSR, r int) *blocks {
	b := &blocks{CSR: a, r: r, ptr: make([]int, a.NRows/r+1)}
	rows := a.NRows / r
	parts := (rows + rowsOfPart - 1) / rowsOfPart
	each := func(do func(I int)) {
		Parallel(parts, func(p int) {
			for I := p * rowsOfPart; I < min((p+1)*rowsOfPart, rows); I++ {
				do(I)
			}
		})
	}
	each(func(I int) { a.walkBlocks(r, I, func(int32) { b.ptr[I+1]++ }) })
	for I := range rows {
		b.ptr[I+1] += b.ptr[I]
	}
	b.col = make([]int32, b.ptr[rows])
	b.val = make([]float64, b.ptr[rows]*r*r)
	each(b.fill)
	return b
}

// fill copies the entries of block row I.
func (b *blocks) fill(I int) {
	k, r := b.ptr[I], b.r
	b.walkBlocks(r, I, func(J int32) { b.col[k] = J; k++ })
	for q := range r {
		cols, vals := b.Row(I*r + q)
		k = b.ptr[I]
		for e, c := range cols {
			for J := c / int32(r); b.col[k] != J; k++ {
			}
			b.val[(k*r+q)*r+int(c)-int(b.col[k])*r] = vals[e]
		}
	}
}

// Unwrap returns the rows, for the abilities that need them.
func (b *blocks) Unwrap() any { return b.CSR }

// Form names the second form.
func (b *blocks) Form() string { return formBlocks(b.r) }

// ExtraBytes returns the memory of the second form.
func (b *blocks) ExtraBytes() int64 {
	return int64(len(b.val))*8 + int64(len(b.col))*4 + int64(len(b.ptr))*8
}

// Apply computes dst = A x on the thread team.
func (b *blocks) Apply(dst, x []float64) {
	j := begin(blocksKernel, b.NRows)
	j.blk, j.x, j.w = b, x[:b.NCols], dst[:b.NRows]
	j.finish()
}

// ApplyDot computes dst = A x and returns xᵀ dst.
func (b *blocks) ApplyDot(dst, x []float64) float64 {
	j := begin(blocksDotKernel, b.NRows)
	j.blk, j.x, j.w = b, x[:b.NCols], dst[:b.NRows]
	return j.finishSum()
}

// blocksKernel takes the block rows that begin in lo:hi, and returns the rows
// they are made of.
func blocksKernel(j *job, lo, hi, _ int) { j.blockRows(lo, hi) }

func blocksDotKernel(j *job, lo, hi, block int) {
	lo, hi = j.blockRows(lo, hi)
	j.part[block] = dot(j.x[lo:hi], j.w[lo:hi])
}

// blockRows computes the block rows that begin in lo:hi and returns the rows
// they are made of.
func (j *job) blockRows(lo, hi int) (int, int) {
	b := j.blk
	first, last := (lo+b.r-1)/b.r, (hi+b.r-1)/b.r
	switch b.r {
	case 2:
		b.rows2(j.w, j.x, first, last)
	case 3:
		b.rows3(j.w, j.x, first, last)
	case 4:
		b.rows4(j.w, j.x, first, last)
	case 6:
		b.rows6(j.w, j.x, first, last)
	}
	return first * b.r, last * b.r
}
