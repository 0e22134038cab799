package direct

import (
	"math"

	"dwindle/engine/linear"
)

// MinimumDegree returns an elimination order of low fill for a matrix of the
// pattern of A + Aᵀ: approximate minimum degree on the quotient graph, with
// element absorption, mass elimination and indistinguishable variables
// (Amestoy, Davis and Duff, SIAM J. Matrix Anal. Appl. 17 (1996) 886–905).
// Rows with more than 10·√n neighbours come last.
func MinimumDegree(a *linear.CSR) linear.Permutation { return minimumDegree(patternOf(a), 0) }

// quotient is the quotient graph. A vertex starts as a variable; eliminated,
// it becomes an element, whose list is the variables its column of L reaches.
// A variable keeps the elements it belongs to and the variables it is still
// joined with directly.
type quotient struct {
	n, halo  int       // the last halo vertices are never eliminated
	list     [][]int32 // of a variable: elements, then variables
	elements []int32   // how many of the list are elements
	members  [][]int32 // of an element: its variables; nil if none or absorbed
	weight   []int32   // of an element: variables it stands for
	size     []int32   // variables that a variable stands for; negative while it is in the pivot's list; 0 if gone
	degree   []int32
	into     []int32 // what a vertex was merged into, or −1
	outside  []int   // stamp + |Le \ Lp|
	stamp    int
	queue    buckets
	same     buckets // variables by hash
	hash     []int32
	seen     []int // stamps of the comparison of two lists
	seenNow  int
	left     int     // variables not yet eliminated
	total    int     // variables of all kinds that are not eliminated, halo included
	order    []int32 // pivots
}

// minimumDegree orders all but the last halo vertices, which only count in
// degrees (Pellegrini, Roman and Amestoy 2000).
func minimumDegree(g *graph, halo int) linear.Permutation {
	q := newQuotient(g, halo)
	for q.left > 0 {
		q.eliminate(q.queue.least())
	}
	return q.expand()
}

func newQuotient(g *graph, halo int) *quotient {
	n := g.order()
	ints := func() []int32 { return make([]int32, n) }
	q := &quotient{n: n, halo: halo, list: make([][]int32, n), members: make([][]int32, n), elements: ints(), weight: ints(),
		size: ints(), degree: ints(), into: ints(), hash: ints(), outside: make([]int, n), seen: make([]int, n),
		queue: newBuckets(n), same: newBuckets(n), stamp: 1, left: n - halo, total: n}
	own := append([]int32(nil), g.adj...)
	dense := max(16, int(10*math.Sqrt(float64(n))))
	for i := range int32(n) {
		q.list[i] = own[g.ptr[i]:g.ptr[i+1]:g.ptr[i+1]]
		q.size[i], q.into[i] = 1, -1
		q.degree[i] = int32(len(q.list[i]))
		if int(i) >= n-halo {
			continue
		}
		if len(q.list[i]) > dense {
			q.size[i] = 0
			q.left--
			q.total--
			continue
		}
		q.queue.add(i, q.degree[i])
	}
	return q
}

// eliminate makes the variable p an element and brings its neighbours up to
// date.
func (q *quotient) eliminate(p int32) {
	q.order = append(q.order, p)
	lp, weight := q.gather(p)
	q.count(-q.size[p])
	q.measure(lp)
	for _, i := range lp {
		weight -= q.update(i, p)
	}
	q.mergeSame(lp)
	q.settle(p, lp, weight)
}

// count takes k variables off those left.
func (q *quotient) count(k int32) {
	q.left -= int(k)
	q.total -= int(k)
}

// gather collects the variables next to p, marks them by a negative size, and
// absorbs the elements of p.
func (q *quotient) gather(p int32) (lp []int32, weight int32) {
	q.size[p] = -q.size[p]
	take := func(vars []int32) {
		for _, i := range vars {
			if s := q.size[i]; s > 0 {
				q.size[i] = -s
				weight += s
				lp = append(lp, i)
				q.queue.remove(i)
			}
		}
	}
	list := q.list[p]
	room := len(list)
	for _, e := range list[:q.elements[p]] {
		room += len(q.members[e])
	}
	lp = make([]int32, 0, min(room, int(q.degree[p])+1))
	take(list[q.elements[p]:])
	for _, e := range list[:q.elements[p]] {
		take(q.members[e])
		q.members[e] = nil
	}
	q.list[p] = nil
	return lp, weight
}

// measure computes |Le \ Lp| for each element next to the list of the pivot.
func (q *quotient) measure(lp []int32) {
	q.stamp += q.n + 1
	for _, i := range lp {
		for _, e := range q.list[i][:q.elements[i]] {
			if q.members[e] == nil {
				continue
			}
			if q.outside[e] < q.stamp {
				q.outside[e] = q.stamp + int(q.weight[e])
			}
			q.outside[e] += int(q.size[i]) // sizes are negative here
		}
	}
}

