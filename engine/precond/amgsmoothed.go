package precond

import (
	"fmt"
	"math"
	"slices"

	"dwindle/engine/linear"
)

// aggregation coarsens by smoothed aggregates. The k near-null vectors of the
// fine level, stored by rows, are represented exactly by the tentative
// prolongation; those of the coarse level follow from it.
type aggregation struct {
	theta float64
	null  []float64 // n·k, the k values of a row next to each other
	k     int
	nodes []int32 // first row of each node, and n; nil where each row is one
}

// newAggregation starts from the given near-null vectors or, without any, from
// the constant of each of the dofs unknowns of a node.
func newAggregation(theta float64, n, dofs int, given [][]float64) (*aggregation, error) {
	dofs = max(dofs, 1)
	if n%dofs != 0 {
		return nil, fmt.Errorf("amg: %d unknowns are not a whole number of nodes of %d", n, dofs)
	}
	for _, vector := range given {
		if len(vector) != n {
			return nil, fmt.Errorf("amg: a near-null vector has %d entries, the system %d unknowns", len(vector), n)
		}
	}
	g := &aggregation{theta: theta, k: max(len(given), 1)}
	if len(given) == 0 {
		g.k = dofs
	}
	g.null = linear.Bulk[float64](n * g.k)
	for i := range n {
		if len(given) == 0 {
			g.null[i*g.k+i%dofs] = 1
		}
		for c, vector := range given {
			g.null[i*g.k+c] = vector[i]
		}
	}
	if g.k > 1 {
		g.nodes = make([]int32, n/dofs+1)
		for node := range g.nodes {
			g.nodes[node] = int32(node * dofs)
		}
	}
	return g, nil
}

// prolongation returns P = (I − ω D⁻¹ A_F) T with the tentative prolongation
// T, the filtered matrix A_F (weak couplings added to its diagonal D) and
// ω = 4/(3 ρ), ρ a bound of the spectral radius of D⁻¹ A_F by row sums. The
// threshold is halved for the next level.
func (g *aggregation) prolongation(a *linear.CSR, diag []float64) *linear.CSR {
	s := &strength{a: a, square: g.theta * g.theta, diag: diag}
	g.theta /= 2
	of, count := g.aggregate(s)
	if count == 0 {
		return nil
	}
	omega := 4 / (3 * s.radius())
	t := g.tentative(of, count)
	if g.k > 1 {
		g.nodes = t.rank
	}
	return linear.ByRows(a.NRows, t.cols(), func(w *linear.RowWork, i int) {
		d, _ := s.filtered(i)
		t.add(w, i, 1-omega)
		cols, vals := a.Row(i)
		for k, c := range cols {
			if s.strong(i, int(c), vals[k]) {
				t.add(w, int(c), -omega/d*vals[k])
			}
		}
	})
}

// aggregate groups the rows, those of a node together. Where nodes have
// several rows, or there are several near-null vectors, all couplings count in
// the smoothing that follows.
func (g *aggregation) aggregate(s *strength) (of []int32, count int) {
	if g.nodes == nil {
		return s.aggregate()
	}
	node := s.nodeOf(g.nodes)
	byNode, count := s.condensed(g.nodes, node).aggregate()
	s.square = 0
	of = make([]int32, len(node))
	for i, j := range node {
		of[i] = byNode[j]
	}
	return of, count
}

// filtered returns the diagonal of row i of A_F and the sum of the sizes of
// its other entries. Where the weak couplings together are not weak, the
// diagonal is kept from vanishing: at the sum of the strong ones, and at a
// quarter of a_ii.
func (s *strength) filtered(i int) (d, sum float64) {
	d = s.diag[i]
	cols, vals := s.a.Row(i)
	for k, c := range cols {
		v := vals[k]
		switch {
		case int(c) == i:
		case s.strong(i, int(c), v):
			sum += math.Abs(v)
		default:
			d += v
		}
	}
	if least := s.diag[i] / 4; d < least {
		d = max(sum, least)
	}
	return d, sum
}

