package direct

import (
	"slices"

	"dwindle/engine/linear"
)

// ReverseCuthillMcKee returns an order that keeps the entries of A + Aᵀ near
// the diagonal: the original row of each place. Each component is numbered breadth first from a row far from its
// middle, neighbours by degree, and the whole is reversed (Cuthill and McKee
// 1969; George 1971).
func ReverseCuthillMcKee(a *linear.CSR) linear.Permutation { return reverseCuthillMcKee(patternOf(a)) }

func reverseCuthillMcKee(g *graph) linear.Permutation {
	n := g.order()
	w := walk{g: g, level: make([]int32, n)}
	for i := range w.level {
		w.level[i] = unseen
	}
	order := make(linear.Permutation, 0, n)
	for i := range int32(n) {
		if w.level[i] == unseen {
			order = w.breadthFirst(order, w.farEnd(i), numbered)
		}
	}
	slices.Reverse(order)
	return order
}

// The levels of rows that no search has reached, and of rows in the order.
const (
	unseen   = -1
	numbered = -2
)

// walk is a breadth-first search.
type walk struct {
	g     *graph
	level []int32 // distance in the search under way, else unseen or numbered
	queue []int32
}

func (w *walk) degree(i int32) int { return len(w.g.neighbours(i)) }

// breadthFirst appends to list what is reached from i, neighbours by degree,
// and leaves level as the mark; a mark of 0 or more is kept as the distance.
func (w *walk) breadthFirst(list []int32, i int32, mark int32) []int32 {
	w.level[i] = mark
	list = append(list, i)
	for k := len(list) - 1; k < len(list); k++ {
		from := len(list)
		for _, j := range w.g.neighbours(list[k]) {
			if w.level[j] == unseen {
				w.level[j] = mark
				if mark >= 0 {
					w.level[j] = w.level[list[k]] + 1
				}
				list = append(list, j)
			}
		}
		slices.SortStableFunc(list[from:], func(x, y int32) int { return w.degree(x) - w.degree(y) })
	}
	return list
}

// farEnd returns a row whose search from i reaches far: it repeats the search
// from a row of least degree in the last level while the depth grows.
func (w *walk) farEnd(i int32) int32 {
	deepest := int32(-1)
	for {
		w.queue = w.breadthFirst(w.queue[:0], i, 0)
		last := w.queue[len(w.queue)-1]
		depth, end := w.level[last], last
		for _, j := range w.queue {
			if w.level[j] == depth && w.degree(j) < w.degree(end) {
				end = j
			}
		}
		for _, j := range w.queue {
			w.level[j] = unseen
		}
		if depth <= deepest {
			return i
		}
		deepest, i = depth, end
	}
}
