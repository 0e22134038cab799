package load

import (
	"sync"

	"dwindle/engine/linear"
)

// slabLen is how many entries memory is taken for at a time.
const slabLen = 1 << 20

// store hands out pieces to several threads.
type store struct {
	mu     sync.Mutex
	free   []entry
	expect int // entries that pieces are still to be handed out for
}

// piece returns an empty piece with room for n entries.
func (s *store) piece(n int) piece {
	s.mu.Lock()
	defer s.mu.Unlock()
	if n > len(s.free) {
		s.free = linear.Bulk[entry](max(n, min(s.expect, slabLen)))
	}
	p := s.free[:0:n]
	s.free = s.free[n:]
	s.expect -= n
	return p
}
