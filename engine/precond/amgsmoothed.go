package precond

import (
	"math"

	"dwindle/engine/linear"
)

// aggregation coarsens by smoothed aggregates. The k near-null vectors of the
// fine level, stored by rows, are represented exactly by the tentative
// prolongation; those of the coarse level follow from it.
type aggregation struct {
	theta float64
	null  []float64 // n·k, the k values of a row next to each other
	k     int
}

func constants(n int) []float64 {
	one := make([]float64, n)
	for i := range one {
		one[i] = 1
	}
	return one
}

// prolongation returns P = (I − ω D⁻¹ A_F) T with the tentative prolongation
// T, the filtered matrix A_F (weak couplings added to its diagonal D) and
// ω = 4/(3 ρ), ρ a bound of the spectral radius of D⁻¹ A_F by row sums. The
// threshold is halved for the next level.
func (g *aggregation) prolongation(a *linear.CSR, diag []float64) *linear.CSR {
	s := newStrength(a, diag, g.theta)
	g.theta /= 2
	of, count := s.aggregate()
	if count == 0 {
		return nil
	}
	t := g.tentative(of, count)
	filtered, radius := s.filter(diag)
	return s.smooth(t, filtered, 4/(3*radius))
}

// filter returns the diagonal of A_F and the largest row sum of |D⁻¹ A_F|.
func (s *strength) filter(diag []float64) (filtered []float64, radius float64) {
	n := s.a.NRows
	filtered = make([]float64, n)
	parts := (n + relaxRows - 1) / relaxRows
	largest := make([]float64, parts)
	linear.Parallel(parts, func(part int) {
		for i := part * relaxRows; i < min((part+1)*relaxRows, n); i++ {
			d, sum := diag[i], 0.0
			cols, vals := s.a.Row(i)
			for k, c := range cols {
				if int(c) == i {
					continue
				}
				if s.strong(i, int(c), vals[k]) {
					sum += math.Abs(vals[k])
				} else {
					d += vals[k]
				}
			}
			if d < diag[i]/4 && d < sum { // the weak couplings are not weak together
				d = max(diag[i]/4, sum)
			}
			filtered[i] = d
			largest[part] = max(largest[part], 1+sum/d)
		}
	})
	for _, r := range largest {
		radius = max(radius, r)
	}
	return filtered, radius
}

// smooth returns (I − ω D⁻¹ A_F) T.
func (s *strength) smooth(t *linear.CSR, filtered []float64, omega float64) *linear.CSR {
	return linear.ByRows(t.NRows, t.NCols, func(w *linear.RowWork, i int) {
		addRow(w, t, i, 1-omega)
		cols, vals := s.a.Row(i)
		f := omega / filtered[i]
		for k, c := range cols {
			if s.strong(i, int(c), vals[k]) {
				addRow(w, t, int(c), -f*vals[k])
			}
		}
	})
}

func addRow(w *linear.RowWork, t *linear.CSR, i int, f float64) {
	cols, vals := t.Row(i)
	for k, c := range cols {
		w.Add(c, f*vals[k])
	}
}

// tentative returns T, block diagonal over the aggregates: the near-null
// vectors cut to each aggregate and orthonormalised by Gram–Schmidt, done
// twice. The triangular factors become the near-null vectors of the coarse
// level. Vectors that depend on those before them within an aggregate are
// left out there, so that T has full rank.
func (g *aggregation) tentative(of []int32, count int) *linear.CSR {
	n, k := len(of), g.k
	start, member := members(of, count)
	rank := make([]int32, count+1) // first coarse unknown of each aggregate
	q := make([]float64, len(g.null))
	coarse := make([]float64, 0, count*k*k)
	for j := 0; j < count; j++ {
		rows := member[start[j]:start[j+1]]
		r, factor := orthonormalise(q, g.null, rows, k)
		rank[j+1] = rank[j] + int32(r)
		coarse = append(coarse, factor[:r*k]...)
	}
	t := &linear.CSR{NRows: n, NCols: int(rank[count]), Ptr: make([]int, n+1)}
	for i, j := range of {
		t.Ptr[i+1] = t.Ptr[i]
		if j >= 0 {
			t.Ptr[i+1] += int(rank[j+1] - rank[j])
		}
	}
	t.Col, t.Val = make([]int32, t.Ptr[n]), make([]float64, t.Ptr[n])
	for i, j := range of {
		for l := 0; l < t.Ptr[i+1]-t.Ptr[i]; l++ {
			t.Col[t.Ptr[i]+l], t.Val[t.Ptr[i]+l] = rank[j]+int32(l), q[i*k+l]
		}
	}
	g.null = coarse
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

// orthonormalise writes an orthonormal basis of the k columns of b on the
// given rows to q and returns its rank r and the factor R (r·k by rows) with
// B = Q R. A column of which less than 1e-8 is left is dropped.
func orthonormalise(q, b []float64, rows []int32, k int) (rank int, factor []float64) {
	factor = make([]float64, k*k)
	column := make([]float64, len(rows))
	for c := 0; c < k; c++ {
		before := 0.0
		for m, i := range rows {
			column[m] = b[int(i)*k+c]
			before += column[m] * column[m]
		}
		for pass := 0; pass < 2; pass++ {
			for l := 0; l < rank; l++ {
				s := 0.0
				for m, i := range rows {
					s += q[int(i)*k+l] * column[m]
				}
				for m, i := range rows {
					column[m] -= s * q[int(i)*k+l]
				}
				factor[l*k+c] += s
			}
		}
		left := 0.0
		for _, v := range column {
			left += v * v
		}
		if !(left > 1e-16*before) {
			continue
		}
		norm := math.Sqrt(left)
		for m, i := range rows {
			q[int(i)*k+rank] = column[m] / norm
		}
		factor[rank*k+c] = norm
		rank++
	}
	return rank, factor
}
