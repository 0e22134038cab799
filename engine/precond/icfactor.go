package precond

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

// least is the share of its diagonal entry that a pivot must keep; less is
// rounding, not a pivot.
const least = 16 * 0x1p-53

// icWork factors A + α diag(A) = L D Lᵀ by rows on the pattern of A's lower
// triangle, as often as needed with another α.
type icWork struct {
	a      *linear.CSR
	l      *linear.CSR // strict lower part of L
	pivots []float64   // D, length n
	w      []float64   // l_ij d_j of the row under work, by column; length n
	at     []int32     // the row+1 for which w_j is valid; length n
}

func newICWork(a *linear.CSR) *icWork {
	lower, _ := halves(a)
	n := a.NRows
	w := &icWork{a: a, l: triangle(n, lower), pivots: linear.Bulk[float64](n), w: linear.Bulk[float64](n), at: linear.Bulk[int32](n)}
	for i := 0; i < n; i++ {
		cols, _ := a.Row(i)
		for _, c := range cols {
			if int(c) >= i {
				break
			}
			w.l.Col = append(w.l.Col, c)
		}
		w.l.Ptr[i+1] = len(w.l.Col)
	}
	w.l.Val = w.l.Val[:lower]
	return w
}

// factor factors with shift alpha; see shiftable.
func (k *icWork) factor(ctx context.Context, alpha float64, progress func(float64)) (broke int, err error) {
	n := k.a.NRows
	clear(k.at)
	for i := 0; i < n; i++ {
		if err := look(ctx, progress, i, n); err != nil {
			return -1, err
		}
		if !k.row(i, alpha) {
			return i, nil
		}
	}
	return -1, nil
}

func (k *icWork) pivot(i int) float64 { return k.pivots[i] }

// row computes row i of L and its pivot:
//
//	w_k = a_ik − Σ_{j<k} w_j l_kj,  l_ik = w_k/d_k,  d_i = a_ii − Σ_k w_k l_ik
//
// over the columns of the pattern alone.
func (k *icWork) row(i int, alpha float64) bool {
	cols, dst := k.l.Row(i)
	_, vals := k.a.Row(i)
	diag := vals[len(cols)] * (1 + alpha)
	d := diag
	for p, c := range cols {
		t := vals[p]
		rc, rv := k.l.Row(int(c))
		for q, j := range rc {
			if k.at[j] == int32(i+1) {
				t -= k.w[j] * rv[q]
			}
		}
		k.w[c], k.at[c] = t, int32(i+1)
		dst[p] = t / k.pivots[c]
		d -= t * dst[p]
	}
	k.pivots[i] = d
	return d > least*diag && !math.IsInf(d, 0)
}

// finish turns the last factorisation into a preconditioner, kept as the
// parameters say.
func (k *icWork) finish(v linear.Values, method string) (*factors, error) {
	f := &factors{lower: k.l, inverse: k.w, self: true}
	for i, d := range k.pivots {
		f.inverse[i] = 1 / d
	}
	return f, f.settleAs(v, method)
}
