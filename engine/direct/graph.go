package direct

import "dwindle/engine/linear"

// graph is the pattern of a symmetric matrix without its diagonal: the
// neighbours of each vertex, ascending.
type graph struct {
	ptr []int   // length n+1
	adj []int32 // length ptr[n]
}

func (g *graph) order() int { return len(g.ptr) - 1 }

func (g *graph) neighbours(i int32) []int32 { return g.adj[g.ptr[i]:g.ptr[i+1]] }

func (g *graph) maxDegree() int {
	most := 0
	for i := range g.order() {
		most = max(most, g.ptr[i+1]-g.ptr[i])
	}
	return most
}

// patternOf returns the graph of A + Aᵀ. Stored zeros count as absent.
func patternOf(a *linear.CSR) *graph {
	n := a.NRows
	at := transposedPattern(a)
	g := &graph{ptr: make([]int, n+1), adj: make([]int32, 0, len(a.Col))}
	row := make([]int32, 0, 64)
	for i := range n {
		row = row[:0]
		cols, vals := a.Row(i)
		for k, j := range cols {
			if vals[k] != 0 && int(j) != i {
				row = append(row, j)
			}
		}
		g.adj = merge(g.adj, row, at.neighbours(int32(i)))
		g.ptr[i+1] = len(g.adj)
	}
	return g
}

// transposedPattern returns the off-diagonal pattern of Aᵀ by rows.
func transposedPattern(a *linear.CSR) *graph {
	t := &graph{ptr: make([]int, a.NCols+1)}
	each := func(f func(i int, j int32)) {
		for i := range a.NRows {
			cols, vals := a.Row(i)
			for k, j := range cols {
				if vals[k] != 0 && int(j) != i {
					f(i, j)
				}
			}
		}
	}
	each(func(_ int, j int32) { t.ptr[j+1]++ })
	for j := range a.NCols {
		t.ptr[j+1] += t.ptr[j]
	}
	t.adj = make([]int32, t.ptr[a.NCols])
	next := append([]int(nil), t.ptr[:a.NCols]...)
	each(func(i int, j int32) {
		t.adj[next[j]] = int32(i)
		next[j]++
	})
	return t
}

// merge appends the union of two ascending lists.
func merge(dst, x, y []int32) []int32 {
	i, j := 0, 0
	for i < len(x) && j < len(y) {
		switch {
		case x[i] < y[j]:
			dst = append(dst, x[i])
			i++
		case x[i] > y[j]:
			dst = append(dst, y[j])
			j++
		default:
			dst = append(dst, x[i])
			i++
			j++
		}
	}
	dst = append(dst, x[i:]...)
	return append(dst, y[j:]...)
}

// columnGraph returns the graph of AᵀA: columns that share a row. Rows with
// more than dense entries are left out; they would join everything.
func columnGraph(a *linear.CSR, dense int) *graph {
	n := a.NCols
	at := a.Transpose()
	g := &graph{ptr: make([]int, n+1)}
	mark := make([]int32, n)
	for j := range n {
		mark[j] = int32(j + 1)
		rows, vals := at.Row(j)
		for k, i := range rows {
			cols, v := a.Row(int(i))
			if vals[k] == 0 || len(cols) > dense {
				continue
			}
			for q, c := range cols {
				if v[q] != 0 && mark[c] != int32(j+1) {
					mark[c] = int32(j + 1)
					g.adj = append(g.adj, c)
				}
			}
		}
		g.ptr[j+1] = len(g.adj)
	}
	return g
}