// radius returns the largest row sum of |D⁻¹ A_F|.
func (s *strength) radius() float64 {
	n := s.a.NRows
	largest := make([]float64, (n+relaxRows-1)/relaxRows)
	linear.Parallel(len(largest), func(part int) {
		for i := part * relaxRows; i < min((part+1)*relaxRows, n); i++ {
			d, sum := s.filtered(i)
			largest[part] = max(largest[part], 1+sum/d)
		}
	})
	return slices.Max(largest)
}

// tentative is the prolongation T that is block diagonal over the aggregates,
// with orthonormal columns.
type tentative struct {
	of   []int32   // aggregate of each row, or alone; length n
	rank []int32   // first coarse unknown of each aggregate, and their number
	q    []float64 // n·k: the entries of row i from i·k on, as many as its aggregate has coarse unknowns
	k    int
}

func (t *tentative) cols() int { return int(t.rank[len(t.rank)-1]) }

// add adds f times row i.
func (t *tentative) add(w *linear.RowWork, i int, f float64) {
	j := t.of[i]
	if j < 0 {
		return
	}
	first := t.rank[j]
	for l, v := range t.q[i*t.k : i*t.k+int(t.rank[j+1]-first)] {
		w.Add(first+int32(l), f*v)
	}
}

// tentative cuts the near-null vectors to each aggregate and orthonormalises
// them there by Gram–Schmidt, done twice. The triangular factors become the
// near-null vectors of the coarse level. Vectors that depend on those before
// them within an aggregate are left out there, so that T has full rank.
func (g *aggregation) tentative(of []int32, count int) *tentative {
	start, member := members(of, count)
	t := &tentative{of: of, rank: make([]int32, count+1), q: g.null, k: g.k}
	g.null = make([]float64, 0, count*g.k*g.k)
	factor, column := make([]float64, g.k*g.k), []float64(nil)
	for j := 0; j < count; j++ {
		rows := member[start[j]:start[j+1]]
		if len(rows) > len(column) {
			column = make([]float64, 2*len(rows))
		}
		r := orthonormalise(t.q, rows, g.k, factor, column[:len(rows)])
		t.rank[j+1] = t.rank[j] + int32(r)
		g.null = append(g.null, factor[:r*g.k]...)
	}
	return t
}

// members lists the rows of each aggregate: member[start[j]:start[j+1]].
func members(of []int32, count int) (start []int, member []int32) {
	start = make([]int, count+1)
	for _, j := range of {
		if j >= 0 {
			start[j+1]++
		}
	}
	for j := 0; j < count; j++ {
		start[j+1] += start[j]
	}
	member = make([]int32, start[count])
	next := append([]int(nil), start[:count]...)
	for i, j := range of {
		if j >= 0 {
			member[next[j]] = int32(i)
			next[j]++
		}
	}
	return start, member
}

// orthonormalise replaces the k columns of b on the given rows, stored by
// rows, by an orthonormal basis Q and returns its rank r; factor becomes R
// (r·k by rows) with B = Q R. A column of which less than 1e-8 is left is
// dropped. column is scratch, one value a row.
func orthonormalise(b []float64, rows []int32, k int, factor, column []float64) (rank int) {
	clear(factor)
	for c := 0; c < k; c++ {
		before, left := 0.0, 0.0
		for m, i := range rows {
			column[m] = b[int(i)*k+c]
			before += column[m] * column[m]
		}
		for pass := 0; pass < 2; pass++ {
			for l := 0; l < rank; l++ {
				s := 0.0
				for m, i := range rows {
					s += b[int(i)*k+l] * column[m]
				}
				for m, i := range rows {
					column[m] -= s * b[int(i)*k+l]
				}
				factor[l*k+c] += s
			}
		}
		for _, v := range column {
			left += v * v
		}
		if !(left > 1e-16*before) {
			continue
		}
		norm := math.Sqrt(left)
		for m, i := range rows {
			b[int(i)*k+rank] = column[m] / norm
		}
		factor[rank*k+c] = norm
		rank++
	}
	return rank
}
