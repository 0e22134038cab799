package precond

import "dwindle/engine/linear"

const (
	batchFull = 1 << 14 // entries and rows of L that are passed on at once
	batches   = 4       // that are under way at most, besides the one being filled
	roomAhead = 1 << 18 // entries of R whose pages are laid before it needs them
)

// lowerRows takes the rows of L as they leave the elimination and stores what
// is kept of them. The elimination never reads L, so that with two threads or
// more a goroutine of its own does this, many rows at a time. It also meets
// the first touch of the memory: of L by storing it, of R by having its pages
// laid ahead of the elimination. What is stored does not depend on any of it.
type lowerRows struct {
	k          *ilutWork
	p          int
	rows       int       // of L that are stored
	sizes      []float64 // work space of largest
	batch      *batch    // being filled
	room, laid int       // entries that R has room for, and whose pages have been asked for
	full, free chan *batch
	done       chan struct{} // closed when all that was passed on is stored; nil before anything was
}

// batch holds rows of L before the largest entries are chosen.
type batch struct {
	ends    []int // where each row ends
	cols    []int32
	vals    []float64
	roomCol []int32   // columns of R whose pages are to be laid
	roomVal []float64 // and values
}

// endRow ends a row whose entries have been appended to the batch.
func (s *lowerRows) endRow() {
	b := s.batch
	b.ends = append(b.ends, len(b.cols))
	if len(b.ends)+len(b.cols) >= batchFull {
		s.pass()
	}
}

// pass has the batch stored and makes an empty one ready.
func (s *lowerRows) pass() {
	if linear.Threads() == 1 {
		s.store(s.batch)
		return
	}
	if s.done == nil {
		s.full, s.free, s.done = make(chan *batch, batches), make(chan *batch, batches), make(chan struct{})
		for range batches {
			s.free <- &batch{}
		}
		go s.work()
	}
	s.lookAhead(s.batch)
	s.full <- s.batch
	s.batch = <-s.free
}

// lookAhead asks for the pages of R that will be filled next.
func (s *lowerRows) lookAhead(b *batch) {
	r := s.k.f.upper
	if cap(r.Col) != s.room {
		s.room, s.laid = cap(r.Col), 0
	}
	from, to := max(len(r.Col), s.laid), min(len(r.Col)+roomAhead, s.room)
	if to-from >= batchFull {
		b.roomCol, b.roomVal = r.Col[from:to], r.Val[from:to]
		s.laid = to
	}
}

// work stores what is passed on until no more comes.
func (s *lowerRows) work() {
	for b := range s.full {
		linear.Touch(b.roomCol)
		linear.Touch(b.roomVal)
		b.roomCol, b.roomVal = nil, nil
		s.store(b)
		s.free <- b
	}
	close(s.done)
}

// store appends the rows of a batch to L and empties it.
func (s *lowerRows) store(b *batch) {
	start := 0
	for _, end := range b.ends {
		cols, vals := b.cols[start:end], b.vals[start:end]
		var n int
		s.sizes, n = largest(cols, vals, s.p, s.sizes)
		appendRow(s.k.f.lower, s.rows, cols[:n], vals[:n])
		s.rows++
		start = end
	}
	b.ends, b.cols, b.vals = b.ends[:0], b.cols[:0], b.vals[:0]
}

// stop waits until all that was passed on is stored.
func (s *lowerRows) stop() {
	if s.done != nil {
		close(s.full)
		<-s.done
		s.done = nil
	}
}

// finish stores what is left.
func (s *lowerRows) finish() {
	s.stop()
	s.store(s.batch)
}

// appendRow appends row i to t.
func appendRow(t *linear.CSR, i int, cols []int32, vals []float64) {
	makeRoom(t, i, len(cols))
	t.Col, t.Val = append(t.Col, cols...), append(t.Val, vals...)
	t.Ptr[i+1] = len(t.Col)
}
