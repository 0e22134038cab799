package precond

import (
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// By definition L U equals A on A's pattern (Saad 2003, proposition 10.4).
func TestILUReproducesPattern(t *testing.T) {
	for _, a := range []*linear.CSR{plate(8), unsymmetric(60), line(20, -3, 5, -1)} {
		m, _ := made(t, a, "ilu:0")
		onPattern(t, m.(*factors), a, 1e-13)
	}
}

// Without fill to drop, ILU(0) is LU: M⁻¹A = I, and the growth is exact.
func TestILUOfTridiagonal(t *testing.T) {
	a := line(40, -3, 5, -1)
	m, notes := made(t, a, "ilu:0")
	var p mat.Dense
	p.Mul(inverse(m, 40), dense(a))
	for i := 0; i < 40; i++ {
		for j := 0; j < 40; j++ {
			want := 0.0
			if i == j {
				want = 1
			}
			near(t, "entry of M⁻¹A", p.At(i, j), want, 1e-13)
		}
	}
	var x mat.VecDense
	ones := mat.NewVecDense(40, nil)
	for i := 0; i < 40; i++ {
		ones.SetVec(i, 1)
	}
	if err := x.SolveVec(dense(a), ones); err != nil {
		t.Fatal(err)
	}
	near(t, "growth", notes.Growth, 9*mat.Norm(&x, math.Inf(1)), 1e-12)
}

func TestILUNamesTheRow(t *testing.T) {
	_, notes, err := tryMake(t, fromRows([][]float64{{1, 1, 0}, {1, 1, 1}, {0, 1, 1}}), "ilu:0")
	broke(t, err, 1) // 1 − 1·1 = 0
	if len(notes.Broke) != 1 || notes.Broke[0].Row != 1 {
		t.Errorf("notes %+v", notes)
	}
	_, _, err = tryMake(t, fromRows([][]float64{{1, 0, 0}, {0, 1, 0}, {1, 1, 0}}), "ilu:0")
	broke(t, err, 2)
	// A stored zero is filled by the elimination: 0 − 2·2/1 = −4.
	a := fromRows([][]float64{{1, 2}, {2, 1}})
	a.Val[3] = 0
	if _, notes := made(t, a, "ilu:0"); notes.MaxPivot != 4 {
		t.Errorf("notes %+v", notes)
	}
}
