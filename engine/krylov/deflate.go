package krylov

import "dwindle/engine/linear"

const (
	longest  = 501  // vectors in the longest cycle of gmresdr, the last included
	foldTile = 2048 // rows of the basis that one part of foldRows replaces
	apart    = 0.01 // ‖b − Ax − V ĉ‖ over ‖b − Ax‖ from which the two have parted
)

// deflate opens the next cycle with the harmonic Ritz vectors of the last one
// and its residual, whose measured norm is res. It returns false, with V of no
// more use and r as it was, where that cannot be.
func (s *gmresdr) deflate(res float64) bool {
	m, most := len(s.v)-1, len(s.top)
	if most < 2 {
		return false // a cycle of one vector
	}
	for _, p := range s.p {
		clear(p)
	}
	k := s.harmonic.Smallest(s.f.h, most-1, min(most, m-1), s.top)
	if k == 0 {
		return false
	}
	s.rest()
	if !s.addRest(k) {
		return false
	}
	s.reduce(k)
	s.folds = k + 1
	linear.Parallel((s.n+foldTile-1)/foldTile, s.fold)
	return s.resume(k, res)
}

// rest computes ĉ = c − H̄ y, what the rotations left of c turned back.
func (s *gmresdr) rest() {
	f := &s.f
	clear(s.c)
	copy(s.c[f.k:], f.g[f.k:])
	for i := len(f.rot) - 1; i >= 0; i-- {
		q := f.rot[i]
		rotation{q.i, q.c, -q.s}.turn(s.c)
	}
}

// addRest makes column k of P from ĉ. It returns false where ĉ lies in the
// span of the first k.
func (s *gmresdr) addRest(k int) bool {
	last := s.p[k]
	copy(last, s.c)
	before := short(last, last)
	for range 2 {
		for _, w := range s.p[:k] {
			d := short(w, last)
			for i := range last {
				last[i] -= d * w[i]
			}
		}
	}
	after := short(last, last)
	if !(after > 1e-20*before) {
		return false
	}
	linear.Scale(last, 1/root(after, last), last)
	return true
}

// short returns xᵀy of vectors of a few entries.
func short(x, y []float64) float64 {
	s := 0.0
	for i, v := range x {
		s += v * y[i]
	}
	return s
}

// reduce computes Pᵀ H̄ P_k, column by column where R's columns lay, and Pᵀĉ
// where y lay.
func (s *gmresdr) reduce(k int) {
	m := len(s.v) - 1
	for q, p := range s.top[:k] {
		for i := range s.t {
			s.t[i] = short(p, s.f.h[i*m:])
		}
		col := s.f.r[q]
		clear(col)
		for i := range k + 1 {
			col[i] = short(s.p[i], s.t)
		}
	}
	for i := range k + 1 {
		s.f.y[i] = short(s.p[i], s.c)
	}
}

// foldRows replaces the part's rows of V by those of V P.
func (s *gmresdr) foldRows(part int) {
	var row [longest]float64
	old := row[:len(s.v)]
	for i := part * foldTile; i < min(s.n, (part+1)*foldTile); i++ {
		for j, v := range s.v {
			old[j] = v[i]
		}
		for q, p := range s.p[:s.folds] {
			s.v[q][i] = short(p, old)
		}
	}
}

// resume starts the least-squares problem of the new cycle with its k dense
// columns. It returns false where the measured residual is not V Pᵀĉ.
func (s *gmresdr) resume(k int, res float64) bool {
	f, c := &s.f, s.f.y[:k+1]
	gap := res * res
	for j, cj := range c {
		gap += cj * (cj - 2*linear.Dot(s.v[j], s.r))
	}
	if !(gap <= apart*apart*res*res) {
		return false
	}
	for j := range k {
		linear.Axpy(-linear.Dot(s.v[j], s.v[k]), s.v[j], s.v[k])
	}
	linear.Scale(s.v[k], 1/linear.Norm2(s.v[k]), s.v[k])
	s.opening, s.spent, s.lost = res, false, 1
	f.start()
	copy(f.g, c)
	for range k {
		f.rotate(k + 1)
		f.accept()
	}
	return true
}
