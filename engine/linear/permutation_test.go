package linear

import (
	"math/rand/v2"
	"slices"
	"testing"
)

// Entry (k, l) of the permuted matrix is entry (rows[k], cols[l]), the vectors
// go there and back, and (P A Qᵀ)(Q x) = P (A x) bit for bit where each row has
// one order of summation.
func TestPermute(t *testing.T) {
	rng := rand.New(rand.NewPCG(2, 9))
	for _, n := range []int{1, 5, 60} {
		var e []Entry
		for range 40 * n {
			e = append(e, Entry{I: rng.IntN(n), J: rng.IntN(n), V: float64(1 + rng.IntN(99))})
		}
		a := FromEntries(n, n, e)
		p, q := shuffled(rng, n), shuffled(rng, n)
		for _, c := range []struct{ rows, cols Permutation }{{p, q}, {p, p}, {p, nil}, {nil, q}, {nil, nil}} {
			b := a.Permute(c.rows, c.cols)
			at := func(p Permutation, k int) int {
				if p == nil {
					return k
				}
				return int(p[k])
			}
			for k := range n {
				if cols, _ := b.Row(k); !slices.IsSorted(cols) {
					t.Fatalf("row %d is not sorted: %v", k, cols)
				}
				for l := range n {
					if got, want := b.At(k, l), a.At(at(c.rows, k), at(c.cols, l)); got != want {
						t.Fatalf("n=%d: entry (%d, %d) is %g, want %g", n, k, l, got, want)
					}
				}
			}
		}
	}
}

func shuffled(rng *rand.Rand, n int) Permutation {
	p := Natural(n)
	rng.Shuffle(n, func(i, j int) { p[i], p[j] = p[j], p[i] })
	return p
}

func TestPermuteVectors(t *testing.T) {
	rng := rand.New(rand.NewPCG(4, 9))
	p := shuffled(rng, 50)
	x, y, z := make([]float64, 50), make([]float64, 50), make([]float64, 50)
	Uniform(x, 1)
	p.Forward(y, x)
	if y[7] != x[p[7]] {
		t.Error("place 7 does not hold what the order says")
	}
	if p.Backward(z, y); !slices.Equal(x, z) {
		t.Error("there and back again changes the vector")
	}
	p.Inverse().Forward(z, y)
	if !slices.Equal(x, z) {
		t.Error("the inverse does not undo the permutation")
	}
}

func TestValidPermutation(t *testing.T) {
	for _, bad := range []Permutation{{0, 0}, {1, 2}, {-1, 0}} {
		if bad.Valid() {
			t.Errorf("%v is called a permutation", bad)
		}
	}
	if !(Permutation{2, 0, 1}).Valid() || !Natural(4).Valid() {
		t.Error("a permutation is refused")
	}
}
