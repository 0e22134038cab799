package inspect

import (
	"math"

	"dwindle/engine/linear"
)

// view is L A R with diagonal L and R, some rows and columns left out, and its
// inverse where A equilibrated has been factorised.
type view struct {
	of          string
	m           *linear.CSR
	index       []int     // rows of A that are left, in order; nil: all
	left, right []float64 // the inverse is x ↦ right∘solve(left∘x), on the rows of A
	shift       float64   // the inverse is that of the view + shift·I
	e           *exam
	u, w        []float64 // scratch of A's order
}

// see builds a view with the factors l and r (nil: ones) on the rows of index
// (nil: all).
func (e *exam) see(of string, l, r []float64, index []int) *view {
	n := e.f.N
	v := &view{of: of, index: index, e: e, m: scaledBy(e.a, l, r)}
	if index != nil {
		v.m = part(v.m, index)
	}
	if same := index == nil && l != nil && &l[0] == &e.row[0] && &r[0] == &e.col[0]; e.shift != 0 && same && e.symmetric {
		v.shift = e.shift // of another view the inverse of B + shift·I says nothing
	}
	if e.solver != nil && v.shift == e.shift {
		v.left, v.right = make([]float64, n), make([]float64, n)
		for i := range n {
			v.left[i], v.right[i] = e.row[i]/at(l, i), e.col[i]/at(r, i)
		}
		v.u, v.w = make([]float64, n), make([]float64, n)
	}
	return v
}

// at is entry i of d, 1 where d is nil.
func at(d []float64, i int) float64 {
	if d == nil {
		return 1
	}
	return d[i]
}

// scaledBy returns L A R.
func scaledBy(a *linear.CSR, l, r []float64) *linear.CSR {
	if l == nil && r == nil {
		return a
	}
	m := *a
	m.Val = make([]float64, len(a.Val))
	for i := range a.NRows {
		for k := a.Ptr[i]; k < a.Ptr[i+1]; k++ {
			m.Val[k] = a.Val[k] * (at(l, i) * at(r, int(a.Col[k])))
		}
	}
	return &m
}

// part returns the rows and columns of a that index lists, in rising order.
func part(a *linear.CSR, index []int) *linear.CSR {
	place := make([]int32, a.NRows)
	for i := range place {
		place[i] = -1
	}
	for k, i := range index {
		place[i] = int32(k)
	}
	m := &linear.CSR{NRows: len(index), NCols: len(index), Ptr: make([]int, 1, len(index)+1)}
	for _, i := range index {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if p := place[j]; p >= 0 {
				m.Col, m.Val = append(m.Col, p), append(m.Val, vals[k])
			}
		}
		m.Ptr = append(m.Ptr, len(m.Col))
	}
	return m
}

// order of the view.
func (v *view) order() int { return v.m.NRows }

// invertible says whether the inverse is at hand.
func (v *view) invertible() bool { return v.left != nil }

// inverse computes dst = (L A R)⁻¹ x.
func (v *view) inverse(dst, x []float64) { v.solve(dst, x, v.left, v.right, v.e.solver.Solve) }

// inverseT computes dst = (L A R)⁻ᵀ x.
func (v *view) inverseT(dst, x []float64) { v.solve(dst, x, v.right, v.left, v.e.solver.SolveT) }

func (v *view) solve(dst, x, before, after []float64, with func(dst, b []float64)) {
	if v.index == nil {
		for i, c := range x {
			v.u[i] = before[i] * c
		}
	} else {
		clear(v.u)
		for k, i := range v.index {
			v.u[i] = before[i] * x[k]
		}
	}
	with(v.w, v.u)
	for k := range dst {
		i := k
		if v.index != nil {
			i = v.index[k]
		}
		dst[k] = after[i] * v.w[i]
	}
}

// oneNorm returns ‖a‖₁, the largest sum of magnitudes in a column.
func oneNorm(a *linear.CSR) float64 {
	sums := make([]float64, a.NCols)
	for k, j := range a.Col {
		sums[j] += math.Abs(a.Val[k])
	}
	return linear.NormInf(sums)
}

// byDiagonal returns 1/√a_ii, nil unless every a_ii is positive.
func byDiagonal(a *linear.CSR) []float64 {
	d := make([]float64, a.NRows)
	a.Diagonal(d)
	for i, v := range d {
		if !(v > 0) {
			return nil
		}
		d[i] = 1 / math.Sqrt(v)
	}
	return d
}
