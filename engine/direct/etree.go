package direct

import "dwindle/engine/linear"

// eliminationTree returns the parent of each column of the Cholesky factor, −1
// for a root: the row of its first entry below the diagonal (Liu, The role of
// elimination trees in sparse factorization, SIAM J. Matrix Anal. Appl. 11
// (1990)). The order gives the original vertex of each column.
func eliminationTree(g *graph, order linear.Permutation) []int32 {
	n := g.order()
	place := order.Inverse()
	parent, ancestor := make([]int32, n), make([]int32, n)
	for j := range int32(n) {
		parent[j], ancestor[j] = -1, -1
		for _, v := range g.neighbours(order[j]) {
			for i := place[v]; i < j; {
				up := ancestor[i]
				ancestor[i] = j
				if up < 0 {
					parent[i] = j
					break
				}
				if up == j {
					break
				}
				i = up
			}
		}
	}
	return parent
}

// postorder returns the columns of a tree, each after all below it, children
// in ascending order.
func postorder(parent []int32) linear.Permutation {
	n := len(parent)
	head, next := make([]int32, n+1), make([]int32, n) // head[n]: the roots
	for i := range head {
		head[i] = -1
	}
	for j := int32(n) - 1; j >= 0; j-- {
		p := parent[j]
		if p < 0 {
			p = int32(n)
		}
		next[j] = head[p]
		head[p] = j
	}
	out := make(linear.Permutation, 0, n)
	var stack []int32
	for r := head[n]; r >= 0; r = next[r] {
		stack = append(stack, r)
		for len(stack) > 0 {
			v := stack[len(stack)-1]
			if c := head[v]; c >= 0 {
				head[v] = next[c]
				stack = append(stack, c)
				continue
			}
			out = append(out, v)
			stack = stack[:len(stack)-1]
		}
	}
	return out
}

// relabel renumbers a tree by its postorder.
func relabel(parent []int32, post linear.Permutation) []int32 {
	place := post.Inverse()
	out := make([]int32, len(parent))
	for k, j := range post {
		out[k] = -1
		if p := parent[j]; p >= 0 {
			out[k] = place[p]
		}
	}
	return out
}

// columnCounts returns the entries of each column of the factor, diagonal
// included, in nearly linear time: the leaves of each row's subtree are found
// by first descendants, overlaps by least common ancestors (Gilbert, Ng and
// Peyton, SIAM J. Matrix Anal. Appl. 15 (1994) 1075–1091). The order must be a
// postorder of the tree.
func columnCounts(g *graph, order linear.Permutation, parent []int32) []int {
	n := g.order()
	place := order.Inverse()
	count := make([]int, n)
	lowest, last, leaf, set := make([]int32, n), make([]int32, n), make([]int32, n), make([]int32, n)
	for j := range lowest {
		lowest[j], last[j], leaf[j], set[j] = int32(j), -1, -1, int32(j)
	}
	for j := range int32(n) {
		if lowest[j] == j {
			count[j] = 1
		}
		if p := parent[j]; p >= 0 {
			lowest[p] = min(lowest[p], lowest[j])
		}
	}
	for j := range int32(n) {
		p := parent[j]
		if p >= 0 {
			count[p]--
		}
		for _, v := range g.neighbours(order[j]) {
			i := place[v]
			if i <= j {
				continue
			}
			if lowest[j] > last[i] {
				count[j]++
				if leaf[i] >= 0 {
					count[find(set, leaf[i])]--
				}
				leaf[i] = j
			}
			last[i] = j
		}
		if p >= 0 {
			set[j] = p
		}
	}
	for j, p := range parent {
		if p >= 0 {
			count[p] += count[j]
		}
	}
	return count
}

// find returns the root of i and shortens the path to it.
func find(set []int32, i int32) int32 {
	r := i
	for set[r] != r {
		r = set[r]
	}
	for set[i] != r {
		set[i], i = r, set[i]
	}
	return r
}
