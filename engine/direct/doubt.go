package direct

import (
	"math"

	"dwindle/engine/linear"
)

// doubt is a small eigenvalue of B whose sign may be rounding.
type doubt struct {
	node, t int
	value   float64
	x, y    float64 // its eigenvector: of a pivot of order 1, (1, 0)
}

// mostDoubts is how many signs are looked into; beyond, they are not counted.
const mostDoubts = 200

// small says whether a pivot is so small that its sign is looked into. On a
// singular mesh of n points, rounding leaves pivots of up to about n/2 units.
func (f *LDL) small(v float64) bool {
	return v != 0 && math.Abs(v) <= 64*unit*float64(len(f.order))*max(1, f.MaxPivot)
}

// settle takes back the signs that rounding could have made. With v = L⁻ᵀ times
// the eigenvector, vᵀ(DAD)v is the eigenvalue; where that lies within four times
// its rounding bound, A is singular to rounding along v.
func (f *LDL) settle(a *linear.CSR, doubts []doubt) {
	z := make([]float64, len(f.order))
	for k, d := range doubts {
		if k < mostDoubts {
			f.direction(z, d)
			if _, bound, _ := linear.Curvature(a, z, 0); math.Abs(d.value) > 4*bound {
				continue
			}
		}
		if d.value > 0 {
			f.Inertia.Positive--
		} else {
			f.Inertia.Negative--
		}
		f.Inertia.Zero++
	}
}

// direction writes D v, in the original order.
func (f *LDL) direction(z []float64, d doubt) {
	y := f.work
	clear(y)
	rows := f.nodes[d.node].rows
	y[rows[d.t]] = d.x
	if d.y != 0 {
		y[rows[d.t+1]] = d.y
	}
	for k := d.node; k >= 0; k-- {
		f.nodes[k].backward(y)
	}
	for p, i := range f.order {
		z[i] = f.scale[i] * y[p]
	}
}

// vector returns the unit eigenvector of an eigenvalue.
func (p pair) vector(value float64) (x, y float64) {
	x, y = p.b, value-p.a
	if u, v := value-p.c, p.b; math.Hypot(u, v) > math.Hypot(x, y) {
		x, y = u, v
	}
	h := math.Hypot(x, y)
	return x / h, y / h
}
