package precond

import (
	"math"

	"dwindle/engine/linear"
)

// iluWork is the state of a row-oriented (IKJ) factorisation on the pattern
// of a.
type iluWork struct {
	a        *linear.CSR
	f        *factors
	name     string
	modified bool      // what falls outside the pattern goes to the diagonal
	w        []float64 // the row under work, scattered by column; length n
	// at[j] is i+1 while column j belongs to row i, so that nothing has to be
	// cleared between rows; length n
	at []int32
}

func newILUWork(a *linear.CSR, name string, modified bool) *iluWork {
	n := a.NRows
	lower, upper := halves(a)
	f := &factors{lower: triangle(n, lower), upper: triangle(n, upper), inverse: linear.Bulk[float64](n)}
	return &iluWork{a: a, f: f, name: name, modified: modified, w: linear.Bulk[float64](n), at: linear.Bulk[int32](n)}
}

// row eliminates row i with the rows above it and stores it; it returns the
// pivot.
func (k *iluWork) row(i int) (float64, error) {
	cols, vals := k.a.Row(i)
	for p, c := range cols {
		k.w[c], k.at[c] = vals[p], int32(i+1)
	}
	if k.at[i] != int32(i+1) {
		return 0, &Breakdown{Method: k.name, Row: i, Why: "missing diagonal entry"}
	}
	for _, c := range cols {
		if int(c) >= i {
			break
		}
		k.eliminate(i, int(c))
	}
	d := k.w[i]
	inverse := 1 / d
	if unusable(d) {
		return d, &Breakdown{Method: k.name, Row: i, Pivot: d, Why: "the pivot has no inverse"}
	}
	k.store(i, cols, inverse)
	return d, nil
}

// unusable says whether a pivot has no finite, nonzero inverse.
func unusable(d float64) bool {
	inverse := 1 / d
	return d == 0 || math.IsNaN(inverse) || math.IsInf(inverse, 0) || inverse == 0
}

// eliminate subtracts w_c times row c of R, which is divided by its pivot, and
// turns w_c into the entry of L.
func (k *iluWork) eliminate(i, c int) {
	t := k.w[c]
	rc, rv := k.f.upper.Row(c)
	for p, j := range rc {
		if k.at[j] == int32(i+1) {
			k.w[j] -= t * rv[p]
		} else if k.modified {
			k.w[i] -= t * rv[p]
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

// restart empties the factors for another factorisation.
func (k *iluWork) restart() {
	l, r := k.f.lower, k.f.upper
	l.Col, l.Val, r.Col, r.Val = l.Col[:0], l.Val[:0], r.Col[:0], r.Val[:0]
	clear(k.at)
}
