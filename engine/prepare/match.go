package prepare

import (
	"context"
	"errors"
	"math"

	"dwindle/engine/linear"
)

var matchEntry = Entry{
	Name:   "match",
	Title:  "large entries onto the diagonal, scaled to 1",
	Source: "Duff and Koster, SIAM J. Matrix Anal. Appl. 22 (2001) 973–996",
	Needs:  linear.NeedsEntries,
	Scales: true,
	Rounds: true,
	Estimate: func(a *linear.CSR, _ linear.Values) int64 {
		return 2*a.Bytes() + int64(len(a.Val))*8 + 120*int64(a.NRows)
	},
	Apply: applyMatch,
}

// matched is the way back from Q Dr A Dc y = Q Dr b: x = Dc y.
type matched struct {
	scaling
	q linear.Permutation // original row of each row
}

// Row returns the original row at place i.
func (m matched) Row(i int) int { return int(m.q[i]) }

// applyMatch permutes rows and scales both sides so that every diagonal entry
// has magnitude 1 and no other exceeds it: the matching of rows and columns
// with the largest product of magnitudes, and the factors its dual variables
// give. Symmetry is lost. A structurally singular matrix has no such matching
// and is refused.
func applyMatch(ctx context.Context, s linear.System, _ linear.Values) (linear.System, Back, error) {
	a := s.Matrix()
	if a == nil {
		return s, nil, errors.New("match needs the entries of the matrix")
	}
	m := newMatching(a)
	if err := m.run(ctx); err != nil {
		return s, nil, err
	}
	q, row, col := m.result()
	back := matched{scaling{row, col}, q}
	b := a.Permute(q, nil)
	for k, i := range q {
		cols, vals := b.Row(k)
		for p, j := range cols {
			vals[p] *= row[i] * col[j]
		}
	}
	s.A = b
	rhs := make([]float64, len(s.B))
	for k, i := range q {
		rhs[k] = row[i] * s.B[i]
	}
	s.B = rhs
	s.Guess, s.Exact = guessed(back, s.Guess), guessed(back, s.Exact)
	return s, back, ctx.Err()
}

// factorsOf returns exp of each logarithm, kept within 2^±500.
func factorsOf(logs []float64) []float64 {
	d := make([]float64, len(logs))
	for i, v := range logs {
		d[i] = math.Exp(min(max(v, -maxExponent*math.Ln2), maxExponent*math.Ln2))
	}
	return d
}
