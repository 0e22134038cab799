package krylov

import "dwindle/engine/linear"

// rows returns k vectors of length n in one piece of memory.
func rows(k, n int) [][]float64 {
	slab := linear.Bulk[float64](k * n)
	v := make([][]float64, k)
	for i := range v {
		v[i] = slab[i*n : (i+1)*n : (i+1)*n]
	}
	return v
}
