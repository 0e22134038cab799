package precond

import (
	"math"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

// uneven changes the entries below the diagonal by rounding and, if onesided,
// adds entries that are nothing but rounding and have none across.
func uneven(t *testing.T, a *linear.CSR, onesided bool) *linear.CSR {
	t.Helper()
	n := a.NRows
	var e []linear.Entry
	noise := make([]float64, len(a.Val)+n)
	linear.Uniform(noise, 3)
	for i := range n {
		cols, vals := a.Row(i)
		for k, j := range cols {
			v := vals[k]
			if int(j) < i {
				v *= 1 + 8*0x1p-53*noise[len(e)]
			}
			e = append(e, linear.Entry{I: i, J: int(j), V: v})
		}
		if j := (i*37 + 11) % n; onesided && j != i && a.At(i, j) == 0 && a.At(j, i) == 0 {
			e = append(e, linear.Entry{I: i, J: j, V: 1e-16 * noise[len(e)]})
		}
	}
	m := linear.FromEntries(n, n, e)
	if m.ExactlySymmetric() || !m.Symmetric() {
		t.Fatal("the matrix is not symmetric to rounding alone")
	}
	return m
}

// Rounding differences between a_ij and a_ji leave every preconditioner for
// symmetric matrices what it is without them; entries that stand on one side
// only may add to its pattern, and leave it symmetric.
func TestSymmetricToRounding(t *testing.T) {
	clean := plate(13)
	noisy, onesided := uneven(t, clean, false), uneven(t, clean, true)
	n := clean.NRows
	u, v, x, y := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	linear.Uniform(u, 1)
	linear.Uniform(v, 2)
	tried := 0
	for _, c := range Catalogue {
		if c.Assumes&linear.AssumesSymmetric == 0 || c.InUserUnits {
			continue
		}
		for _, form := range forms(c) {
			want, _ := made(t, clean, form)
			m, _ := made(t, noisy, form)
			want.Apply(x, u)
			m.Apply(y, u)
			apart(t, form, x, y)
			m, _ = made(t, onesided, form)
			m.Apply(x, u)
			m.Apply(y, v)
			if a, b := linear.Dot(x, v), linear.Dot(y, u); !(math.Abs(a-b) <= 1e-12*math.Abs(a)) && !strings.HasSuffix(form, "single") {
				t.Errorf("%s: v'Mu %g, u'Mv %g", form, a, b)
			}
			tried++
		}
	}
	if tried < 4 {
		t.Errorf("only %d preconditioners need a symmetric matrix", tried)
	}
}
