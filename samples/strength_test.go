package samples

import (
	"fmt"
	"math"
	"testing"
)

// TestBuckling: Euler's load pi^2 EI/(4 L^2) separates definite from not; the
// second mode follows at 9 times that. The elements overrate the load by
// about (pi/(2n))^4/720 of it, nothing at n = 40.
func TestBuckling(t *testing.T) {
	near(t, "buckling load", Buckling, 2.4674011002723395, 1e-15)
	for load, want := range map[float64]int{0: 0, 0.999: 0, 0.99999: 0, 1.00001: 1, 1.2: 1, 8.999: 1, 9.001: 2, 24.9: 2, 25.1: 3} {
		got := 0
		for _, l := range eigenvalues(t, fmt.Sprintf("strut:40,load=%g", load)) {
			if l < 0 {
				got++
			}
		}
		if got != want {
			t.Errorf("load %g: %d negative eigenvalues, want %d", load, got, want)
		}
	}
}

// TestStrutBends: the tip of the unloaded strut moves by L^3/(3 EI) under a
// unit push, exactly with cubic elements; checked as A x = b for the known
// deflection x^2(3-x)/6.
func TestStrutBends(t *testing.T) {
	sys, a := build(t, "strut:8,load=0")
	x, y := make([]float64, 16), make([]float64, 16)
	for k := 1; k <= 8; k++ {
		s := float64(k) / 8
		x[2*k-2], x[2*k-1] = s*s*(3-s)/6, s-s*s/2
	}
	a.Apply(y, x)
	for i := range y {
		near(t, fmt.Sprint("row ", i), y[i], sys.B[i], 1e-11)
	}
}

// TestFrameSupports counts what the supports leave: three eigenvalues 1 of
// the identity rows and three near the springs' stiffness when clamped, three
// rigid motions unsupported, one free rotation with the hanger.
func TestFrameSupports(t *testing.T) {
	count := func(l []float64, lo, hi float64) int {
		c := 0
		for _, v := range l {
			if v >= lo && v <= hi {
				c++
			}
		}
		return c
	}
	for _, n := range []int{5, 20} {
		l := eigenvalues(t, fmt.Sprintf("frame:clamped,n=%d", n))
		if l[0] <= 0 || count(l, 1-1e-6, 1+1e-6) != 3 || count(l, 9.9e9, 1.1e10) != 3 {
			t.Errorf("clamped, n=%d: smallest %v, largest %v", n, l[:6], l[len(l)-4:])
		}
		l = eigenvalues(t, fmt.Sprintf("frame:unsupported,n=%d", n))
		scale := l[len(l)-1]
		if count(l, -1e-13*scale, 1e-13*scale) != 3 {
			t.Errorf("unsupported, n=%d: %v", n, l[:5])
		}
	}
	l := eigenvalues(t, "frame:pin,n=6,spring=1e7")
	if scale := l[len(l)-1]; math.Abs(l[0]) > 1e-13*scale || l[1] < 1e-10*scale {
		t.Errorf("pin: %v of %g", l[:3], scale)
	}
}

// TestFrameMoves: rigid motions and the hanger's rotation carry no force.
func TestFrameMoves(t *testing.T) {
	_, a := build(t, "frame:unsupported,n=4")
	x, y := make([]float64, a.NRows), make([]float64, a.NRows)
	for k := 0; k <= 12; k++ { // a small turn about the left foot
		px, py := place(k, 4)
		x[3*k], x[3*k+1], x[3*k+2] = -py, px, 1
	}
	a.Apply(y, x)
	for i, v := range y {
		near(t, fmt.Sprint("turned frame, row ", i), v/1e6, 0, 1e-12)
	}

	_, a = build(t, "frame:pin,n=4")
	x, y = make([]float64, a.NRows), make([]float64, a.NRows)
	h := 39 // unknowns of columns and deck
	x[h] = 1
	for k := 1; k <= 4; k++ { // hanging down: a turn moves it to the right
		x[h+3*k-2], x[h+3*k] = float64(k)*columnL/2/4, 1
	}
	a.Apply(y, x)
	for i, v := range y {
		near(t, fmt.Sprint("turned hanger, row ", i), v/1e6, 0, 1e-12)
	}
}

// place returns where node k of the frame stands, metres from the left foot.
func place(k, n int) (x, y float64) {
	f := float64(k%n) / float64(n)
	switch k / n {
	case 0:
		return 0, f * columnL
	case 1:
		return f * deckL, columnL
	case 2:
		return deckL, (1 - f) * columnL
	}
	return deckL, 0
}
