package linear

import "unsafe"

const (
	farFrom   = 32  // from here on the rows between are worth a pass of their own
	bandBlock = 512 // rows solved at a time, so that they stay in the nearest cache
)

// Bands is a strictly lower triangular matrix L stored by its diagonals, for
// triangular systems: no column is looked up, what lies far from the diagonal
// is subtracted with vector instructions, and the row before, which each row
// waits for, never leaves its register. Values are stored as T; the arithmetic
// is in double.
type Bands[T Stored] struct {
	n     int
	next  []T       // entry (i, i−1) at place i, length n; nil where there is none
	far   []band[T] // the other diagonals, farthest first
	block int       // rows solved at a time: at most the least far distance
}

// band is the diagonal at distance d below the main one.
type band[T Stored] struct {
	d int
	v []T // entry (i, i−d) at place i, 0 for i < d; length n
}

// BandsOf stores a strictly lower triangular matrix by its diagonals, or the
// transpose of a strictly upper triangular one, each value rounded to T. It
// returns nil where the rows are better: where there are many diagonals, or some
// mostly empty, or some at distances from 2 to 31.
func BandsOf[T Stored](t *CSR) *Bands[T] {
	if t.nearby() {
		return nil // spares most others a look at every row
	}
	offs := t.offsets()
	if len(offs) == 0 || offs[0] <= 0 && offs[len(offs)-1] >= 0 {
		return nil
	}
	if bytes := sizeOf[T]() * int64(len(offs)*t.NRows); float64(bytes) > worthwhile*float64(RowsBytes[T](t.NRows, t.Entries())) {
		return nil
	}
	b := &Bands[T]{n: t.NRows, block: bandBlock}
	for k := range offs {
		d := offs[len(offs)-1-k] // the farthest first
		if offs[0] < 0 {
			d = -offs[k]
		}
		if d > 1 && d < farFrom {
			return nil
		}
		if d > 1 {
			b.far, b.block = append(b.far, band[T]{d: d}), min(b.block, d)
		}
	}
	if len(b.far) < len(offs) {
		b.next = Bulk[T](b.n)
	}
	b.fill(t)
	return b
}

// nearby says whether one of some rows in the middle has an entry neither next
// to the diagonal nor far from it.
func (a *CSR) nearby() bool {
	for i := a.NRows / 2; i < min(a.NRows/2+farFrom, a.NRows); i++ {
		cols, _ := a.Row(i)
		for _, c := range cols {
			if d := max(i-int(c), int(c)-i); d > 1 && d < farFrom {
				return true
			}
		}
	}
	return false
}

// Bytes returns the memory of the diagonals.
func (b *Bands[T]) Bytes() int64 { return sizeOf[T]() * int64(len(b.next)+b.n*len(b.far)) }

// RowsBytes returns the memory of so many entries in n compressed rows, with
// values stored as T.
func RowsBytes[T Stored](n, entries int) int64 {
	return int64(entries)*(4+sizeOf[T]()) + int64(n+1)*8
}

func sizeOf[T Stored]() int64 {
	var value T
	return int64(unsafe.Sizeof(value))
}

// fill takes the entries of t, at (i, j) or at (j, i).
func (b *Bands[T]) fill(t *CSR) {
	for k := range b.far {
		b.far[k].v = Bulk[T](b.n)
	}
	eachRow(b.n, func(i int) {
		cols, vals := t.Row(i)
		for e, c := range cols {
			row, d := i, i-int(c)
			if d < 0 {
				row, d = int(c), -d
			}
			if d == 1 {
				b.next[row] = T(vals[e])
				continue
			}
			k := 0
			for b.far[k].d != d {
				k++
			}
			b.far[k].v[row] = T(vals[e])
		}
	})
}
