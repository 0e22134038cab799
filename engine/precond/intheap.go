package precond

// intHeap is a binary heap of small numbers, the least on top.
type intHeap []int32

func (h *intHeap) push(x int32) {
	s := append(*h, x)
	i := len(s) - 1
	for i > 0 {
		up := (i - 1) / 2
		if s[up] <= x {
			break
		}
		s[i], i = s[up], up
	}
	s[i] = x
	*h = s
}

func (h *intHeap) pop() int32 {
	s := *h
	top, x := s[0], s[len(s)-1]
	s = s[:len(s)-1]
	*h = s
	if len(s) == 0 {
		return top
	}
	i := 0
	for {
		c := 2*i + 1
		if c >= len(s) {
			break
		}
		if c+1 < len(s) && s[c+1] < s[c] {
			c++
		}
		if s[c] >= x {
			break
		}
		s[i], i = s[c], c
	}
	s[i] = x
	return top
}
