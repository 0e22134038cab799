package load

const (
	firstChunk = 1 << 10 // entries
	chunkLen   = 1 << 16 // entries
)

// triplets holds entries in file order, in pieces that are never copied: the
// memory taken is what the entries need and at most one piece more.
type triplets struct {
	bare   bool // entries are added without values
	pieces []piece
	n      int // entries
}

// piece is a run of entries, zero-based.
type piece struct {
	row, col []int32
	val      []float64 // length len(row), or nil: each is 1
}

// add appends an entry; expect is how many are still to come, this one
// included, as far as the file says.
func (t *triplets) add(row, col int32, val float64, expect int) {
	k := len(t.pieces) - 1
	if k < 0 || len(t.pieces[k].row) == cap(t.pieces[k].row) {
		size := chunkLen
		if k < 6 {
			size = firstChunk << (k + 1)
		}
		t.grow(max(min(size, expect), 1))
		k++
	}
	p := &t.pieces[k]
	p.row, p.col = append(p.row, row), append(p.col, col)
	if !t.bare {
		p.val = append(p.val, val)
	}
	t.n++
}

func (t *triplets) grow(size int) {
	p := piece{row: make([]int32, 0, size), col: make([]int32, 0, size)}
	if !t.bare {
		p.val = make([]float64, 0, size)
	}
	t.pieces = append(t.pieces, p)
}

// each calls visit for every entry in file order, until it returns false.
func (t *triplets) each(visit func(k int, row, col int32, val float64) bool) {
	k := 0
	for _, p := range t.pieces {
		for i, r := range p.row {
			v := 1.0
			if p.val != nil {
				v = p.val[i]
			}
			if !visit(k, r, p.col[i], v) {
				return
			}
			k++
		}
	}
}
