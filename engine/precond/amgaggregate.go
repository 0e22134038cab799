package precond

import "dwindle/engine/linear"

// alone marks a row without strong couplings: the smoother solves it, and it
// belongs to no aggregate.
const alone = -1

// strength says which couplings are followed: a_ij² ≥ θ² a_ii a_jj.
type strength struct {
	a      *linear.CSR
	square float64   // θ²
	diag   []float64 // a_ii, length n
}

// strong says whether the coupling a_ij = v of two rows is followed.
func (s *strength) strong(i, j int, v float64) bool {
	return v*v >= s.square*s.diag[i]*s.diag[j] && i != j && v != 0
}

// aggregate groups the rows around roots (Vaněk, Mandel and Brezina 1996,
// algorithm 5.1). It returns the aggregate of each row, or alone, and their
// number:
//
//  1. in natural order, a row none of whose strong neighbours is taken yet
//     makes an aggregate with all of them;
//  2. a row left over joins the neighbour from 1 it is coupled to most
//     strongly;
//  3. what is left makes aggregates with its untaken neighbours.
func (s *strength) aggregate() (of []int32, count int) {
	n := s.a.NRows
	of = linear.Bulk[int32](n)
	for i := range of {
		of[i] = alone - 1 // not yet looked at
	}
	for i := range of {
		switch linked, free := s.look(of, i); {
		case !linked:
			of[i] = alone
		case free && of[i] < alone:
			s.gather(of, i, int32(count))
			count++
		}
	}
	joins := make([]int32, 0, n/4)
	for i := range of {
		if of[i] < alone {
			if to := s.nearest(of, i); to >= 0 {
				joins = append(joins, int32(i), to)
			}
		}
	}
	for k := 0; k < len(joins); k += 2 {
		of[joins[k]] = joins[k+1]
	}
	for i := range of {
		if of[i] < alone {
			s.gather(of, i, int32(count))
			count++
		}
	}
	return of, count
}

// look says whether row i has a strong neighbour, and whether all are free.
func (s *strength) look(of []int32, i int) (linked, free bool) {
	if of[i] >= 0 {
		return true, false
	}
	cols, vals := s.a.Row(i)
	for k, c := range cols {
		if s.strong(i, int(c), vals[k]) {
			if of[c] >= 0 {
				return true, false
			}
			linked = true
		}
	}
	return linked, linked
}

// gather makes an aggregate of row i and its strong neighbours not yet taken.
func (s *strength) gather(of []int32, i int, name int32) {
	of[i] = name
	cols, vals := s.a.Row(i)
	for k, c := range cols {
		if of[c] < alone && s.strong(i, int(c), vals[k]) {
			of[c] = name
		}
	}
}

// nearest returns the aggregate of the taken neighbour that row i is coupled
// to most strongly, or −1.
func (s *strength) nearest(of []int32, i int) int32 {
	best, to := 0.0, int32(-1)
	cols, vals := s.a.Row(i)
	for k, c := range cols {
		if of[c] >= 0 && s.strong(i, int(c), vals[k]) {
			if share := vals[k] * vals[k] / s.diag[c]; share > best {
				best, to = share, of[c]
			}
		}
	}
	return to
}
