package direct

import "dwindle/engine/linear"

// Symbolic is what the pattern alone tells of the Cholesky factor of a
// matrix: its shape, its memory and its work, found in nearly linear time and
// O(n) memory. Columns with nearly the same rows form a supernode, stored as
// one dense block.
type Symbolic struct {
	N int
	// Order gives the original row of each column of the factor, a postorder
	// of the elimination tree. Length N.
	Order   linear.Permutation
	Entries int64   // of L, diagonal included, without the zeros that blocks store
	Work    float64 // floating-point operations of the factorisation
	Stack   int64   // bytes needed for a time, beside the factor
	start   []int32 // first column of each supernode, and N
	height  []int   // rows of its block, its own columns included
	up      []int32 // the supernode above, −1 for a root
	stored  int64   // numbers in the blocks
	listed  int64   // rows listed, once a supernode
}

// Analyse predicts the factorisation of a matrix of the pattern of A + Aᵀ in
// the given order.
func Analyse(a *linear.CSR, order linear.Permutation) *Symbolic {
	return analyse(patternOf(a), order)
}

func analyse(g *graph, order linear.Permutation) *Symbolic {
	parent := eliminationTree(g, order)
	post := postorder(parent)
	order, parent = compose(order, post), relabel(parent, post)
	count := columnCounts(g, order, parent)
	s := &Symbolic{N: len(order), Order: order}
	for _, c := range count {
		s.Entries += int64(c)
		s.Work += float64(c) * float64(c)
	}
	s.supernodes(parent, count)
	s.measure()
	return s
}

// Bytes returns the memory of the factor: the blocks, their row lists and the
// order.
func (s *Symbolic) Bytes() int64 {
	return 8*s.stored + 4*s.listed + 4*int64(s.N) + 8*int64(s.N) + 32*int64(len(s.up))
}

// supernodes finds the chains of columns whose rows differ by the diagonal
// alone, and joins a supernode with the one above it that follows where that
// stores few zeros.
func (s *Symbolic) supernodes(parent []int32, count []int) {
	var height, filled []int // filled: true entries
	for j := range int32(s.N) {
		k := len(s.start) - 1
		if j > 0 && parent[j-1] == j && count[j-1] == count[j]+1 {
			filled[k] += count[j]
		} else {
			s.start = append(s.start, j)
			height, filled = append(height, count[j]), append(filled, count[j])
		}
	}
	s.start = append(s.start, int32(s.N))
	s.join(parent, height, filled)
	of := make([]int32, s.N)
	for k := range s.height {
		for j := s.start[k]; j < s.start[k+1]; j++ {
			of[j] = int32(k)
		}
	}
	s.up = make([]int32, len(s.height))
	for k := range s.up {
		s.up[k] = -1
		if p := parent[s.start[k+1]-1]; p >= 0 {
			s.up[k] = of[p]
		}
	}
}

// join goes through the supernodes in order and joins each with those before
// it that hang from it directly.
func (s *Symbolic) join(parent []int32, height, filled []int) {
	ends := s.start[1:]
	start := []int32{}
	k := -1 // the last supernode kept
	for q := range height {
		first, end, h, f := s.start[q], ends[q], height[q], filled[q]
		for k >= 0 && parent[first-1] >= 0 && parent[first-1] < end {
			width, own := int(end-first), int(first-start[k])
			all, tall, full := width+own, own+h, f+filled[k]
			if !worthJoining(all, tall, full) {
				break
			}
			first, h, f = start[k], tall, full
			start = start[:k]
			k--
		}
		k++
		start = append(start, first)
		height[k], filled[k] = h, f
	}
	s.height = height[:k+1]
	s.start = append(start, int32(s.N))
}

// worthJoining says whether a block of so many columns and rows with so many
// true entries below the diagonal is worth its zeros.
func worthJoining(width, height, filled int) bool {
	all := width*height - width*(width-1)/2
	zeros := float64(all-filled) / float64(all)
	switch {
	case width <= 8:
		return zeros < 0.5
	case width <= 32:
		return zeros < 0.2
	}
	return zeros < 0.05
}

// measure adds up the memory of the factor and of the stack of updates.
func (s *Symbolic) measure() {
	held := make([]int64, len(s.up)) // updates that wait for the supernode
	var now, most int64
	for k, m := range s.height {
		w := int(s.start[k+1] - s.start[k])
		s.stored += int64(m) * int64(w)
		s.listed += int64(m)
		own := packed(m - w)
		now += own
		most = max(most, now)
		now -= held[k]
		if p := s.up[k]; p >= 0 {
			held[p] += own
		}
	}
	s.Stack = 8 * most
}

// packed returns the entries of a lower triangle of order r.
func packed(r int) int64 { return int64(r) * int64(r+1) / 2 }
