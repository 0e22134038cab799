package krylov

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

const (
	ritzRelative = 0.05    // of a Ritz value is the residual at which it is good enough
	ritzFloor    = 0x1p-40 // of the largest Ritz value: one below it has too few digits to be divided by
	ritzRestarts = 10      // most restarts
)

// ritzSpace is how many Lanczos vectors are held for k Ritz vectors.
func ritzSpace(k, n int) int { return min(2*k+20, n) }

// ritz is the Lanczos process for M⁻¹A in the inner product of M with thick
// restarts: V is orthonormal, VᵀM V = I, and T = VᵀA V.
type ritz struct {
	*core
	v, mv [][]float64 // V and M V, m+1 vectors of length n; the same without a preconditioner
	t     []float64   // T by rows, its upper triangle; m x m
	y     []float64   // T of order size, then its eigenvectors as columns
	theta []float64   // and its eigenvalues, rising; length size
	work  []float64   // length 3m
	m     int
	beta  float64 // what the next vector was divided by, 0 where the space is exhausted
	bad   float64 // 0, or what went wrong: not finite, or the cosine of an rᵀM⁻¹r below 0
}

// smallestRitz finds the k smallest Ritz vectors W of M⁻¹A from a random start
// by a Lanczos process of 2k+20 vectors with full orthogonalisation, restarted
// with half of them up to ritzRestarts times. It stops when each residual is
// at most ritzRelative of its Ritz value. That is what deflation asks for: a
// vector of the deflated problem then holds about ritzRelative of the
// eigenvector that was to be taken out. At the end of the restarts it takes
// what is of use.
//
// It returns W and A W, scaled to WᵀA W = I, at most k vectors of length n. bad
// is 0, or not finite where a product was, or below zero where M is indefinite:
// then there are no vectors, and the iteration shows whether it can go on.
func smallestRitz(c *core, k int) (w, aw [][]float64, bad float64) {
	s := newRitz(c, k)
	k = min(k, (s.m+1)/2) // A W takes the place of as many vectors
	for from, restart := 0, 0; ; restart++ {
		size := s.grow(from)
		if s.bad != 0 {
			return nil, nil, s.bad
		}
		if !s.solve(size) {
			return nil, nil, math.NaN()
		}
		k = min(k, size)
		if restart == ritzRestarts || s.beta == 0 || s.good(k) {
			s.combine(s.v, k)
			w, aw = s.finish(k)
			return w, aw, 0
		}
		from = (s.m + k) / 2
		s.restart(from)
	}
}

func newRitz(c *core, k int) *ritz {
	m := ritzSpace(k, c.n)
	s := &ritz{core: c, m: m, v: arrays(m+1, c.n), t: make([]float64, m*m),
		y: make([]float64, m*m), theta: make([]float64, m), work: make([]float64, 3*m)}
	if s.mv = s.v; !c.plain {
		s.mv = arrays(m+1, c.n)
	}
	linear.Uniform(s.mv[0], 1)
	s.normalise(0)
	return s
}

// grow extends the space from its first vectors to m and returns its size,
// less where it is exhausted.
func (s *ritz) grow(from int) int {
	for j := from; j < s.m && s.bad == 0; j++ {
		next := s.mv[j+1]
		s.a.Apply(next, s.v[j]) // the product
		before := linear.Norm2(next)
		if !finite(before) {
			s.bad = before
			break
		}
		if j > from {
			s.orthogonalise(next, j, j-1) // all that is not zero in exact arithmetic
		}
		s.orthogonalise(next, j, 0)
		if j == from {
			s.orthogonalise(next, j, 0)
		}
		if linear.Norm2(next) <= 64*unit*before {
			s.beta = 0
			return j + 1
		}
		s.normalise(j + 1)
	}
	return s.m
}

// orthogonalise subtracts vectors first to j from next and adds the
// coefficients to column j of T.
func (s *ritz) orthogonalise(next []float64, j, first int) {
	for i := first; i <= j; i++ {
		h := linear.Dot(s.v[i], next)
		linear.Axpy(-h, s.mv[i], next)
		s.t[i*s.m+j] += h
	}
}

