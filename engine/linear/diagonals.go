package linear

import (
	"sort"
	"sync/atomic"
)

// maxDiagonals is the most diagonals a matrix is stored by.
const maxDiagonals = 64

// diagonal is one diagonal of a matrix as products use it: row i holds
// v[i+shift] in column i+off.
type diagonal struct {
	off, shift int
	v          []float64 // length n; outside the matrix 0
}

// diagonals is a square matrix with its second form: each diagonal that holds
// an entry as a dense vector. Of an exactly symmetric matrix only those at and
// above the main diagonal are stored, since a_{i,i−d} = a_{i−d,i}.
//
// A row's products are added in order of columns, one after the other.
type diagonals struct {
	*CSR
	list, transposed []diagonal // in order of off
	stored           int        // vectors of length n
	half             bool
}

// offsets returns the offsets j−i of the entries in rising order, or nil when
// there are more than maxDiagonals.
func (a *CSR) offsets() []int {
	parts := (a.NRows + rowsOfPart - 1) / rowsOfPart
	found := make([][]int, parts)
	Parallel(parts, func(p int) {
		var offs []int
		for i := p * rowsOfPart; i < min((p+1)*rowsOfPart, a.NRows) && len(offs) <= maxDiagonals; i++ {
			offs = a.rowOffsets(i, offs)
		}
		found[p] = offs
	})
	var all []int
	for _, offs := range found {
		for _, off := range offs {
			if k := sort.SearchInts(all, off); k == len(all) || all[k] != off {
				all = insert(all, k, off)
			}
		}
		if len(all) > maxDiagonals {
			return nil
		}
	}
	return all
}

// rowOffsets adds the offsets of row i to the rising list.
func (a *CSR) rowOffsets(i int, offs []int) []int {
	k := 0
	for _, c := range a.Col[a.Ptr[i]:a.Ptr[i+1]] {
		off := int(c) - i
		for k < len(offs) && offs[k] < off {
			k++
		}
		if k == len(offs) || offs[k] != off {
			offs = insert(offs, k, off)
		}
		k++
	}
	return offs
}

func insert(s []int, k, v int) []int {
	s = append(s, 0)
	copy(s[k+1:], s[k:])
	s[k] = v
	return s
}

// byDiagonals builds the second form from the rising offsets.
func byDiagonals(a *CSR, offs []int) *diagonals {
	list := fillDiagonals(a, offs)
	return &diagonals{CSR: a, list: list, transposed: mirrored(list), stored: len(list)}
}

// byHalf builds the second form from the diagonals at and above the main one.
// Where a is not exactly symmetric it returns a.
func byHalf(a *CSR, offs []int) Operator {
	above := fillDiagonals(a, offs[sort.SearchInts(offs, 0):])
	if !a.mirrors(above) {
		return a
	}
	strict := above
	if len(above) > 0 && above[0].off == 0 {
		strict = above[1:]
	}
	list := append(mirrored(strict), above...)
	return &diagonals{CSR: a, list: list, transposed: list, stored: len(above), half: true}
}

// fillDiagonals returns the diagonals at the rising offsets.
func fillDiagonals(a *CSR, offs []int) []diagonal {
	list := make([]diagonal, len(offs))
	for k, off := range offs {
		list[k] = diagonal{off: off, v: Bulk[float64](a.NRows)}
	}
	eachRow(a.NRows, func(i int) {
		cols, vals := a.Row(i)
		k := 0
		for e, c := range cols {
			off := int(c) - i
			for k < len(list) && list[k].off < off {
				k++
			}
			if k < len(list) && list[k].off == off {
				list[k].v[i] = vals[e]
			}
		}
	})
	return list
}

