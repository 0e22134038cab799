package precond

import (
	"slices"

	"dwindle/engine/linear"
)

// graph is the pattern of A + Aᵀ.
type graph struct{ a, at *linear.CSR }

// visit calls f for the neighbours of v, some twice.
func (g graph) visit(v int32, f func(u int32)) {
	for _, m := range [2]*linear.CSR{g.a, g.at} {
		cols, _ := m.Row(int(v))
		for _, u := range cols {
			f(u)
		}
	}
}

// partition cuts the unknowns into parts of nearly equal size by recursive
// bisection: each set is put in the order of a breadth-first search from a far
// end and cut there. The sets ascend.
func partition(g graph, parts int) [][]int32 {
	n := g.a.NRows
	all := make([]int32, n)
	for i := range all {
		all[i] = int32(i)
	}
	b := &bisection{g: g, of: make([]int32, n), seen: make([]int32, n)}
	b.split(all, parts)
	for _, s := range b.sets {
		slices.Sort(s)
	}
	return b.sets
}

type bisection struct {
	g           graph
	of          []int32 // the set a vertex belongs to now; length n
	seen        []int32 // the search that met it last; length n
	set, search int32
	sets        [][]int32
}

func (b *bisection) split(set []int32, parts int) {
	if parts == 1 {
		b.sets = append(b.sets, set)
		return
	}
	b.set++
	for _, v := range set {
		b.of[v] = b.set
	}
	order := b.order(set)
	half := parts / 2
	cut := len(order) * half / parts
	b.split(order[:cut], half)
	b.split(order[cut:], parts-half)
}

// order returns the set in the order of searches, each started at the last
// vertex of an earlier search through the same component.
func (b *bisection) order(set []int32) []int32 {
	out, far := make([]int32, 0, len(set)), make([]int32, 0, len(set))
	b.search++
	first := b.search
	b.search++
	for _, v := range set {
		if b.seen[v] == first || b.seen[v] == first+1 {
			continue
		}
		far = b.breadth(far[:0], v, first)
		out = b.breadth(out, far[len(far)-1], first+1)
	}
	return out
}

// breadth appends what a search from v reaches within v's set.
func (b *bisection) breadth(out []int32, v, search int32) []int32 {
	from := len(out)
	set := b.of[v]
	b.seen[v] = search
	out = append(out, v)
	for ; from < len(out); from++ {
		b.g.visit(out[from], func(u int32) {
			if b.of[u] == set && b.seen[u] != search {
				b.seen[u] = search
				out = append(out, u)
			}
		})
	}
	return out
}

// widen returns the set with so many layers of neighbours around it,
// ascending. mark is work space of length n, zero before and after.
func (g graph) widen(set []int32, layers int, mark []int32) []int32 {
	out := slices.Clone(set)
	for _, v := range out {
		mark[v] = 1
	}
	from := 0
	for range layers {
		to := len(out)
		for ; from < to; from++ {
			g.visit(out[from], func(u int32) {
				if mark[u] == 0 {
					mark[u] = 1
					out = append(out, u)
				}
			})
		}
	}
	for _, v := range out {
		mark[v] = 0
	}
	slices.Sort(out)
	return out
}

// within returns the principal submatrix of a on the rows, which ascend. place
// is work space of length n, zero before and after.
func within(a *linear.CSR, rows []int32, place []int32) *linear.CSR {
	for k, v := range rows {
		place[v] = int32(k + 1)
	}
	sub := triangle(len(rows), 0)
	for k, v := range rows {
		cols, vals := a.Row(int(v))
		for q, c := range cols {
			if p := place[c]; p > 0 {
				sub.Col, sub.Val = append(sub.Col, p-1), append(sub.Val, vals[q])
			}
		}
		sub.Ptr[k+1] = len(sub.Col)
	}
	for _, v := range rows {
		place[v] = 0
	}
	return sub
}
