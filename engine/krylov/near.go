package krylov

import (
	"math"

	"dwindle/engine/linear"
)

// conjugateNear makes the first k of the vectors conjugate, WᵀA W = I, and
// returns them with their products. One that A maps to no more than rounding,
// or that lies in the span of those before it, is left out: nothing can be
// divided by its curvature.
func conjugateNear(c *core, vectors [][]float64, k int) (w, aw [][]float64) {
	largest := 0.0
	for _, given := range vectors[:min(k, len(vectors))] {
		v, av := append([]float64(nil), given...), linear.Bulk[float64](c.n)
		c.a.Apply(av, v) // the product
		if size := linear.Norm2(v); size > 0 {
			largest = math.Max(largest, linear.Norm2(av)/size)
		}
		for range 2 { // once more takes away what rounding left
			for i := range w {
				d := linear.Dot(aw[i], v)
				linear.Axpy(-d, w[i], v)
				linear.Axpy(-d, aw[i], av)
			}
		}
		length, curve := linear.Norm2(v), linear.Dot(v, av)
		if !(curve > nearFloor*largest*length*length) || !finite(curve) {
			continue
		}
		linear.Scale(v, 1/math.Sqrt(curve), v)
		linear.Scale(av, 1/math.Sqrt(curve), av)
		w, aw = append(w, v), append(aw, av)
	}
	return w, aw
}

// nearFloor is the curvature vᵀA v/vᵀv, relative to the largest ‖A v‖/‖v‖ seen,
// below which a vector counts as one of the null space.
const nearFloor = 1e-13
