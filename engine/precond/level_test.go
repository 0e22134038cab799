package precond

import (
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// levels computes levels of fill densely from their definition: lev_ij is the
// least lev_ic + lev_cj + 1 over the pivots c below both.
func levels(a *linear.CSR) [][]int {
	n := a.NRows
	lev := make([][]int, n)
	for i := range lev {
		lev[i] = make([]int, n)
		for j := range lev[i] {
			lev[i][j] = 1 << 20
		}
		cols, _ := a.Row(i)
		for _, c := range cols {
			lev[i][c] = 0
		}
	}
	for c := 0; c < n; c++ {
		for i := c + 1; i < n; i++ {
			for j := c + 1; j < n; j++ {
				lev[i][j] = min(lev[i][j], lev[i][c]+lev[c][j]+1)
			}
		}
	}
	return lev
}

func TestFillLevels(t *testing.T) {
	for _, a := range []*linear.CSR{plate(6), unsymmetric(40), kershaw()} {
		lev := levels(a)
		for _, k := range []int{0, 1, 2, 5, 20} {
			p, err := filled(t.Context(), a, k)
			if err != nil {
				t.Fatal(err)
			}
			low, up := 0, 0
			for i := 0; i < a.NRows; i++ {
				at := 0
				cols, vals := p.Row(i)
				for j := 0; j < a.NRows; j++ {
					if lev[i][j] > k {
						continue
					}
					if at == len(cols) || int(cols[at]) != j || vals[at] != a.At(i, j) {
						t.Fatalf("level %d: entry (%d,%d) is missing or wrong", k, i, j)
					}
					at++
					if j < i {
						low++
					} else if j > i {
						up++
					}
				}
				if at != len(cols) {
					t.Fatalf("level %d: row %d has %d entries, want %d", k, i, len(cols), at)
				}
			}
			if l, u, exact := fillCounts(a, k); l != low || u != up || !exact {
				t.Errorf("level %d: %d and %d entries predicted, %d and %d built", k, l, u, low, up)
			}
		}
	}
}

// By definition the factors of level k reproduce A, and zero where it fills
// in, on the filled pattern.
func TestLevelsReproducePattern(t *testing.T) {
	for _, name := range []string{"ilu:1", "ilu:3", "ic:1", "ic:3"} {
		a := plate(8)
		m, notes := made(t, a, name)
		padded, err := filled(t.Context(), a, int(name[len(name)-1]-'0'))
		if err != nil {
			t.Fatal(err)
		}
		onPattern(t, m.(*factors), padded, 1e-13)
		if notes.Growth == 0 || notes.Fill <= 1 {
			t.Errorf("%s: notes %+v", name, notes)
		}
	}
}

// With every fill kept the factorisation is complete: M⁻¹A = I.
func TestAllLevelsAreExact(t *testing.T) {
	for name, a := range map[string]*linear.CSR{"ilu:20": unsymmetric(25), "ic:20": plate(5)} {
		m, _ := made(t, a, name)
		nearIdentity(t, name, m, a, 1e-12)
	}
}

// nearIdentity asserts that M⁻¹A = I.
func nearIdentity(t *testing.T, what string, m linear.Applier, a *linear.CSR, tol float64) {
	t.Helper()
	n := a.NRows
	var p mat.Dense
	p.Mul(inverse(m, n), dense(a))
	for i := 0; i < n; i++ {
		p.Set(i, i, p.At(i, i)-1)
	}
	near(t, what+": ‖M⁻¹A − I‖", mat.Norm(&p, 2), 0, tol)
}
