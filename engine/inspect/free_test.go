package inspect_test

import (
	"math"
	"math/big"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// not singular; a few digits are left.
func TestCryg2500HasOneNearlyFreeDirection(t *testing.T) {
	f := studied(t, open(t, "cryg2500.mtx"), inspect.Quick)
	s := f.Study
	if len(s.Null) != 1 || s.Null[0].Quotient > 1e-11 || s.Null[0].Quotient < 1e-14 || s.Null[0].Next < 1e-7 {
		t.Fatalf("directions %+v", s.Null)
	}
	if s.Digits < 3 || s.Digits > 5 || f.Singular.Answer == inspect.Yes {
		t.Errorf("%g digits, singular %s", s.Digits, f.Singular.Answer)
	}
	a, v := open(t, "cryg2500.mtx").Matrix(), s.Null[0].Vector
	w := make([]float64, len(v))
	a.Apply(w, v)
	if q := linear.Norm2(w) / s.Raw.Largest; q > 1e-14 {
		t.Errorf("the vector is mapped to %g of its size", q)
	}
}

// on a hinge it has one, which the unknowns of the hanger carry; clamped none.
func TestFreeMotionsOfTheFrame(t *testing.T) {
	for spec, want := range map[string]int{"frame": 0, "frame:unsupported": 3, "frame:pin": 1} {
		s := studiedSample(t, spec)
		if len(s.Null) != want {
			t.Errorf("%s: %d free directions, want %d", spec, len(s.Null), want)
		}
		for _, d := range s.Null {
			if d.Quotient > 1e-14 || d.Next < 1e-8 {
				t.Errorf("%s: quotient %g, next %g", spec, d.Quotient, d.Next)
			}
		}
	}
	for _, row := range studiedSample(t, "frame:pin").Null[0].Rows {
		if row < 183 { // the hanger's unknowns come last
			t.Errorf("row %d does not belong to the hanger", row+1)
		}
	}
}

// each of two triangles of springs that nothing holds.
func TestRigidMotionsOfTriangles(t *testing.T) {
	x := [][]float64{{0, 0}, {2, 0}, {1, 1.5}, {5, 1}, {6, 1}, {6, 3}}
	var out []linear.Entry
	spring := func(i, j int) {
		d := [2]float64{x[i][0] - x[j][0], x[i][1] - x[j][1]}
		l := math.Hypot(d[0], d[1])
		for p := range 2 {
			for q := range 2 {
				k := 100 * d[p] * d[q] / l / l / l
				out = append(out, e(2*i+p, 2*i+q, k), e(2*j+p, 2*j+q, k), e(2*i+p, 2*j+q, -k), e(2*j+p, 2*i+q, -k))
			}
		}
	}
	for _, o := range []int{0, 3} {
		spring(o, o+1)
		spring(o+1, o+2)
		spring(o+2, o)
	}
	s := ones(linear.FromEntries(12, 12, out), 17)
	s.Coordinates, s.Dofs = x, 2
	s.NearNull = [][]float64{make([]float64, 12), make([]float64, 12), make([]float64, 12)}
	for i, p := range x {
		s.NearNull[0][2*i], s.NearNull[1][2*i+1] = 1, 1
		s.NearNull[2][2*i], s.NearNull[2][2*i+1] = -p[1], p[0]
	}
	got := studied(t, s, inspect.Quick).Study.Null
	if len(got) != 6 {
		t.Fatalf("%d directions, want 3 of each triangle", len(got))
	}
	for _, d := range got {
		if d.Rigid == "" || d.Quotient > 1e-13 || d.Support > 6 {
			t.Errorf("%+v", d)
		}
	}
}

// lacks, counted by exact elimination, and A maps each to zero.
func TestFreeDirectionsOfJgl009(t *testing.T) {
	sys := open(t, "jgl009.mtx")
	free := studied(t, sys, inspect.Quick).Study.Null
	if missing := 9 - rank(sys.Matrix()); len(free) != missing || missing == 0 {
		t.Errorf("%d directions, the rank lacks %d", len(free), missing)
	}
	w := make([]float64, 9)
	for _, d := range free {
		sys.A.Apply(w, d.Vector)
		if linear.NormInf(w) > 1e-13 {
			t.Errorf("A v = %g", w)
		}
	}
}

// rank by elimination in rational numbers.
func rank(a *linear.CSR) int {
	m := rational(a)
	r := 0
	for j := range m {
		p := r
		for p < len(m) && m[p][j].Sign() == 0 {
			p++
		}
		if p == len(m) {
			continue
		}
		m[r], m[p] = m[p], m[r]
		for i := r + 1; i < len(m); i++ {
			f := new(big.Rat).Quo(m[i][j], m[r][j])
			for k := j; k < len(m); k++ {
				m[i][k].Sub(m[i][k], new(big.Rat).Mul(f, m[r][k]))
			}
		}
		r++
	}
	return r
}
