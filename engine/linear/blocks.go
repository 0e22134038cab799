package linear

// blockSizes are the orders of dense blocks that storage by blocks may take.
// Blocks of order 2 move fewer bytes too, but wait more for additions: their
// products took 1.2 times those of the rows where measured.
var blockSizes = []int{3, 4, 6}

// blocks is a square matrix with its second form: dense r×r blocks, one column
// index each, for systems with r unknowns at every node. Places of a block
// that hold no entry are 0.
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

// sampleBlocks returns the r×r blocks and the entries of the block rows 0,
// stride, 2·stride, ….
func (a *CSR) sampleBlocks(r, stride int) (blocks, entries int) {
	for I := 0; I < a.NRows/r; I += stride {
		a.walkBlocks(r, I, func(int32) { blocks++ })
		entries += a.Ptr[(I+1)*r] - a.Ptr[I*r]
	}
	return blocks, entries
}

// countBlocks returns the pointers of the r×r blocks, length n/r+1.
func (a *CSR) countBlocks(r int) []int {
	ptr := make([]int, a.NRows/r+1)
	eachRow(a.NRows/r, func(I int) {
		count := 0
		a.walkBlocks(r, I, func(int32) { count++ })
		ptr[I+1] = count
	})
	for I := range ptr[1:] {
		ptr[I+1] += ptr[I]
	}
	return ptr
}

// byBlocks builds the second form; r divides the order of a, and ptr comes
// from countBlocks.
func byBlocks(a *CSR, r int, ptr []int) *blocks {
	count := ptr[len(ptr)-1]
	b := &blocks{CSR: a, r: r, ptr: ptr, col: Bulk[int32](count), val: Bulk[float64](count * r * r)}
	eachRow(a.NRows/r, b.fill)
	return b
}

// fill copies the entries of block row I.
func (b *blocks) fill(I int) {
	r := b.r
	col := b.col[b.ptr[I]:b.ptr[I+1]]
	val := b.val[b.ptr[I]*r*r : b.ptr[I+1]*r*r]
	k := 0
	b.walkBlocks(r, I, func(J int32) { col[k] = J; k++ })
	for q := range r {
		cols, vals := b.Row(I*r + q)
		k, from := -1, -r // block k begins in column from
		for e, c := range cols {
			for int(c) >= from+r {
				k++
				from = int(col[k]) * r
			}
			val[(k*r+q)*r+int(c)-from] = vals[e]
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
	case 3:
		b.rows3(j.w, j.x, first, last)
	case 4:
		b.rows4(j.w, j.x, first, last)
	case 6:
		b.rows6(j.w, j.x, first, last)
	}
	return first * b.r, last * b.r
}