// update rewrites the list of i, which is in the list of the new element p:
// without what is absorbed or reached through p. It returns the size of i if
// nothing else is left and it is eliminated with p, else 0.
func (q *quotient) update(i, p int32) (gone int32) {
	old, kept := q.list[i], q.list[i][:0]
	degree, hash := 0, int(p)
	for _, e := range old[:q.elements[i]] {
		if q.members[e] == nil {
			continue
		}
		beyond := q.outside[e] - q.stamp
		if beyond == 0 { // within Lp
			q.members[e] = nil
			continue
		}
		degree += beyond
		hash += int(e)
		kept = append(kept, e)
	}
	ne := len(kept)
	for _, j := range old[q.elements[i]:] {
		if s := q.size[j]; s > 0 {
			degree += int(s)
			hash += int(j)
			kept = append(kept, j)
		}
	}
	inner := int(i) < q.n-q.halo
	if degree == 0 && inner {
		gone = -q.size[i]
		q.size[i], q.into[i], q.list[i] = 0, p, nil
		q.count(gone)
		return gone
	}
	q.list[i], q.elements[i] = first(kept, ne, p), int32(ne+1)
	q.degree[i] = int32(min(int(q.degree[i]), degree))
	if inner {
		q.hash[i] = int32(hash % q.n)
		q.same.add(i, q.hash[i])
	}
	return 0
}

// first puts element p in front of a list of ne elements and some variables.
func first(list []int32, ne int, p int32) []int32 {
	if ne < len(list) {
		list = append(list, list[ne])
	} else {
		list = list[:ne+1]
	}
	list[ne] = list[0]
	list[0] = p
	return list
}

// mergeSame makes one variable of those with equal lists.
func (q *quotient) mergeSame(lp []int32) {
	for _, i := range lp {
		if q.size[i] == 0 || int(i) >= q.n-q.halo {
			continue
		}
		h := q.hash[i]
		for x := q.same.head[h]; x >= 0; x = q.same.next[x] {
			q.mergeInto(x)
		}
		q.same.head[h] = -1
	}
}

// mergeInto merges into x what follows it in its bucket and is equal to it.
func (q *quotient) mergeInto(x int32) {
	if q.same.next[x] < 0 {
		return
	}
	q.seenNow++
	for _, v := range q.list[x] {
		q.seen[v] = q.seenNow
	}
	last := x
	for y := q.same.next[x]; y >= 0; y = q.same.next[y] {
		if !q.equal(x, y) {
			last = y
			continue
		}
		q.size[x] += q.size[y]
		q.size[y], q.into[y], q.list[y] = 0, x, nil
		q.same.next[last] = q.same.next[y]
	}
}

// equal reports whether the lists of x, whose entries are stamped, and y agree.
func (q *quotient) equal(x, y int32) bool {
	if len(q.list[x]) != len(q.list[y]) || q.elements[x] != q.elements[y] {
		return false
	}
	for _, v := range q.list[y] {
		if q.seen[v] != q.seenNow {
			return false
		}
	}
	return true
}

// settle restores the sizes of what is left of the list of p and queues it by
// its new degree.
func (q *quotient) settle(p int32, lp []int32, weight int32) {
	kept := lp[:0]
	for _, i := range lp {
		if q.size[i] == 0 {
			continue
		}
		s := -q.size[i]
		q.size[i] = s
		q.degree[i] = max(0, min(q.degree[i]+weight-s, int32(q.total)-s))
		kept = append(kept, i)
		if int(i) < q.n-q.halo {
			q.queue.add(i, q.degree[i])
		}
	}
	q.size[p], q.weight[p] = 0, weight
	if len(kept) > 0 {
		q.members[p] = kept
	}
}

// expand lists the pivots, each followed by what was merged into it, and then
// the dense rows.
func (q *quotient) expand() linear.Permutation {
	merged := newBuckets(q.n)
	pivot := make([]bool, q.n)
	for _, p := range q.order {
		pivot[p] = true
	}
	for i := int32(q.n) - 1; i >= 0; i-- {
		if q.into[i] >= 0 {
			merged.push(i, q.into[i])
		}
	}
	out := make(linear.Permutation, 0, q.n-q.halo)
	var stack []int32
	for _, p := range q.order {
		stack = append(stack[:0], p)
		for len(stack) > 0 {
			v := stack[len(stack)-1]
			stack = stack[:len(stack)-1]
			out = append(out, v)
			for c := merged.head[v]; c >= 0; c = merged.next[c] {
				stack = append(stack, c)
			}
		}
	}
	for i := range int32(q.n - q.halo) {
		if !pivot[i] && q.into[i] < 0 {
			out = append(out, i)
		}
	}
	return out
}
