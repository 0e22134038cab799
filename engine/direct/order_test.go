package direct

import (
	"math/rand/v2"
	"testing"

	"dwindle/engine/linear"
)

// box is the 7-point operator on k x k x k points.
func box(k int) *linear.CSR {
	var e []linear.Entry
	for i := range k * k * k {
		e = append(e, linear.Entry{I: i, J: i, V: 6})
		for _, s := range []struct {
			at, step int
		}{{i % k, 1}, {i / k % k, k}, {i / k / k, k * k}} {
			if s.at > 0 {
				e = append(e, linear.Entry{I: i, J: i - s.step, V: -1}, linear.Entry{I: i - s.step, J: i, V: -1})
			}
		}
	}
	return linear.FromEntries(k*k*k, k*k*k, e)
}

// shuffledRows is the matrix in a random symmetric order.
func shuffledRows(rng *rand.Rand, a *linear.CSR) *linear.CSR {
	p := linear.Natural(a.NRows)
	rng.Shuffle(len(p), func(i, j int) { p[i], p[j] = p[j], p[i] })
	return a.Permute(p, p)
}

// randomPattern is a symmetric matrix with some rows far denser than others.
func randomPattern(rng *rand.Rand, n, edges int) *linear.CSR {
	return symmetricOf(n, func(i, j int) float64 {
		if i == j {
			return 10
		}
		if rng.IntN(n) < edges || j%17 == 0 && rng.IntN(3) == 0 {
			return -1
		}
		return 0
	})
}

// bruteCounts eliminates on dense patterns: the oracle of fill.
func bruteCounts(a *linear.CSR, order linear.Permutation) (parent []int32, count []int) {
	n := a.NRows
	place := order.Inverse()
	full := make([][]bool, n)
	for i := range full {
		full[i] = make([]bool, n)
	}
	for i := range n {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if vals[k] != 0 {
				full[place[i]][place[j]], full[place[j]][place[i]] = true, true
			}
		}
	}
	for k := range n {
		parent = append(parent, -1)
		count = append(count, 1)
		for i := k + 1; i < n; i++ {
			if !full[i][k] {
				continue
			}
			count[k]++
			if parent[k] < 0 {
				parent[k] = int32(i)
			}
			for j := k + 1; j < n; j++ {
				full[i][j] = full[i][j] || full[k][j]
			}
		}
	}
	return parent, count
}

// Elimination tree and column counts equal those of an elimination on dense
// patterns, for every order.
func TestTreeAndCounts(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 5))
	for trial := range 40 {
		n := 1 + rng.IntN(70)
		a := randomPattern(rng, n, 1+rng.IntN(4))
		for _, how := range Orderings {
			order := Order(a, Ordering(how))
			if len(order) != n || !order.Valid() {
				t.Fatalf("trial %d: %s gives no permutation: %v", trial, how, order)
			}
			g := patternOf(a)
			parent := eliminationTree(g, order)
			if want, _ := bruteCounts(a, order); !equal(parent, want) {
				t.Fatalf("trial %d, %s: tree %v, want %v", trial, how, parent, want)
			}
			post := postorder(parent)
			order, parent = compose(order, post), relabel(parent, post)
			tree, want := bruteCounts(a, order)
			if got := columnCounts(g, order, parent); !equal(parent, tree) || !equal(got, want) {
				t.Fatalf("trial %d, %s: tree %v and counts %v, want %v and %v", trial, how, parent, got, tree, want)
			}
		}
	}
}

func equal[E comparable](x, y []E) bool {
	if len(x) != len(y) {
		return false
	}
	for i := range x {
		if x[i] != y[i] {
			return false
		}
	}
	return true
}

// fillOf returns the entries of the Cholesky factor.
func fillOf(a *linear.CSR, order linear.Permutation) int {
	g := patternOf(a)
	parent := eliminationTree(g, order)
	post := postorder(parent)
	total := 0
	for _, c := range columnCounts(g, compose(order, post), relabel(parent, post)) {
		total += c
	}
	return total
}

// On shuffled grids the orders keep the fill near that of the best known
// ones, for which n·log n in two dimensions holds (George 1973): the bounds
// are measured here, with 15 % to spare, and far below the natural order of
// the grid itself.
func TestFill(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 3))
	for _, c := range []struct {
		name    string
		a       *linear.CSR
		amd, nd int
	}{
		{"plate 100", grid(100), 237_000, 204_000},
		{"box 20", box(20), 1_130_000, 667_000},
	} {
		natural := fillOf(c.a, linear.Natural(c.a.NRows))
		a := shuffledRows(rng, c.a)
		amd, nd, rcm := fillOf(a, MinimumDegree(a)), fillOf(a, NestedDissection(a)), fillOf(a, ReverseCuthillMcKee(a))
		t.Logf("%s: natural %d, rcm %d, amd %d, nd %d", c.name, natural, rcm, amd, nd)
		if amd > c.amd || nd > c.nd || amd > natural/2 || nd > natural/2 || rcm > natural*11/10 {
			t.Errorf("%s: natural %d, rcm %d, amd %d, nd %d", c.name, natural, rcm, amd, nd)
		}
	}
}
