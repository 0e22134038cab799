package direct

import (
	"math/rand/v2"
	"testing"

	"dwindle/engine/linear"
)

// Rows joined by an entry differ in colour; a shuffled plate, whose graph is
// bipartite, needs few, and the order keeps colours together.
func TestColour(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 1))
	for name, a := range map[string]*linear.CSR{"plate": grid(20), "shuffled": shuffledRows(rng, grid(20)),
		"unsymmetric": unsymmetric(rng, 80, true), "diagonal": linear.FromEntries(2, 2, []linear.Entry{{I: 0, J: 0, V: 1}, {I: 1, J: 1, V: 1}})} {
		colour, number := Colour(a)
		for i := range a.NRows {
			cols, _ := a.Row(i)
			for _, j := range cols {
				if int(j) != i && colour[i] == colour[j] {
					t.Fatalf("%s: rows %d and %d are joined and of one colour", name, i, j)
				}
			}
		}
		if most := map[string]int{"plate": 2, "shuffled": 5, "unsymmetric": 12, "diagonal": 1}[name]; number > most {
			t.Errorf("%s: %d colours", name, number)
		}
		p := ByColour(colour, number)
		if !p.Valid() {
			t.Fatalf("%s: no permutation", name)
		}
		for k := 1; k < len(p); k++ {
			if x, y := colour[p[k-1]], colour[p[k]]; x > y || x == y && p[k-1] > p[k] {
				t.Fatalf("%s: place %d is out of order", name, k)
			}
		}
	}
}
