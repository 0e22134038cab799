package spectrum

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

// Pair is a Ritz value with its error bound and unit vector.
type Pair struct {
	Value  float64
	Bound  float64   // ‖Av − Value·v‖: an eigenvalue lies within it
	Vector []float64 // length n
}

// Outermost are the ends of the spectrum of a symmetric operator, each from
// the end inwards.
type Outermost struct {
	Low, High []Pair
	Products  int  // taken
	Settled   bool // each bound asked for is at most the tolerance times the largest |value|, or its own
}

// Wanted says which ends of a spectrum are sought, and for how much work.
type Wanted struct {
	Low, High int         // how many values of each end
	Tol       float64     // of the bound, relative to the value itself
	Basis     int         // vectors held at a time, more than Low+High+4
	Products  int         // at most
	Beside    [][]float64 // orthonormal vectors that are left out of account
}

// Ends finds the outermost eigenvalues of a symmetric operator of order n by
// the Lanczos process with full reorthogonalisation, restarted with the Ritz
// vectors of the ends where the basis is full (Wu and Simon, SIAM J. Matrix
// Anal. Appl. 22, 2000). A value of higher multiplicity is found once; the
// others by asking again with its vector Beside. It returns what it has when
// the products are used up, and the context's error when that ends.
func Ends(ctx context.Context, n int, apply func(dst, x []float64), w Wanted) (Outermost, error) {
	w.Basis = min(max(w.Basis, w.Low+w.High+5), n-len(w.Beside))
	if w.Basis < 1 {
		return Outermost{Settled: true}, nil
	}
	b := newBasis(n, apply, w)
	if !b.start() {
		return Outermost{Settled: true}, nil
	}
	for next := 8; ; {
		if err := ctx.Err(); err != nil {
			return Outermost{}, err
		}
		b.extend()
		if b.size < min(next, w.Basis) && !b.closed && b.products < w.Products {
			continue
		}
		next = b.size + max(4, b.size/3)
		if !b.ritz() || b.settled() || b.closed || b.products >= w.Products || b.size == n-len(w.Beside) {
			return b.result(), nil
		}
		if b.size == w.Basis {
			b.restart()
			next = b.size + 8
		}
	}
}

// basis is a Lanczos process under way: A V = V H + β v eᵀ with V orthonormal.
type basis struct {
	Wanted
	apply    func(dst, x []float64)
	n        int
	v        [][]float64 // size+1 vectors of length n
	h        []float64   // Basis x Basis, by rows
	size     int
	beta     float64
	closed   bool // β vanished: the span is invariant
	products int

	values []float64 // of H, rising
	s      []float64 // its unit eigenvectors, by columns: size x size
	work   []float64
}

func newBasis(n int, apply func(dst, x []float64), w Wanted) *basis {
	m := w.Basis
	return &basis{Wanted: w, apply: apply, n: n, h: make([]float64, m*m), s: make([]float64, m*m), work: make([]float64, 3*m)}
}

// start makes the first vector; false where nothing is left beside the ones
// excluded.
func (b *basis) start() bool {
	v := make([]float64, b.n)
	linear.Uniform(v, 0x5eed+uint64(len(b.Beside))<<32) // another one beside others: it must not lie in their span
	b.orthogonalise(v, nil)
	size := linear.Norm2(v)
	if !(size > 1e-10) {
		return false
	}
	linear.Scale(v, 1/size, v)
	b.v = [][]float64{v}
	return true
}

// orthogonalise takes from x its parts along the basis and the vectors beside,
// in two rounds; column, if not nil, gets the coefficients of the basis.
func (b *basis) orthogonalise(x, column []float64) {
	for range 2 {
		for _, u := range b.Beside {
			linear.Axpy(-linear.Dot(u, x), u, x)
		}
		for i, u := range b.v {
			c := linear.Dot(u, x)
			linear.Axpy(-c, u, x)
			if column != nil {
				column[i] += c
			}
		}
	}
}

// extend takes one step: a product, made orthogonal to all before.
func (b *basis) extend() {
	j := b.size
	w := make([]float64, b.n)
	b.apply(w, b.v[j])
	b.products++
	before := linear.Norm2(w)
	column := make([]float64, j+1)
	b.orthogonalise(w, column)
	for i, c := range column {
		b.h[i*b.Basis+j], b.h[j*b.Basis+i] = c, c
	}
	b.size++
	b.beta = linear.Norm2(w)
	if !(b.beta > 1e-14*before) || b.beta-b.beta != 0 {
		b.beta, b.closed = 0, true
		return
	}
	linear.Scale(w, 1/b.beta, w)
	b.v = append(b.v, w)
}

// ritz solves the projected problem; false where it fails.
func (b *basis) ritz() bool {
	k := b.size
	b.values = make([]float64, k)
	s := b.s[:k*k]
	for i := range k {
		copy(s[i*k:(i+1)*k], b.h[i*b.Basis:i*b.Basis+k])
	}
	if !Symmetric(s, b.values, b.work) {
		b.values, b.closed = nil, true
		return false
	}
	return true
}

// bound of Ritz pair j: β times the last component of its vector, and what
// rounding leaves open.
func (b *basis) bound(j int) float64 {
	k := b.size
	scale := max(math.Abs(b.values[0]), math.Abs(b.values[k-1]))
	return b.beta*math.Abs(b.s[(k-1)*k+j]) + 4*0x1p-53*scale
}

// settled says whether each value asked for is as sure as it was asked to be.
func (b *basis) settled() bool {
	if b.size < min(b.Low+b.High, b.Basis) {
		return false
	}
	for j := range b.values {
		if (j < b.Low || j >= b.size-b.High) && b.bound(j) > b.Tol*math.Abs(b.values[j]) {
			return false
		}
	}
	return true
}

// restart keeps the Ritz vectors of both ends, half of the basis in all.
func (b *basis) restart() {
	k, keep := b.size, b.chosen()
	kept := make([][]float64, len(keep), b.Basis+1)
	for i, j := range keep {
		kept[i] = b.vector(j)
	}
	clear(b.h)
	for i, j := range keep {
		b.h[i*b.Basis+i] = b.values[j]
	}
	b.v = append(kept, b.v[k])
	b.size = len(keep)
}

// chosen lists the Ritz pairs that a restart keeps.
func (b *basis) chosen() []int {
	low := b.Low + (b.Basis-b.Low-b.High)/4
	high := b.High + (b.Basis-b.Low-b.High)/4
	if b.Low == 0 {
		low = 0
	}
	if b.High == 0 {
		high = 0
	}
	var keep []int
	for j := range b.size {
		if j < low || j >= b.size-high {
			keep = append(keep, j)
		}
	}
	return keep[:min(len(keep), b.Basis-2)]
}

// vector of Ritz pair j.
func (b *basis) vector(j int) []float64 {
	x := make([]float64, b.n)
	for i := range b.size {
		linear.Axpy(b.s[i*b.size+j], b.v[i], x)
	}
	return x
}

// result gathers the ends that were asked for.
func (b *basis) result() Outermost {
	out := Outermost{Products: b.products}
	if b.values == nil {
		return out
	}
	out.Settled = b.settled() || b.closed
	k := b.size
	for j := range min(b.Low, k) {
		out.Low = append(out.Low, Pair{b.values[j], b.bound(j), b.vector(j)})
	}
	for j := k - 1; j >= max(k-b.High, 0); j-- {
		out.High = append(out.High, Pair{b.values[j], b.bound(j), b.vector(j)})
	}
	return out
}
