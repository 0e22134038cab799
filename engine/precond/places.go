package precond

import "math/bits"

// places is a set of numbers below n that is emptied from the least upwards; a
// number that is added meanwhile is larger than the last one taken out. It has
// a bit for each number, and above them two layers with a bit for each word of
// the layer below that may hold one.
type places struct {
	bit, word, page []uint64 // 64, 64² and 64³ numbers an element
	at              int      // no element of bit before this one holds a number
}

func newPlaces(n int) *places {
	size := func(n int) int { return n/64 + 1 }
	words := size(n)
	return &places{bit: make([]uint64, words), word: make([]uint64, size(words)), page: make([]uint64, size(size(words)))}
}

// add puts x into the set, where it may be already.
func (s *places) add(x int32) {
	q := uint32(x) / 64
	old := s.bit[q]
	s.bit[q] = old | 1<<(uint32(x)%64)
	if old == 0 {
		s.word[q/64] |= 1 << (q % 64)
		s.page[q/64/64] |= 1 << (q / 64 % 64)
	}
}

// pop takes the least number out. It returns −1 where there is none, and the
// next one may be any.
func (s *places) pop() int32 {
	b := s.bit[s.at]
	if b == 0 {
		if !s.advance() {
			return -1
		}
		b = s.bit[s.at]
	}
	s.bit[s.at] = b & (b - 1)
	return int32(64*s.at + bits.TrailingZeros64(b))
}

// advance goes to the next element of bit that holds a number.
func (s *places) advance() bool {
	q := s.at / 64
	s.word[q] &^= 1 << (s.at % 64)
	if s.word[q] == 0 {
		page := q / 64
		s.page[page] &^= 1 << (q % 64)
		for s.page[page] == 0 {
			if page++; page == len(s.page) {
				s.at = 0
				return false
			}
		}
		q = 64*page + bits.TrailingZeros64(s.page[page])
	}
	s.at = 64*q + bits.TrailingZeros64(s.word[q])
	return true
}
