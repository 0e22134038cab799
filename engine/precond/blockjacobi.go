package precond

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var blockJacobiEntry = Entry{
	Name: "block-jacobi", Title: "inverses of diagonal blocks",
	Source: "Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 4.1.1",
	Params: []linear.Param{{Name: "size", Kind: linear.Int, Default: 4, Min: 1, Max: 512,
		Meaning: "rows of a block, consecutive ones"}},
	Needs: linear.NeedsEntries,
	Fixed: true, Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, v linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		return blockBytes(a.NRows, v.Int("size")), true
	},
	Build: buildBlockJacobi,
}

// blockBytes is what the inverses of blocks of that size take.
func blockBytes(n, size int) int64 {
	size = min(size, n)
	if size == 0 {
		return 0
	}
	rest := n % size
	return 8 * int64((n/size)*size*size+rest*rest)
}

// blockJacobi applies M⁻¹ = diag(A₁₁, A₂₂, …)⁻¹.
type blockJacobi struct {
	n, size int
	inverse []float64 // the inverses one after the other, each by rows
}

// Apply computes dst = M⁻¹ x.
func (b *blockJacobi) Apply(dst, x []float64) {
	for lo := 0; lo < b.n; lo += b.size {
		m, xs := b.block(lo), x[lo:min(lo+b.size, b.n)]
		for i := range xs {
			s := 0.0
			for k, v := range m.row(i) {
				s += v * xs[k]
			}
			dst[lo+i] = s
		}
	}
}

// ApplyT computes dst = M⁻ᵀ x.
func (b *blockJacobi) ApplyT(dst, x []float64) {
	clear(dst)
	for lo := 0; lo < b.n; lo += b.size {
		m := b.block(lo)
		for i := 0; i < m.n; i++ {
			for k, v := range m.row(i) {
				dst[lo+k] += v * x[lo+i]
			}
		}
	}
}

// block returns the inverse of the block that starts at row lo.
func (b *blockJacobi) block(lo int) square {
	m := min(b.size, b.n-lo)
	return square{m, b.inverse[lo*b.size : lo*b.size+m*m]}
}

func buildBlockJacobi(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	const name = "block-jacobi"
	var notes trace.BuildNotes
	a, err := entriesOf(s, name)
	if err != nil {
		return nil, notes, err
	}
	n := a.NRows
	size := min(v.Int("size"), n)
	b := &blockJacobi{n: n, size: size, inverse: make([]float64, blockBytes(n, size)/8)}
	work := square{v: make([]float64, size*size)}
	rows, seen := make([]int, size), 0
	notes.Symmetric = symmetric(a)
	notes.Definite = notes.Symmetric
	for lo := 0; lo < n; lo += size {
		if lo >= seen {
			if err := look(ctx, progress, seen, n); err != nil {
				return nil, notes, err
			}
			seen += lookEvery
		}
		m := min(size, n-lo)
		work = square{m, work.v[:m*m]}
		definite, broke := work.invert(a, lo, notes.Definite, rows[:m], b.block(lo), &notes)
		if broke >= 0 {
			return nil, notes, &Breakdown{Method: name, Row: lo + broke, Why: "the diagonal block has no inverse"}
		}
		notes.Definite = notes.Definite && definite
	}
	notes.Entries = int64(len(b.inverse))
	notes.Fill = float64(notes.Entries) / float64(a.Entries())
	notes.Bytes = 8 * notes.Entries
	return b, notes, nil
}

// invert puts the inverse of the diagonal block of a at row lo into out: by
// Cholesky where try allows it and the block is definite, else by LU. It says
// whether the block is definite, and the row without a pivot or −1.
func (d square) invert(a *linear.CSR, lo int, try bool, p []int, out square, notes *trace.BuildNotes) (definite bool, broke int) {
	d.load(a, lo)
	definite = try && d.cholesky() < 0
	if !definite {
		d.load(a, lo)
		if broke := d.lu(p); broke >= 0 {
			return false, broke
		}
	}
	x := make([]float64, d.n)
	for j := 0; j < d.n; j++ {
		u := d.v[j*d.n+j]
		clear(x)
		if definite {
			pivot(notes, u*u)
			x[j] = 1
			d.solveCholesky(x)
		} else {
			pivot(notes, u)
			for i, from := range p {
				if from == j {
					x[i] = 1
				}
			}
			d.solveLU(x)
		}
		for i, v := range x {
			out.v[i*d.n+j] = v
		}
	}
	return definite, -1
}

// load copies the diagonal block of a at row lo into d.
func (d square) load(a *linear.CSR, lo int) {
	clear(d.v)
	for i := 0; i < d.n; i++ {
		cols, vals := a.Row(lo + i)
		for k, c := range cols {
			if j := int(c) - lo; j >= 0 && j < d.n {
				d.v[i*d.n+j] = vals[k]
			}
		}
	}
}
