package precond

import (
	"math"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// ‖A − M‖_F/‖A‖_F is that of gonum's inverse of the dense M⁻¹, for factors of
// every kind: symmetric or not, modified, with shift, with exchanged columns.
func TestDeviationAgainstDense(t *testing.T) {
	for _, name := range []string{"ic:0", "ic:1", "ict:1e-1,2", "mic:0", "ilu:0", "ilu:2", "milu:0", "ilut:1e-1,3", "ilutp:1e-1,3,0.9"} {
		a := plate(9)
		if name[1] == 'l' {
			for i := range a.Val { // unsymmetric, with columns worth exchanging
				a.Val[i] *= 1 + 0.9*math.Sin(float64(7*i))
			}
		}
		m, _ := made(t, a, name)
		got, ok := m.(interface {
			Deviation(*linear.CSR) (float64, bool)
		}).Deviation(a)
		if !ok {
			t.Fatalf("%s: not computed", name)
		}
		if p, pivots := m.(*permuted); pivots && slices.IsSorted(p.col) {
			t.Errorf("%s: no column was exchanged", name)
		}
		var product, gap mat.Dense
		if err := product.Inverse(inverse(m, a.NRows)); err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		gap.Sub(dense(a), &product)
		want := mat.Norm(&gap, 2) / mat.Norm(dense(a), 2) // gonum's "2" of a matrix is Frobenius
		if !(math.Abs(got-want) <= 1e-10*want) || !(want > 1e-3) {
			t.Errorf("%s: %.15g, want %.15g", name, got, want)
		}
	}
}

// Nothing is left out of a tridiagonal matrix, and of Kershaw's the shift is
// what differs at least: on the pattern M is A + shift diag(A), and ‖A‖_F² is
// 4·9 + 8·4, that of its diagonal 36.
func TestDeviationOfCompleteFactors(t *testing.T) {
	m, _ := made(t, line(50, -1, 2.5, -1.2), "ilu:0")
	if got, ok := m.(*factors).Deviation(line(50, -1, 2.5, -1.2)); !ok || !(got < 1e-15) {
		t.Errorf("tridiagonal: %g, %v", got, ok)
	}
	m, notes := made(t, kershaw(), "ic:0")
	if got, ok := m.(*factors).Deviation(kershaw()); !ok || notes.Shift == 0 || !(got > 0.999*notes.Shift*6/math.Sqrt(68)) {
		t.Errorf("shifted by %g: %g, %v", notes.Shift, got, ok)
	}
}
