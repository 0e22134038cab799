package inspect

// A repeating block is proposed where at least fullBlocks of the places in
// the blocks that are met are taken.
const (
	fullBlocks   = 0.85
	largestBlock = 8
)

// block proposes a repeating block of unknowns that the pattern is made of; nil
// where there is none, or where it is so dense that any block would do.
func (e *exam) block() *Block {
	n := e.f.N
	if float64(len(e.a.Val)) > 0.25*float64(n)*float64(n) {
		return nil
	}
	for k := largestBlock; k >= 2; k-- {
		if n%k != 0 || n < 4*k {
			continue
		}
		if share := e.filled(k); share >= fullBlocks {
			return &Block{Size: k, Share: share}
		}
	}
	return nil
}

// filled is the share of places taken in the k x k blocks that hold an entry.
func (e *exam) filled(k int) float64 {
	blocks := 0
	last := make([]int, e.f.N/k) // the block row that met a block column last, plus one
	for i := range e.f.N {
		cols, _ := e.a.Row(i)
		for _, j := range cols {
			if b := int(j) / k; last[b] != i/k+1 {
				last[b] = i/k + 1
				blocks++
			}
		}
	}
	return float64(len(e.a.Val)) / float64(blocks*k*k)
}
