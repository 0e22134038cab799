package precond

import (
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// One part without overlap is its local solver, bit for bit.
func TestRASOfOnePart(t *testing.T) {
	for name, local := range map[string]string{"ras:1,0,ilu": "ilu:0", "ras:1,2,ic": "ic:0"} {
		a := plate(9)
		m, _ := made(t, a, name)
		l, _ := made(t, a, local)
		if !mat.Equal(inverse(m, 81), inverse(l, 81)) {
			t.Errorf("%s differs from %s", name, local)
		}
	}
	m, _ := made(t, unsymmetric(60), "ras:1,0,lu")
	nearIdentity(t, "one part solved exactly", m, unsymmetric(60), 1e-12)
}

// Σ R̃ᵀ A_i⁻¹ R by dense inverses, and the parts: each unknown has one owner,
// and parts are of nearly equal size.
func TestRAS(t *testing.T) {
	for _, a := range []*linear.CSR{plate(8), unsymmetric(57)} {
		n := a.NRows
		m, _ := made(t, a, "ras:5,1,lu")
		want := mat.NewDense(n, n, nil)
		owners := make([]int, n)
		for _, p := range m.(*ras).parts {
			own := 0
			sub := mat.NewDense(len(p.rows), len(p.rows), nil)
			for i, r := range p.rows {
				for j, c := range p.rows {
					sub.Set(i, j, a.At(int(r), int(c)))
				}
				if p.own[i] {
					owners[r]++
					own++
				}
			}
			if own < n/5-1 || own > n/5+1 {
				t.Errorf("a part owns %d of %d unknowns", own, n)
			}
			var inv mat.Dense
			if err := inv.Inverse(sub); err != nil {
				t.Fatal(err)
			}
			for i, r := range p.rows {
				if !p.own[i] {
					continue
				}
				for j, c := range p.rows {
					want.Set(int(r), int(c), inv.At(i, j))
				}
			}
		}
		for i, k := range owners {
			if k != 1 {
				t.Errorf("unknown %d has %d owners", i, k)
			}
		}
		if !mat.EqualApprox(inverse(m, n), want, 1e-12) {
			t.Error("M⁻¹ is not the sum of the parts")
		}
	}
}

func TestRASBreaksDown(t *testing.T) {
	a := fromRows([][]float64{{2, 0, 0, 0}, {0, 2, 0, 0}, {0, 0, 1, 1}, {0, 0, 1, 1}})
	for local, row := range map[string]int{"ilu": 3, "lu": 2} { // the two rows are equal: either may be called the bad one
		_, _, err := tryMake(t, a, "ras:2,0,"+local)
		broke(t, err, row)
	}
}

// Layers of neighbours on a line.
func TestWiden(t *testing.T) {
	a := line(10, -1, 2, -1)
	got := graph{a, a.Transpose()}.widen([]int32{4, 5}, 2, make([]int32, 10))
	if !slices.Equal(got, []int32{2, 3, 4, 5, 6, 7}) {
		t.Errorf("widened to %v", got)
	}
}
