package direct

import (
	"slices"

	"dwindle/engine/linear"
)

const (
	leafSize = 400 // vertices of a region that are ordered by minimum degree
	numbers  = -1  // the region of a vertex that has its place
)

// NestedDissection returns an elimination order of low fill for a matrix of
// the pattern of A + Aᵀ, good on the meshes of two and three dimensions: a
// small set of vertices that parts the graph comes last, and so on within the
// parts (George, SIAM J. Numer. Anal. 10 (1973) 345–363). The separators are
// levels of a breadth-first search (George and Liu 1978), refined by moving
// single vertices; regions of at most 400 vertices are ordered by minimum
// degree with their surroundings in view.
func NestedDissection(a *linear.CSR) linear.Permutation { return nestedDissection(patternOf(a)) }

// dissector holds the state of a dissection.
type dissector struct {
	g      *graph
	region []int32 // of each vertex, numbers once it has its place
	next   int32   // the next region
	level  []int32 // breadth-first distance within a region, or side of a cut
	queue  []int32
	local  []int32 // index within a leaf, −1 outside
	out    linear.Permutation
}

// piece is a region to be ordered: its vertices come just before place end.
type piece struct {
	vertices []int32
	end      int
}

func nestedDissection(g *graph) linear.Permutation {
	n := g.order()
	d := &dissector{g: g, region: make([]int32, n), next: 1, level: make([]int32, n), local: make([]int32, n),
		out: make(linear.Permutation, n)}
	for i := range d.level {
		d.level[i], d.local[i] = unseen, -1
	}
	work := []piece{{linear.Natural(n), n}}
	for len(work) > 0 {
		p := work[len(work)-1]
		work = d.part(work[:len(work)-1], p)
	}
	return d.out
}

// part orders a piece or pushes the pieces it falls into.
func (d *dissector) part(work []piece, p piece) []piece {
	if len(p.vertices) == 0 {
		return work
	}
	if len(p.vertices) <= leafSize {
		d.leaf(p)
		return work
	}
	d.search(p.vertices[0])
	if len(d.queue) < len(p.vertices) {
		d.forget()
		return d.components(work, p)
	}
	depth := d.fromFarEnd()
	c := d.bestLevel(depth)
	if c < 0 {
		d.forget()
		d.leaf(p)
		return work
	}
	return d.split(work, p, c)
}

// search numbers the levels of the region of v, breadth first, in the queue.
func (d *dissector) search(v int32) {
	d.queue = append(d.queue[:0], v)
	d.level[v] = 0
	for k := 0; k < len(d.queue); k++ {
		u := d.queue[k]
		for _, w := range d.g.neighbours(u) {
			if d.level[w] == unseen && d.region[w] == d.region[v] {
				d.level[w] = d.level[u] + 1
				d.queue = append(d.queue, w)
			}
		}
	}
}

// forget takes back the levels of the last search.
func (d *dissector) forget() {
	for _, v := range d.queue {
		d.level[v] = unseen
	}
}

// fromFarEnd repeats the search from the least connected vertex of the last
// level while it goes deeper, and returns the depth.
func (d *dissector) fromFarEnd() int {
	depth := d.level[d.queue[len(d.queue)-1]]
	for {
		end := d.queue[len(d.queue)-1]
		for k := len(d.queue) - 1; k >= 0 && d.level[d.queue[k]] == depth; k-- {
			if v := d.queue[k]; len(d.g.neighbours(v)) < len(d.g.neighbours(end)) {
				end = v
			}
		}
		d.forget()
		d.search(end)
		now := d.level[d.queue[len(d.queue)-1]]
		if now <= depth {
			return int(now)
		}
		depth = now
	}
}

// bestLevel returns the level whose removal parts the region best: the least
// |S|/(|A|·|B|). −1 means that none leaves two parts worth having.
func (d *dissector) bestLevel(depth int) int {
	sizes := make([]int, depth+1)
	for _, v := range d.queue {
		sizes[d.level[v]]++
	}
	best, value, n := -1, 0.0, len(d.queue)
	before := sizes[0]
	for l := 1; l < depth; l++ {
		after := n - before - sizes[l]
		if v := float64(before) * float64(after) / float64(sizes[l]); v > value && sizes[l] < n/2 {
			best, value = l, v
		}
		before += sizes[l]
	}
	return best
}

// split makes pieces of the two sides of a level and orders the separator
// between them last.
func (d *dissector) split(work []piece, p piece, level int) []piece {
	d.sides(level)
	d.refine()
	first := make([]int32, 0, len(p.vertices)/2)
	second, cut := p.vertices[:0], p.vertices[:0:0]
	for _, v := range d.queue {
		switch d.level[v] {
		case sideA:
			first = append(first, v)
		case sideB:
			second = append(second, v)
		default:
			cut = append(cut, v)
		}
	}
	d.forget()
	end := p.end - len(cut)
	slices.Sort(cut)
	copy(d.out[end:p.end], cut)
	for _, v := range cut {
		d.region[v] = numbers
	}
	d.rename(first)
	return append(work, piece{first, end - len(second)}, piece{second, end})
}

// rename makes a region of the vertices.
func (d *dissector) rename(vertices []int32) {
	for _, v := range vertices {
		d.region[v] = d.next
	}
	d.next++
}

// components pushes the connected parts of a piece.
func (d *dissector) components(work []piece, p piece) []piece {
	end := p.end
	own := d.region[p.vertices[0]]
	for _, v := range p.vertices {
		if d.region[v] != own {
			continue
		}
		d.search(v)
		part := slices.Clone(d.queue)
		d.forget()
		d.rename(part)
		work = append(work, piece{part, end})
		end -= len(part)
	}
	return work
}

// leaf orders a region by minimum degree, its surroundings in view.
func (d *dissector) leaf(p piece) {
	all := slices.Clone(p.vertices)
	m := len(all)
	for k, v := range all {
		d.local[v] = int32(k)
	}
	for _, v := range p.vertices {
		for _, w := range d.g.neighbours(v) {
			if d.local[w] < 0 {
				d.local[w] = int32(len(all))
				all = append(all, w)
			}
		}
	}
	g := &graph{ptr: make([]int, 1, len(all)+1)}
	for k, v := range all {
		for _, w := range d.g.neighbours(v) {
			if l := d.local[w]; l >= 0 && (k < m || int(l) < m) {
				g.adj = append(g.adj, l)
			}
		}
		g.ptr = append(g.ptr, len(g.adj))
	}
	for _, v := range all {
		d.local[v] = -1
	}
	for k, l := range minimumDegree(g, len(all)-m) {
		v := all[l]
		d.out[p.end-m+k] = v
		d.region[v] = numbers
	}
}
