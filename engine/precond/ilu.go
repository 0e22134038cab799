package precond

import (
	"context"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var iluEntry = Entry{
	Name: "ilu", Title: "incomplete LU, no fill",
	Source: "Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), algorithm 10.4",
	Params: []linear.Param{{Name: "level", Kind: linear.Int, Default: 0, Min: 0, Max: 0,
		Meaning: "fill level: 0 keeps the pattern of A"}},
	Needs:     linear.NeedsEntries,
	Fixed:     true,
	Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, _ linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		lower, upper := halves(a)
		return factorBytes(a.NRows, lower, upper), true
	},
	Build: buildILU,
}

// iluWork is the state of a row-oriented (IKJ) factorisation without fill.
type iluWork struct {
	a *linear.CSR
	f *factors
	w []float64 // the row under work, scattered by column; length n
	// at[j] is i+1 while column j belongs to row i, so that nothing has to be
	// cleared between rows; length n
	at []int32
}

func buildILU(ctx context.Context, s linear.System, _ linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(s, "ilu")
	if err != nil {
		return nil, notes, err
	}
	n := a.NRows
	lower, upper := halves(a)
	f := &factors{lower: triangle(n, lower), upper: triangle(n, upper), inverse: make([]float64, n)}
	work := &iluWork{a: a, f: f, w: make([]float64, n), at: make([]int32, n)}
	for i := 0; i < n; i++ {
		if err := look(ctx, progress, i, n); err != nil {
			return nil, notes, err
		}
		d, err := work.row(i)
		if err != nil {
			notes.Broke = []trace.Pivot{{Row: i, Value: d}}
			return nil, notes, err
		}
		pivot(&notes, d)
	}
	notes.Entries = int64(n + lower + upper)
	notes.Fill = float64(notes.Entries) / float64(a.Entries())
	notes.Bytes = f.bytes()
	notes.Growth = growth(f, a)
	return f, notes, nil
}

// row eliminates row i with the rows above it and stores it; it returns the
// pivot.
func (k *iluWork) row(i int) (float64, error) {
	cols, vals := k.a.Row(i)
	for p, c := range cols {
		k.w[c], k.at[c] = vals[p], int32(i+1)
	}
	if k.at[i] != int32(i+1) {
		return 0, &Breakdown{Method: "ilu:0", Row: i, Why: "missing diagonal entry"}
	}
	for _, c := range cols {
		if int(c) >= i {
			break
		}
		k.eliminate(i, int(c))
	}
	d := k.w[i]
	inverse := 1 / d
	if d == 0 || math.IsNaN(inverse) || math.IsInf(inverse, 0) || inverse == 0 {
		return d, &Breakdown{Method: "ilu:0", Row: i, Pivot: d, Why: "the pivot has no inverse"}
	}
	k.store(i, cols, inverse)
	return d, nil
}

// eliminate subtracts w_c times row c of R, which is divided by its pivot, and
// turns w_c into the entry of L.
func (k *iluWork) eliminate(i, c int) {
	t := k.w[c]
	rc, rv := k.f.upper.Row(c)
	for p, j := range rc {
		if k.at[j] == int32(i+1) {
			k.w[j] -= t * rv[p]
		}
	}
	k.w[c] = t * k.f.inverse[c]
}

// store appends row i of L and of R.
func (k *iluWork) store(i int, cols []int32, inverse float64) {
	l, r := k.f.lower, k.f.upper
	for _, c := range cols {
		switch {
		case int(c) < i:
			l.Col, l.Val = append(l.Col, c), append(l.Val, k.w[c])
		case int(c) > i:
			r.Col, r.Val = append(r.Col, c), append(r.Val, k.w[c]*inverse)
		}
	}
	l.Ptr[i+1], r.Ptr[i+1] = len(l.Col), len(r.Col)
	k.f.inverse[i] = inverse
}
