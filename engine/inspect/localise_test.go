package inspect

import (
	"math"
	"math/rand/v2"
	"testing"

	"dwindle/engine/linear"
)

// A span of four unit vectors with disjoint supports, mixed at random, comes
// apart into them again; what stands before the start is left alone.
func TestLocaliseTellsPlacesApart(t *testing.T) {
	const n, k = 40, 4
	places := make([][]float64, k)
	for p := range places {
		places[p] = make([]float64, n)
		for i := range 2 + 2*p {
			places[p][10*p+i] = 1 / math.Sqrt(float64(2+2*p))
		}
	}
	rng := rand.New(rand.NewPCG(8, 8))
	mixed := [][]float64{make([]float64, n)}
	mixed[0][39] = 1
	for range k {
		v := make([]float64, n)
		for _, w := range places {
			linear.Axpy(rng.NormFloat64(), w, v)
		}
		if !orthonormal(v, mixed) {
			t.Fatal("dependent")
		}
		mixed = append(mixed, v)
	}
	got := localise(mixed, 1)
	if len(got) != k+1 || got[0][39] != 1 {
		t.Fatalf("%d vectors, the first %v", len(got), got[0])
	}
	for p, w := range places {
		best := 0.0
		for _, v := range got[1:] {
			best = max(best, math.Abs(linear.Dot(v, w)))
		}
		if math.Abs(best-1) > 1e-14 {
			t.Errorf("place %d is held by one vector with %g", p, best)
		}
	}
	for i, v := range got {
		for j, w := range got {
			want := 0.0
			if i == j {
				want = 1
			}
			if math.Abs(linear.Dot(v, w)-want) > 1e-14 {
				t.Errorf("vectors %d and %d: %g", i, j, linear.Dot(v, w))
			}
		}
	}
}