// normalise makes vector j of V from that of M V, both to unit length in M.
func (s *ritz) normalise(j int) {
	rz := 0.0
	if s.plain {
		rz = linear.Dot(s.v[j], s.v[j])
	} else if rz = s.precondition(s.v[j], s.mv[j]); !(rz > 0) || !finite(rz) { // the preconditioner
		s.bad = rz
		if finite(rz) {
			s.bad = cosine(rz, linear.Norm2(s.v[j]), linear.Norm2(s.mv[j]))
		}
		return
	}
	s.beta = root(rz, s.v[j])
	linear.Scale(s.v[j], 1/s.beta, s.v[j])
	if !s.plain {
		linear.Scale(s.mv[j], 1/s.beta, s.mv[j])
	}
}

// solve finds the Ritz values and vectors of the first vectors.
func (s *ritz) solve(size int) bool {
	s.y, s.theta = s.y[:size*size], s.theta[:size]
	for i := range size {
		copy(s.y[i*size:(i+1)*size], s.t[i*s.m:])
	}
	return spectrum.Symmetric(s.y, s.theta, s.work)
}

// residual returns how far the product of Ritz vector j is from its value
// times it, in the norm of M⁻¹: an eigenvalue lies within it of the value.
func (s *ritz) residual(j int) float64 {
	size := len(s.theta)
	return s.beta * math.Abs(s.y[(size-1)*size+j])
}

// floor is the smallest Ritz value that is told from zero.
func (s *ritz) floor() float64 { return ritzFloor * math.Abs(s.theta[len(s.theta)-1]) }

// good says whether the k smallest Ritz vectors need no better.
func (s *ritz) good(k int) bool {
	for j := range k {
		if s.residual(j) > max(ritzRelative*math.Abs(s.theta[j]), s.floor()) {
			return false
		}
	}
	return true
}

// worth says whether Ritz vector j is of use: its value is told from zero
// (the iteration itself shows what the others are), and its residual
// is below its value (else the eigenvalue it stands for may be any).
func (s *ritz) worth(j int) bool { return s.theta[j] > max(s.floor(), s.residual(j)) }

// restart keeps the first Ritz vectors and the next Lanczos vector.
func (s *ritz) restart(keep int) {
	s.combine(s.v, keep)
	s.v[keep], s.v[s.m] = s.v[s.m], s.v[keep]
	if !s.plain {
		s.combine(s.mv, keep)
		s.mv[keep], s.mv[s.m] = s.mv[s.m], s.mv[keep]
	}
	clear(s.t)
	for j := range keep {
		s.t[j*s.m+j] = s.theta[j]
	}
}

// combine replaces the first vectors of v by the Ritz combinations of all.
func (s *ritz) combine(v [][]float64, keep int) {
	size := len(s.theta)
	row := s.work[:size]
	for at := range v[0] {
		for i := range row {
			row[i] = v[i][at]
		}
		for j := range keep {
			sum := 0.0
			for i, c := range row {
				sum += c * s.y[i*size+j]
			}
			v[j][at] = sum
		}
	}
}

// finish makes those of the first k vectors of V that are of use conjugate,
// with their products.
func (s *ritz) finish(k int) (w, aw [][]float64) {
	for j := range k {
		if !s.worth(j) {
			continue
		}
		v, av := s.v[j], s.v[len(s.v)-1-j]
		s.a.Apply(av, v) // the product
		for i := range w {
			c := linear.Dot(aw[i], v)
			linear.Axpy(-c, w[i], v)
			linear.Axpy(-c, aw[i], av)
		}
		size := math.Sqrt(linear.Dot(v, av))
		if !(size > 0) || !finite(size) {
			continue
		}
		linear.Scale(v, 1/size, v)
		linear.Scale(av, 1/size, av)
		w, aw = append(w, v), append(aw, av)
	}
	return w, aw
}
