package linear

import "fmt"

const (
	rowsOfPart  = 1 << 14 // rows (or block rows) of one part when a second form is built
	sampleRows  = 512     // block rows that are looked at to foretell a form
	worthwhile  = 0.85    // a second form must move at most this share of the bytes
	formOfRows  = "rows"
	entryBytes  = 12 // value and column index of an entry in rows
	vectorBytes = 16 // what a product reads of x and writes of dst, per row
)

// Storage is the ability to tell how an operator's products are stored.
type Storage interface {
	Form() string      // such as "rows", "diagonals", "half of the diagonals", "3x3 blocks"
	ExtraBytes() int64 // memory beside the rows, 0 for plain rows
}

// Form names plain rows.
func (a *CSR) Form() string { return formOfRows }

// ExtraBytes is 0: rows are the first form.
func (a *CSR) ExtraBytes() int64 { return 0 }

func formDiagonals(half bool) string {
	if half {
		return "half of the diagonals"
	}
	return "diagonals"
}

func formBlocks(r int) string { return fmt.Sprintf("%dx%d blocks", r, r) }

// Plan is the form foreseen for a matrix, before it is allocated.
type Plan struct {
	Form    string
	Product int64 // bytes a product must move once: the matrix, x and dst
	Extra   int64 // bytes of memory beside the rows
	build   func() Operator
}

// Build makes the form, in parallel; its products differ from those of the
// rows by rounding only. Where a matrix that was foreseen symmetric turns out
// not to be, the rows come back.
func (p Plan) Build() Operator { return p.build() }

// Fastest returns a with a second form for its products where that pays, else
// a itself; see Foresee. What comes back answers As for all that a can do.
func Fastest(a *CSR) Operator { return Foresee(a).Build() }

// Foresee chooses the form by the bytes that a product must move, since
// products wait for memory. Rows move 12 bytes an entry and 8 a row;
// diagonals, if there are at most 64, move 8 a row and diagonal, and of an
// exactly symmetric matrix only those at and above the main one; r×r blocks
// move 8 a place and 4 a block. x and dst add 16 a row to each. A second form
// is chosen where it moves at most 85 % of the bytes of the rows, the fewest
// first; the choice depends on the matrix alone.
func Foresee(a *CSR) Plan {
	best := Plan{Form: formOfRows, Product: a.Bytes() + vectorBytes*int64(a.NRows), build: func() Operator { return a }}
	if a.NRows != a.NCols || a.NRows == 0 {
		return best
	}
	rows := best.Product
	for _, p := range []Plan{a.foreseeDiagonals(), a.foreseeBlocks()} {
		if p.build != nil && float64(p.Product) <= worthwhile*float64(rows) && p.Product < best.Product {
			best = p
		}
	}
	return best
}

// foreseeDiagonals plans storage by diagonals; empty where there are too many.
func (a *CSR) foreseeDiagonals() Plan {
	offs := a.offsets()
	if offs == nil {
		return Plan{}
	}
	n := int64(a.NRows)
	stored, half := len(offs), false
	if balanced(offs) && a.seemsSymmetric() {
		stored, half = (len(offs)+1)/2, true
	}
	extra := 8 * n * int64(stored)
	return Plan{Form: formDiagonals(half), Extra: extra, Product: extra + vectorBytes*n,
		build: func() Operator {
			if half {
				return byHalf(a, offs)
			}
			return byDiagonals(a, offs)
		}}
}

// balanced says whether with each offset its opposite is in the rising list.
func balanced(offs []int) bool {
	for k, off := range offs {
		if offs[len(offs)-1-k] != -off {
			return false
		}
	}
	return true
}

// foreseeBlocks plans storage by the blocks that move the fewest bytes; empty
// where no order divides that of a. A sample of the rows picks the order, and
// where it promises enough the blocks are counted.
func (a *CSR) foreseeBlocks() Plan {
	best, bestBytes := 0, worthwhile*entryBytes
	for _, r := range blockSizes {
		if a.NRows%r != 0 {
			continue
		}
		count, entries := a.sampleBlocks(r, max(1, a.NRows/r/sampleRows))
		if perEntry := float64(count*(8*r*r+4)) / float64(max(entries, 1)); perEntry < bestBytes {
			best, bestBytes = r, perEntry
		}
	}
	if best == 0 {
		return Plan{}
	}
	ptr := a.countBlocks(best)
	extra := int64(ptr[len(ptr)-1])*int64(8*best*best+4) + 8*int64(len(ptr))
	return Plan{Form: formBlocks(best), Extra: extra, Product: extra + vectorBytes*int64(a.NRows),
		build: func() Operator { return byBlocks(a, best, ptr) }}
}

// eachRow calls do(0), …, do(rows−1) on the thread team.
func eachRow(rows int, do func(i int)) {
	Parallel((rows+rowsOfPart-1)/rowsOfPart, func(p int) {
		for i := p * rowsOfPart; i < min((p+1)*rowsOfPart, rows); i++ {
			do(i)
		}
	})
}
