package linear

import "testing"

// plateMatrix is the 5-point operator on an m×m grid.
func plateMatrix(m int) *CSR {
	a := &CSR{NRows: m * m, NCols: m * m, Ptr: make([]int, 1, m*m+1)}
	put := func(col int, v float64) { a.Col, a.Val = append(a.Col, int32(col)), append(a.Val, v) }
	for r := range m {
		for c := range m {
			p := r*m + c
			if r > 0 {
				put(p-m, -1)
			}
			if c > 0 {
				put(p-1, -1)
			}
			put(p, 4)
			if c+1 < m {
				put(p+1, -1)
			}
			if r+1 < m {
				put(p+m, -1)
			}
			a.Ptr = append(a.Ptr, len(a.Col))
		}
	}
	return a
}

// BenchmarkPlate runs the three passes of a conjugate gradient step on 10⁶
// unknowns, apart and together, and tells the bytes each must move.
func BenchmarkPlate(b *testing.B) {
	const m = 1000
	a := plateMatrix(m)
	n := m * m
	x, r, p, q := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	Uniform(p, 1)
	Uniform(r, 2)
	product := a.Bytes() + 16*int64(n)
	for _, k := range []struct {
		name  string
		bytes int64
		run   func()
	}{
		{"triad", 24 * int64(n), func() { Lin(q, 1, p, .5, r) }},
		{"product", product, func() { a.Apply(q, p) }},
		{"product-dot", product, func() { a.ApplyDot(q, p) }},
		{"residual", 24 * int64(n), func() { AxpyDot(-1e-9, q, r, r) }},
		{"direction", 40 * int64(n), func() { StepDirection(x, 1e-9, p, r, 1e-9) }},
		{"step", product + 64*int64(n), func() {
			StepDirection(x, 1e-9, p, r, 1e-9)
			a.ApplyDot(q, p)
			AxpyDot(-1e-9, q, r, r)
		}},
	} {
		for _, threads := range []int{1, 2} {
			b.Run(k.name+"-"+string(rune('0'+threads)), func(b *testing.B) {
				SetThreads(threads)
				defer SetThreads(1)
				b.SetBytes(k.bytes)
				for b.Loop() {
					k.run()
				}
			})
		}
	}
}
