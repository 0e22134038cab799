package load

const (
	firstPiece = 1 << 10 // entries
	pieceLen   = 1 << 16 // entries
)

// triplets holds entries in file order, in pieces that are never copied: the
// memory taken is what the entries need and at most one piece more.
type triplets struct {
	pieces []piece
	n      int // entries
}

// piece is a run of entries.
type piece []entry

// entry is one stored entry, zero-based.
type entry struct {
	row, col int32
	val      float64
}

// add appends an entry; expect is how many are still to come, this one
// included, as far as the file says.
func (t *triplets) add(row, col int32, val float64, expect int) {
	k := len(t.pieces) - 1
	if k < 0 || len(t.pieces[k]) == cap(t.pieces[k]) {
		size := pieceLen
		if k < 6 {
			size = firstPiece << (k + 1)
		}
		t.pieces = append(t.pieces, make(piece, 0, max(min(size, expect), 1)))
		k++
	}
	t.pieces[k] = append(t.pieces[k], entry{row, col, val})
	t.n++
}

// each calls visit for every entry in file order, until it returns false.
func (t *triplets) each(visit func(k int, row, col int32, val float64) bool) {
	k := 0
	for _, p := range t.pieces {
		for _, e := range p {
			if !visit(k, e.row, e.col, e.val) {
				return
			}
			k++
		}
	}
}
