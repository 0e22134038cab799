package precond

import (
	"context"
	"slices"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var fsaiEntry = Entry{
	Name: "fsai", Title: "factored sparse approximate inverse",
	Source: "Kolotilina and Yeremin, SIAM J. Matrix Anal. Appl. 14 (1993) 45–58",
	Params: []linear.Param{{Name: "k", Kind: linear.Int, Default: 1, Min: 1, Max: 6,
		Meaning: "the factor has the pattern of the lower triangle of the k-th power of A"}},
	Needs:   linear.NeedsEntries | linear.NeedsDiagonal,
	Assumes: linear.AssumesSymmetric | linear.AssumesDefinite,
	Fixed:   true, Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, v linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		r := newReach(a)
		entries := 0
		if v.Int("k") == 1 {
			entries, _ = halves(a)
			entries += a.NRows
		} else {
			for i := 0; i < a.NRows; i++ {
				entries += len(r.row(i, v.Int("k")))
			}
		}
		return 2*triangleBytes(a.NRows, entries) + 8*int64(a.NRows), true
	},
	Build: buildFSAI,
}

// fsai applies M⁻¹ = Gᵀ G with a sparse lower triangular G ≈ L⁻¹, A = L Lᵀ: it
// needs no triangular solves.
type fsai struct {
	g, gt *linear.CSR
	work  []float64 // length n
}

// Apply computes dst = M⁻¹ x.
func (f *fsai) Apply(dst, x []float64) {
	f.g.Apply(f.work, x)
	f.gt.Apply(dst, f.work)
}

// ApplyT computes dst = M⁻ᵀ x, which is M⁻¹ x.
func (f *fsai) ApplyT(dst, x []float64) { f.Apply(dst, x) }

// ApplyDot computes dst = M⁻¹ x and returns xᵀ dst = ‖G x‖².
func (f *fsai) ApplyDot(dst, x []float64) float64 {
	f.Apply(dst, x)
	return linear.Dot(x, dst)
}

// buildFSAI finds row i of G on its pattern J, whose last member is i, from
// A_JJ y = e_i as y/√y_i: then diag(G A Gᵀ) = 1, and ‖I − G L‖_F is least for
// that diagonal.
func buildFSAI(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	const name = "fsai"
	var notes trace.BuildNotes
	a, err := entriesOf(s, name)
	if err != nil {
		return nil, notes, err
	}
	if err := positiveDiagonal(a, name); err != nil {
		return nil, notes, err
	}
	n := a.NRows
	g, r, sub := triangle(n, a.Entries()/2+n), newReach(a), newSubmatrix(n)
	for i := 0; i < n; i++ {
		if err := look(ctx, progress, i, n); err != nil {
			return nil, notes, err
		}
		j := r.row(i, v.Int("k"))
		d, y := sub.load(a, j)
		if broke := d.cholesky(); broke >= 0 {
			p := d.v[broke*d.n+broke]
			notes.Broke = []trace.Pivot{{Row: i, Value: p}}
			return nil, notes, &Breakdown{Method: name, Row: i, Pivot: p, Why: "a principal submatrix is not positive definite"}
		}
		last := d.n - 1
		y[last] = 1
		d.solveCholesky(y)
		pivot(&notes, 1/y[last])
		scale := d.v[last*d.n+last] // 1/√y_i
		for k := range y {
			y[k] *= scale
		}
		makeRoom(g, i, len(j))
		g.Col, g.Val = append(g.Col, j...), append(g.Val, y...)
		g.Ptr[i+1] = len(g.Col)
	}
	f := &fsai{g: g, gt: g.Transpose(), work: linear.Bulk[float64](n)}
	notes.Entries = int64(g.Entries())
	notes.Fill = float64(2*g.Entries()-n) / float64(a.Entries())
	notes.Bytes = g.Bytes() + f.gt.Bytes() + 8*int64(n)
	notes.Symmetric, notes.Definite = true, true
	return f, notes, nil
}

// reach finds the pattern of powers of A, a row at a time.
type reach struct {
	a    *linear.CSR
	at   []int32 // i+1 while column j belongs to row i; length n
	list []int32
}

func newReach(a *linear.CSR) *reach { return &reach{a: a, at: linear.Bulk[int32](a.NRows)} }

// row returns the columns up to i of row i of the k-th power of A, with i,
// ascending; they are valid until the next call.
func (r *reach) row(i, k int) []int32 {
	r.list = append(r.list[:0], int32(i))
	r.at[i] = int32(i + 1)
	from := 0
	for range k {
		to := len(r.list)
		for ; from < to; from++ {
			cols, _ := r.a.Row(int(r.list[from]))
			for _, c := range cols {
				if r.at[c] != int32(i+1) {
					r.at[c] = int32(i + 1)
					r.list = append(r.list, c)
				}
			}
		}
	}
	r.list = slices.DeleteFunc(r.list, func(c int32) bool { return int(c) > i })
	slices.Sort(r.list)
	return r.list
}

// submatrix copies principal submatrices of A into small ones.
type submatrix struct {
	place []int32 // where a column stands among those chosen, +1; length n
	v, y  []float64
}

func newSubmatrix(n int) *submatrix { return &submatrix{place: linear.Bulk[int32](n)} }

// load returns A_JJ, and zeros of the same length; both are valid until the
// next call.
func (s *submatrix) load(a *linear.CSR, j []int32) (square, []float64) {
	m := len(j)
	s.v, s.y = slices.Grow(s.v[:0], m*m)[:m*m], slices.Grow(s.y[:0], m)[:m]
	clear(s.v)
	clear(s.y)
	for k, c := range j {
		s.place[c] = int32(k + 1)
	}
	for k, row := range j {
		cols, vals := a.Row(int(row))
		for q, c := range cols {
			if p := s.place[c]; p > 0 {
				s.v[k*m+int(p)-1] = vals[q]
			}
		}
	}
	for _, c := range j {
		s.place[c] = 0
	}
	return square{m, s.v}, s.y
}
