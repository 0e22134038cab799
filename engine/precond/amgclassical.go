package precond

import (
	"math"
	"slices"

	"dwindle/engine/linear"
)

// interpolants bounds the entries of a row of the classical prolongation.
const interpolants = 4

// classical coarsens by a subset C of the fine unknowns. Row i depends on j
// where −a_ij ≥ θ max_k −a_ik.
type classical struct{ theta float64 }

// fine marks an unknown that is not a coarse one.
const fine = -1

// split is a choice of coarse unknowns.
type split struct {
	a     *linear.CSR
	limit []float64 // least −a_ij on which row i depends; +Inf if on none; length n
	name  []int32   // number of each unknown on the coarse level, or fine; length n
	count int       // coarse unknowns
}

// prolongation returns the extended interpolation from the coarse unknowns,
// cut to few entries a row.
func (c *classical) prolongation(a *linear.CSR, diag []float64) *linear.CSR {
	s := &split{a: a, limit: linear.Bulk[float64](a.NRows), name: linear.Bulk[int32](a.NRows)}
	s.findLimits(c.theta)
	s.choose()
	return linear.ByRows(a.NRows, s.count, func(w *linear.RowWork, i int) {
		if s.name[i] != fine {
			w.Add(s.name[i], 1)
			return
		}
		s.reach(w, i)
		s.interpolate(w, i, diag[i])
		w.Largest(interpolants)
	})
}

func (s *split) findLimits(theta float64) {
	n := s.a.NRows
	linear.Parallel((n+relaxRows-1)/relaxRows, func(part int) {
		for i := part * relaxRows; i < min((part+1)*relaxRows, n); i++ {
			most := 0.0
			cols, vals := s.a.Row(i)
			for k, v := range vals {
				if int(cols[k]) != i {
					most = max(most, -v)
				}
			}
			s.limit[i] = theta * most
			if most == 0 {
				s.limit[i] = math.Inf(1)
			}
		}
	})
}

// depends says whether row i depends on another unknown by a_ij = v.
func (s *split) depends(i int, v float64) bool { return v < 0 && -v >= s.limit[i] }

// choose picks the coarse unknowns: in the order of how many rows depend on
// them, ties drawn by lot, each one still free becomes coarse and those that
// depend on it fine. That is the outcome of the parallel modified independent
// set algorithm (De Sterck, Yang and Heys, SIAM J. Matrix Anal. Appl. 27 (2006)
// 1019–1039). A is taken as symmetric: a_ji for a_ij.
func (s *split) choose() {
	const free = -2
	for i := range s.name {
		s.name[i] = free
	}
	for _, key := range s.order() {
		i := int(uint32(key))
		if s.name[i] != free {
			continue
		}
		if key>>56 == noneDepends {
			s.name[i] = fine
			continue
		}
		s.name[i] = 0
		cols, vals := s.a.Row(i)
		for k, j := range cols {
			if s.name[j] == free && s.depends(int(j), vals[k]) {
				s.name[j] = fine
			}
		}
	}
	for i, name := range s.name {
		if name != fine {
			s.name[i] = int32(s.count)
			s.count++
		}
	}
}

// noneDepends is the leading byte of the key of an unknown on which no row
// depends.
const noneDepends = 255

// order returns the unknowns as keys, ascending: 255 less the count of rows
// that depend on it, a lot, the number.
func (s *split) order() []uint64 {
	keys := make([]uint64, s.a.NRows)
	for i := range keys {
		depend := uint64(0)
		cols, vals := s.a.Row(i)
		for k, j := range cols {
			if int(j) != i && s.depends(int(j), vals[k]) {
				depend++
			}
		}
		keys[i] = (noneDepends-min(depend, noneDepends))<<56 | lot(uint32(i))<<32 | uint64(i)
	}
	slices.Sort(keys)
	return keys
}

// lot returns 24 bits that look random (the finaliser of MurmurHash3).
func lot(i uint32) uint64 {
	i ^= i >> 16
	i *= 0x85ebca6b
	i ^= i >> 13
	i *= 0xc2b2ae35
	i ^= i >> 16
	return uint64(i >> 8)
}

// reach enters the columns of row i: the coarse unknowns it depends on, and
// those its fine neighbours depend on.
func (s *split) reach(w *linear.RowWork, i int) {
	cols, vals := s.a.Row(i)
	for k, j := range cols {
		switch {
		case int(j) == i || !s.depends(i, vals[k]):
		case s.name[j] != fine:
			w.Add(s.name[j], 0)
		default:
			far, values := s.a.Row(int(j))
			for l, m := range far {
				if s.name[m] != fine && s.depends(int(j), values[l]) {
					w.Add(s.name[m], 0)
				}
			}
		}
	}
}

// interpolate fills row i of the extended interpolation, "extended+i" of De
// Sterck, Falgout, Nolting and Yang (2008), equations 4.10 and 4.11:
//
//	w_ij = −(a_ij + Σ_k a_ik ā_kj/s_k)/d,  s_k = Σ_{l ∈ Ĉ ∪ {i}} ā_kl
//	d = a_ii + Σ_{weak n} a_in + Σ_k a_ik ā_ki/s_k
//
// over the columns Ĉ entered before and the fine k that row i depends on; ā is
// a without its positive off-diagonal entries.
func (s *split) interpolate(w *linear.RowWork, i int, d float64) {
	diag := d
	cols, vals := s.a.Row(i)
	for k, j := range cols {
		v := vals[k]
		switch {
		case int(j) == i:
		case s.name[j] != fine && w.Has(s.name[j]):
			w.Add(s.name[j], v)
		case s.name[j] == fine && s.depends(i, v):
			d += s.through(w, int(j), i, v)
		default:
			d += v
		}
	}
	if !(d > diag/1024) {
		d = diag // nothing sensible is left: keep the row bounded
	}
	w.Scale(-1 / d)
}

// through distributes a_ik = v over what row k interpolates from, and returns
// the part that comes back to i.
func (s *split) through(w *linear.RowWork, k, i int, v float64) float64 {
	cols, vals := s.a.Row(k)
	sum := 0.0
	for l, m := range cols {
		if vals[l] < 0 && (int(m) == i || s.name[m] != fine && w.Has(s.name[m])) {
			sum += vals[l]
		}
	}
	if sum == 0 {
		return v
	}
	back := 0.0
	for l, m := range cols {
		switch {
		case !(vals[l] < 0):
		case int(m) == i:
			back += v * vals[l] / sum
		case s.name[m] != fine && w.Has(s.name[m]):
			w.Add(s.name[m], v*vals[l]/sum)
		}
	}
	return back
}
