package direct

import (
	"context"
	"math"

	"dwindle/engine/linear"
)

// negativeVector returns x with xᵀ(A−cI)x = the pivot that was not positive at
// step j: L₁₁ᵀy = −l with l the part of row j left of the diagonal, x = (y, 1, 0).
// It is in original row order, of the scaled matrix.
func (f *factoring) negativeVector(j int) []float64 {
	c := &Cholesky{l: f.l, val: f.val, work: make([]float64, f.l.N)}
	c.work[j] = 1
	k := 0
	for int(f.l.start[k+1]) <= j {
		k++
	}
	c.backward(k, j-int(f.l.start[k]))
	for k--; k >= 0; k-- {
		c.backward(k, f.l.width(k))
	}
	x := make([]float64, f.l.N)
	f.l.Order.Backward(x, c.work)
	return x
}

// judge evaluates xᵀA x with its rounding bound; x belongs to D A D with
// D = diag(2^exp), or to A itself if exp is nil.
func (r *Definiteness) judge(a *linear.CSR, x []float64, exp []int, delta float64) {
	z := make([]float64, len(x))
	copy(z, x)
	for i, e := range exp {
		z[i] = math.Ldexp(x[i], e)
	}
	m := linear.NormInf(z)
	linear.Scale(z, math.Ldexp(1, -exponent(m)), z)
	value, bound, deltaBound := linear.Curvature(a, z, delta)
	if !(value < -bound) {
		return
	}
	r.Negative, r.X = true, z
	r.WithinDelta = value < -(bound + deltaBound)
	r.Rayleigh = value / linear.Dot(z, z)
	r.Rows = largest(x)
}

func exponent(x float64) int {
	_, e := math.Frexp(x)
	return e
}

// largest returns the at most 16 rows with the largest |x_i| that reach a
// hundredth of the largest.
func largest(x []float64) []int {
	var rows []int
	least := linear.NormInf(x) / 100
	for i, v := range x {
		v = math.Abs(v)
		if v < least || v == 0 {
			continue
		}
		rows = append(rows, i)
		k := len(rows) - 1
		for ; k > 0 && v > math.Abs(x[rows[k-1]]); k-- {
			rows[k] = rows[k-1]
		}
		rows[k] = i
		rows = rows[:min(len(rows), 16)]
	}
	return rows
}

// descendSteps is how many products a direction of negative curvature is worth.
const descendSteps = 200

// descend lowers the Rayleigh quotient of x on D A D by conjugate gradients
// with an exact search in the plane of x and the direction (Bradbury and
// Fletcher 1966), so that x shows the negative curvature clearly.
func (s *scaled) descend(ctx context.Context, x []float64) {
	n := len(x)
	normalise(x)
	ax, p, ap, g, work := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	s.apply(ax, x, work)
	old := 0.0
	for step := 0; step < descendSteps && ctx.Err() == nil; step++ {
		rho := linear.Dot(x, ax)
		linear.Lin(g, 1, ax, -rho, x)
		gg := linear.Dot(g, g)
		if !(gg > 1e-8*rho*rho) {
			return
		}
		beta := 0.0
		if step > 0 {
			beta = gg / old
		}
		old = gg
		linear.Lin(p, -1, g, beta, p)
		linear.Axpy(-linear.Dot(p, x), x, p) // x has unit length: p ⟂ x
		normalise(p)
		s.apply(ap, p, work)
		c, t := lowest(rho, linear.Dot(p, ax), linear.Dot(p, ap))
		linear.Lin(x, c, x, t, p)
		linear.Lin(ax, c, ax, t, ap)
	}
}

// lowest returns the unit eigenvector (c, t) of [[a, b], [b, d]] that belongs
// to the smaller eigenvalue, with c ≥ 0.
func lowest(a, b, d float64) (c, t float64) {
	angle := 0.5 * math.Atan2(2*b, a-d) // of the larger eigenvalue
	c, t = -math.Sin(angle), math.Cos(angle)
	if c < 0 {
		c, t = -c, -t
	}
	return c, t
}

func normalise(x []float64) {
	if m := linear.Norm2(x); m > 0 {
		linear.Scale(x, 1/m, x)
	}
}
