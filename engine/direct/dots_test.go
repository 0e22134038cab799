package direct

import (
	"testing"

	"dwindle/engine/linear"
)

// Vector registers give the bits of the portable twin, for every length, and
// both are dot products.
func TestDots(t *testing.T) {
	was := vectored
	defer func() { vectored = was }()
	for n := range 70 {
		all := make([]float64, 6*n)
		linear.Uniform(all, uint64(n))
		part := func(i int) []float64 { return all[i*n : (i+1)*n] }
		get := func() [8]float64 { return dots(part(0), part(1), part(2), part(3), part(4), part(5)) }
		one := get()
		vectored = false
		if two := get(); one != two {
			t.Fatalf("length %d: %v and %v", n, one, two)
		}
		vectored = was
		for i, v := range one {
			if d := v - product(part(i/2), part(4+i%2)); d > 1e-14 || d < -1e-14 {
				t.Errorf("length %d: product %d is %g off", n, i, d)
			}
		}
	}
}

func BenchmarkDots(b *testing.B) {
	all := make([]float64, 6*256)
	linear.Uniform(all, 1)
	part := func(i int) []float64 { return all[i*256 : (i+1)*256] }
	for b.Loop() {
		dots(part(0), part(1), part(2), part(3), part(4), part(5))
	}
	b.ReportMetric(float64(b.N)*8*2*256/b.Elapsed().Seconds()/1e9, "GFlop/s")
}
