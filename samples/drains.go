package samples

import (
	"math"

	"dwindle/engine/linear"
)

var drains = Sample{
	Name:  "drains",
	Title: "drain pipes below the apron of the weir: flow in each pipe, head at each joint",
	Shows: "a saddle system: no flow leaves a joint, so that half of the diagonal is zero; incomplete factors of " +
		"the whole break down, a block factorisation with the Schur complement does not",
	Source: "Darcy flow in a square grid of pipes, resistances between 1 and 10 repeating along it, one corner joint " +
		"held at head 0, unit inflow at the opposite one",
	Spectrum: "as many positive eigenvalues as pipes, as many negative ones as free joints; " +
		"preconditioned by its exact blocks 1 and (1 +- sqrt 5)/2 (Murphy, Golub and Wathen 2000)",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 20, Min: 2, Max: 1500, Meaning: "joints along each side"},
	},
	Size: func(v linear.Values) (int, int) {
		n := v.Int("n")
		pipes := 2 * n * (n - 1)
		return pipes + n*n - 1, 5*pipes - 4
	},
	Make:   makeDrains,
	Expect: []string{"restart-length", "zero-diagonal"},
}

// makeDrains assembles [R Bᵀ; B 0], B the joints by pipes with a 1 where a pipe
// ends and a −1 where it starts.
func makeDrains(v linear.Values) (linear.System, error) {
	n := v.Int("n")
	pipes := 2 * n * (n - 1)
	size := pipes + n*n - 1
	var entries []linear.Entry
	at := 0
	pipe := func(from, to int) {
		resistance := 1 + 4.5*(1-math.Cos(float64(at)))
		entries = append(entries, linear.Entry{I: at, J: at, V: resistance})
		for _, end := range []struct {
			joint int
			sign  float64
		}{{from, -1}, {to, 1}} {
			if end.joint > 0 { // joint 0 is held
				row := pipes + end.joint - 1
				entries = append(entries, linear.Entry{I: at, J: row, V: end.sign}, linear.Entry{I: row, J: at, V: end.sign})
			}
		}
		at++
	}
	for j := range n {
		for i := range n {
			if i+1 < n {
				pipe(j*n+i, j*n+i+1)
			}
			if j+1 < n {
				pipe(j*n+i, (j+1)*n+i)
			}
		}
	}
	b := make([]float64, size)
	b[size-1] = 1
	fields := make([]int32, size)
	for i := pipes; i < size; i++ {
		fields[i] = 1
	}
	return linear.System{A: linear.FromEntries(size, size, entries), B: b,
		Fields: []string{"flow", "head"}, FieldOf: fields}, nil
}
