package prepare

import (
	"context"
	"fmt"
	"math"

	"dwindle/engine/linear"
)

// matching assigns to each column a row such that the sum of the costs
// c_ij = log(largest of column j) − log|a_ij| is least, by shortest augmenting
// paths with dual variables u_i + v_j ≤ c_ij, equal where matched. Costs are
// by columns.
type matching struct {
	ptr     []int
	row     []int32
	cost    []float64
	top     []float64 // log of the largest entry of each column
	u, v    []float64 // duals of rows and columns
	colOf   []int32   // column of each row, −1 if free
	at      []int     // position of the matched entry of each column, −1 if free
	dist    []float64 // of each row in the search under way
	from    []int     // position of the entry a row was reached by
	col     []int32   // column of that entry
	state   []int8
	touched []int32
	near    distances
}

// The states of a row in a search.
const (
	untouched = iota
	waiting
	settled
)

func newMatching(a *linear.CSR) *matching {
	n := a.NRows
	at := a.Transpose()
	m := &matching{ptr: make([]int, n+1), top: make([]float64, n), u: make([]float64, n), v: make([]float64, n),
		colOf: make([]int32, n), at: make([]int, n), dist: make([]float64, n), from: make([]int, n), col: make([]int32, n),
		state: make([]int8, n)}
	for j := range n {
		rows, vals := at.Row(j)
		top := math.Log(linear.NormInf(vals))
		for k, i := range rows {
			if vals[k] != 0 {
				m.row, m.cost = append(m.row, i), append(m.cost, top-math.Log(math.Abs(vals[k])))
			}
		}
		m.ptr[j+1], m.top[j], m.at[j], m.colOf[j] = len(m.row), top, -1, -1
	}
	m.start()
	return m
}

// start makes the duals as large as the costs allow, row by row and then
// column by column, and matches what is tight and free.
func (m *matching) start() {
	for i := range m.u {
		m.u[i] = math.Inf(1)
	}
	for k, i := range m.row {
		m.u[i] = min(m.u[i], m.cost[k])
	}
	for j := range m.v {
		best, free := math.Inf(1), -1
		for k := m.ptr[j]; k < m.ptr[j+1]; k++ {
			switch slack := m.cost[k] - m.u[m.row[k]]; {
			case slack < best:
				best, free = slack, -1
				fallthrough
			case slack == best && free < 0:
				if m.colOf[m.row[k]] < 0 {
					free = k
				}
			}
		}
		if m.v[j] = best; free >= 0 {
			m.at[j], m.colOf[m.row[free]] = free, int32(j)
		}
	}
}

// run matches the columns that are left.
func (m *matching) run(ctx context.Context) error {
	for j := range m.at {
		if j%64 == 0 && ctx.Err() != nil {
			return ctx.Err()
		}
		if m.at[j] >= 0 {
			continue
		}
		end, length := m.search(int32(j))
		if end < 0 {
			return fmt.Errorf("match finds no diagonal without zeros: the matrix is structurally singular, column %d has no row left", j+1)
		}
		m.augment(int32(j), end, length)
	}
	return nil
}

// search finds the shortest path, in reduced costs, from column j to a free
// row (Dijkstra 1959). It returns the row, or −1, and the length.
func (m *matching) search(j int32) (end int32, length float64) {
	end, length = -1, math.Inf(1)
	m.touched, m.near = m.touched[:0], m.near[:0]
	here := 0.0
	for {
		for k := m.ptr[j]; k < m.ptr[j+1]; k++ {
			i := m.row[k]
			d := here + max(0, m.cost[k]-m.u[i]-m.v[j])
			if m.state[i] == settled || d >= length || m.state[i] == waiting && d >= m.dist[i] {
				continue
			}
			if m.state[i] == untouched {
				m.touched = append(m.touched, i)
			}
			m.state[i], m.dist[i], m.from[i], m.col[i] = waiting, d, k, j
			if m.colOf[i] < 0 {
				end, length = i, d
			} else {
				m.near.push(d, i)
			}
		}
		i := m.next()
		if i < 0 || m.dist[i] >= length {
			return end, length
		}
		m.state[i] = settled
		j, here = m.colOf[i], m.dist[i]
	}
}

// next takes the nearest waiting row, −1 if there is none.
func (m *matching) next() int32 {
	for len(m.near) > 0 {
		if d, i := m.near.pop(); m.state[i] == waiting && d == m.dist[i] {
			return i
		}
	}
	return -1
}

// augment brings the duals up to date and exchanges matched and unmatched
// along the path that ends in row end.
func (m *matching) augment(root, end int32, length float64) {
	var settledCols []int32
	for _, i := range m.touched {
		if m.state[i] == settled {
			m.u[i] += m.dist[i] - length
			settledCols = append(settledCols, m.colOf[i])
		}
		m.state[i] = untouched
	}
	for i := end; ; {
		j := m.col[i]
		before := m.at[j]
		m.at[j], m.colOf[i] = m.from[i], j
		if j == root {
			break
		}
		i = m.row[before]
	}
	for _, j := range append(settledCols, root) {
		m.v[j] = m.cost[m.at[j]] - m.u[m.row[m.at[j]]]
	}
}

// result returns the row for each place of the diagonal and the scalings of
// rows and columns, by A's numbers.
func (m *matching) result() (q linear.Permutation, row, col []float64) {
	q = make(linear.Permutation, len(m.at))
	logs := make([]float64, len(m.at))
	for j, k := range m.at {
		q[j] = m.row[k]
		logs[j] = m.v[j] - m.top[j]
	}
	return q, factorsOf(m.u), factorsOf(logs)
}
