package direct

import (
	"math/rand/v2"
	"testing"

	"dwindle/engine/linear"
)

func TestReverseCuthillMcKee(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	k := 12
	shuffle := rng.Perm(k * k)
	var e []linear.Entry
	g := grid(k)
	for i := range g.NRows {
		cols, vals := g.Row(i)
		for p, j := range cols {
			e = append(e, linear.Entry{I: shuffle[i], J: shuffle[j], V: vals[p]})
		}
	}
	a := linear.FromEntries(k*k, k*k, e)
	order := ReverseCuthillMcKee(a)
	seen := make([]bool, k*k)
	for _, i := range order {
		if seen[i] {
			t.Fatal("not a permutation")
		}
		seen[i] = true
	}
	band := 0
	place := order.Inverse()
	for i := range a.NRows {
		cols, _ := a.Row(i)
		for _, j := range cols {
			band = max(band, int(place[i]-place[j]))
		}
	}
	if band > 3*k {
		t.Errorf("bandwidth %d of a shuffled %d x %d grid", band, k, k)
	}
}
