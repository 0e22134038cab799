package spectrum_test

import (
	"math"
	"testing"

	"dwindle/engine/spectrum"
)

// The eigenvalues of tridiag(−1, 2, −1) of order n are 4 sin²(kπ/(2(n+1))), and
// the vectors solve the problem (closed form).
func TestSymmetric(t *testing.T) {
	const n = 12
	a := make([]float64, n*n)
	for i := range n {
		a[i*n+i] = 2
		if i+1 < n {
			a[i*n+i+1] = -1 // the lower triangle stays zero: it is not read
		}
	}
	values, work := make([]float64, n), make([]float64, 3*n)
	if !spectrum.Symmetric(a, values, work) {
		t.Fatal("no eigenvalues")
	}
	for k, v := range values {
		want := 4 * math.Pow(math.Sin(float64(k+1)*math.Pi/(2*(n+1))), 2)
		if math.Abs(v-want) > 1e-14*4 {
			t.Errorf("value %d: %.16g, want %.16g", k, v, want)
		}
		for i := range n {
			y := 2 * a[i*n+k]
			if i > 0 {
				y -= a[(i-1)*n+k]
			}
			if i+1 < n {
				y -= a[(i+1)*n+k]
			}
			if want := v * a[i*n+k]; math.Abs(y-want) > 1e-14*8 {
				t.Errorf("vector %d, entry %d: %g, want %g", k, i, y, want)
			}
		}
	}
	a[3] = math.Inf(1)
	if spectrum.Symmetric(a, values, work) {
		t.Error("an infinite entry gives eigenvalues")
	}
}
