package precond

import (
	"testing"

	"dwindle/engine/linear"
)

// The modified factorisations keep the row sums: M⁻¹(A·1) = 1, and agree with
// A on its pattern off the diagonal.
func TestModifiedKeepsRowSums(t *testing.T) {
	for name, a := range map[string]*linear.CSR{"milu": unsymmetric(60), "milu:0": plate(9), "mic": plate(11), "mic:0": plate(7)} {
		m, notes := made(t, a, name)
		n := a.NRows
		x, y := make([]float64, n), make([]float64, n)
		for i := range x {
			x[i] = 1
		}
		a.Apply(y, x)
		m.Apply(x, y)
		for i := range x {
			near(t, name+": entry of M⁻¹A1", x[i], 1, 1e-12)
		}
		if notes.Shift != 0 || notes.MinPivot <= 0 {
			t.Errorf("%s: notes %+v", name, notes)
		}
	}
}

// Condition numbers of M⁻¹A for the 5-point operator, recomputed with NumPy in
// double precision. The smallest eigenvalue is 1 (Gustafsson 1978), so that
// the condition number is the largest.
func TestConditionOfMIC(t *testing.T) {
	for n, want := range map[int]float64{8: 2.4991, 16: 4.7554} {
		m, _ := made(t, plate(n), "mic:0")
		near(t, "mic:0 condition", condition(t, m, plate(n)), want, 1e-4/want)
	}
}

// On a semi-definite matrix the last pivot vanishes; a shift repairs it and is
// told.
func TestMICOnSingular(t *testing.T) {
	a := line(50, -1, 2, -1)
	a.Val[0], a.Val[len(a.Val)-1] = 1, 1
	_, notes := made(t, a, "mic:0")
	if len(notes.Broke) == 0 || notes.Broke[0].Row != 49 || notes.Shift == 0 {
		t.Errorf("notes %+v", notes)
	}
	_, _, err := tryMake(t, fromRows([][]float64{{1, 0}, {0, -1}}), "mic:0")
	broke(t, err, 1)
	_, _, err = tryMake(t, fromRows([][]float64{{1, 1}, {1, 1}}), "milu:0")
	broke(t, err, 1)
}