// mirrors says whether the entries below the main diagonal are those of the
// rising diagonals above it: each equals its partner, and neither side has
// more that are not 0.
func (a *CSR) mirrors(above []diagonal) bool {
	var surplus, differ atomic.Int64
	eachRow(a.NRows, func(i int) {
		cols, vals := a.Row(i)
		k, more := len(above)-1, int64(0)
		for e, c := range cols {
			off := i - int(c)
			switch {
			case off < 0 && vals[e] != 0:
				more++
			case off > 0:
				for above[k].off > off {
					k--
				}
				if above[k].v[c] != vals[e] {
					differ.Store(1)
				}
				if vals[e] != 0 {
					more--
				}
			}
		}
		if more != 0 {
			surplus.Add(more)
		}
	})
	return differ.Load() == 0 && surplus.Load() == 0
}

// seemsSymmetric looks at a sample of the rows: short runs of them, since
// every second or third row may be of another kind.
func (a *CSR) seemsSymmetric() bool {
	const run = 8
	stride := max(run, a.NRows*run/sampleRows)
	for start := 0; start < a.NRows; start += stride {
		for i := start; i < min(start+run, a.NRows); i++ {
			cols, vals := a.Row(i)
			for e, c := range cols {
				if a.At(int(c), i) != vals[e] {
					return false
				}
			}
		}
	}
	return true
}

// mirrored returns the same diagonals of the transpose, in order of off.
func mirrored(list []diagonal) []diagonal {
	m := make([]diagonal, len(list))
	for k, d := range list {
		m[len(list)-1-k] = diagonal{off: -d.off, shift: -d.off, v: d.v}
	}
	return m
}

// Unwrap returns the rows, for the abilities that need them.
func (d *diagonals) Unwrap() any { return d.CSR }

// Form names the second form.
func (d *diagonals) Form() string { return formDiagonals(d.half) }

// ExtraBytes returns the memory of the second form.
func (d *diagonals) ExtraBytes() int64 { return 8 * int64(d.stored) * int64(d.NRows) }

// Apply computes dst = A x on the thread team.
func (d *diagonals) Apply(dst, x []float64) { applyDiagonals(d.list, dst, x) }

// ApplyT computes dst = Aᵀ x on the thread team.
func (d *diagonals) ApplyT(dst, x []float64) { applyDiagonals(d.transposed, dst, x) }

// ApplyDot computes dst = A x and returns xᵀ dst.
func (d *diagonals) ApplyDot(dst, x []float64) float64 {
	j := begin(diagonalsDotKernel, len(dst))
	j.d, j.x, j.w = d.list, x[:len(dst)], dst
	return j.finishSum()
}

func applyDiagonals(list []diagonal, dst, x []float64) {
	j := begin(diagonalsKernel, len(dst))
	j.d, j.x, j.w = list, x[:len(dst)], dst
	j.finish()
}

func diagonalsKernel(j *job, lo, hi, _ int) { sumDiagonals(j.d, j.w, j.x, lo, hi) }

func diagonalsDotKernel(j *job, lo, hi, block int) {
	sumDiagonals(j.d, j.w, j.x, lo, hi)
	j.part[block] = dot(j.x[lo:hi], j.w[lo:hi])
}

// sumDiagonals computes dst[lo:hi] of A x. The diagonals that meet row i,
// 0 ≤ i+off < n, follow each other in the list; rows that meet the same ones
// are taken together.
func sumDiagonals(list []diagonal, dst, x []float64, lo, hi int) {
	n := len(x)
	var taps [maxDiagonals]tap
	from, to := len(list), len(list) // list[from:to] meet row lo
	for lo < hi {
		for from > 0 && list[from-1].off >= -lo {
			from--
		}
		for to > 0 && list[to-1].off >= n-lo {
			to--
		}
		end := hi
		if from > 0 {
			end = min(end, -list[from-1].off)
		}
		if to > from {
			end = min(end, n-list[to-1].off)
		}
		if to == from {
			clear(dst[lo:end])
		} else {
			for k, d := range list[from:to] {
				taps[k] = tap{d.v[lo+d.shift : end+d.shift], x[lo+d.off : end+d.off]}
			}
			sumTaps(dst[lo:end], taps[:to-from])
		}
		lo = end
	}
}
