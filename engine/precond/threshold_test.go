package precond

import (
	"math"
	"math/rand/v2"
	"slices"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// Nothing dropped: the factorisations are complete.
func TestNothingDroppedIsExact(t *testing.T) {
	for name, a := range map[string]*linear.CSR{
		"ilut:0,1000": unsymmetric(60), "ilutp:0,1000": unsymmetric(60), "ilutp:0,1000,1": scrambled(40),
		"ict:0,1000": plate(8), "ilut:0,64": plate(8),
	} {
		m, _ := made(t, a, name)
		nearIdentity(t, name, m, a, 1e-11)
	}
}

// scrambled returns a matrix without diagonal that a column exchange makes
// dominant.
func scrambled(n int) *linear.CSR {
	r := rand.New(rand.NewPCG(3, 5))
	var e []linear.Entry
	for i, j := range r.Perm(n) {
		if i != j {
			e = append(e, linear.Entry{I: i, J: j, V: 6})
		} else {
			e = append(e, linear.Entry{I: i, J: j, V: 7})
		}
		for k := 0; k < 3; k++ {
			if c := r.IntN(n); c != i && c != j {
				e = append(e, linear.Entry{I: i, J: c, V: r.Float64() - 0.5})
			}
		}
	}
	return linear.FromEntries(n, n, e)
}

// ilut against the same rules applied to dense rows.
func TestILUTRules(t *testing.T) {
	const n, tau, keep = 70, 2e-2, 4
	a := unsymmetric(n)
	m, _ := made(t, a, "ilut:0.02,4")
	f := m.(*factors)
	l, u := mat.NewDense(n, n, nil), mat.NewDense(n, n, nil)
	for i := 0; i < n; i++ {
		_, vals := a.Row(i)
		norm := 0.0
		for _, v := range vals {
			norm += v * v
		}
		drop := tau * math.Sqrt(norm)
		w := make([]float64, n)
		for j := range w {
			w[j] = a.At(i, j)
		}
		low := make([]float64, n)
		for c := 0; c < i; c++ {
			if math.Abs(w[c]) <= drop {
				continue
			}
			low[c] = w[c] / u.At(c, c)
			for j := c + 1; j < n; j++ {
				w[j] -= low[c] * u.At(c, j)
			}
		}
		for j := i + 1; j < n; j++ {
			if math.Abs(w[j]) <= drop {
				w[j] = 0
			}
		}
		u.Set(i, i, w[i])
		for _, j := range biggest(low[:i], keep) {
			l.Set(i, j, low[j])
		}
		for _, j := range biggest(w[i+1:], keep) {
			u.Set(i, i+1+j, w[i+1+j])
		}
	}
	for i := 0; i < n; i++ {
		near(t, "pivot", 1/f.inverse[i], u.At(i, i), 1e-13)
		for j := 0; j < n; j++ {
			if j < i {
				near(t, "entry of L", f.lower.At(i, j), l.At(i, j), 1e-13)
			} else if j > i {
				near(t, "entry of U", f.upper.At(i, j)*u.At(i, i), u.At(i, j), 1e-13)
			}
		}
	}
}

// biggest returns the places of the k largest nonzero sizes in v.
func biggest(v []float64, k int) []int {
	var at []int
	for j, x := range v {
		if x != 0 {
			at = append(at, j)
		}
	}
	slices.SortStableFunc(at, func(x, y int) int {
		return int(math.Copysign(1, math.Abs(v[y])-math.Abs(v[x])))
	})
	return at[:min(k, len(at))]
}

// No column of L has more than p entries over A's, and all are above the
// threshold; more entries make a better M.
func TestICTRules(t *testing.T) {
	a := plate(16)
	last := math.Inf(1)
	for _, written := range []string{"ict:0.1,0", "ict:0.01,2", "ict:0.001,5", "ict:0.0001,20"} {
		m, notes := made(t, a, written)
		_, v := lookup(t, written)
		f := m.(*factors)
		for j := 0; j < a.NRows; j++ {
			cols, _ := a.Row(j)
			at, _ := diagonal(a, j)
			rows, vals := f.upper.Row(j)
			if most := len(cols) - (at - a.Ptr[j]) - 1 + v.Int("p"); len(rows) > most {
				t.Fatalf("%s: %d entries in column %d, at most %d", written, len(rows), j, most)
			}
			for _, x := range vals {
				if math.Abs(x)/f.inverse[j] <= v.Real("tau")*4 { // no row of A has a norm below 4
					t.Fatalf("%s: entry %g of column %d is to be dropped", written, x, j)
				}
			}
		}
		k := condition(t, m, a)
		if !(k <= last) {
			t.Errorf("%s: condition %g, coarser factors give %g", written, k, last)
		}
		last = k
		if notes.Shift != 0 {
			t.Errorf("%s: notes %+v", written, notes)
		}
	}
	if last > 1.1 {
		t.Errorf("the finest factors leave condition %g", last)
	}
}

// A vanishing pivot is named by ilut, and gone round by ilutp.
func TestThresholdPivots(t *testing.T) {
	a := fromRows([][]float64{{0, 2, 0}, {1, 0, 0}, {0, 1, 3}})
	_, notes, err := tryMake(t, a, "ilut:0,3")
	broke(t, err, 0)
	if len(notes.Broke) != 1 {
		t.Errorf("notes %+v", notes)
	}
	m, _ := made(t, a, "ilutp:0,3")
	nearIdentity(t, "ilutp", m, a, 1e-14)
	mt, ok := m.(linear.Transposer)
	if !ok {
		t.Fatal("no transpose")
	}
	y := make([]float64, 3)
	mt.ApplyT(y, []float64{1, 2, 3}) // Aᵀ y = x
	for i, want := range []float64{1, 2, 3} {
		back := make([]float64, 3)
		a.ApplyT(back, y)
		near(t, "entry of Aᵀy", back[i], want, 1e-14)
	}
	_, _, err = tryMake(t, fromRows([][]float64{{1, 1}, {1, 1}}), "ilutp:0,3")
	broke(t, err, 1)
	_, _, err = tryMake(t, fromRows([][]float64{{1, 0}, {0, -1}}), "ict")
	broke(t, err, 1)
}

func TestLargest(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for range 200 {
		n := 1 + r.IntN(30)
		v := make([]float64, n)
		for i := range v {
			v[i] = float64(r.IntN(9) - 4)
		}
		cols := make([]int32, n)
		for i := range cols {
			cols[i] = int32(i)
		}
		p := r.IntN(n + 2)
		want := slices.Clone(v)
		slices.SortFunc(want, func(x, y float64) int { return int(math.Abs(y) - math.Abs(x)) })
		_, m := largest(cols, v, p, nil)
		if m != min(n, p) || !slices.IsSorted(cols[:m]) {
			t.Fatalf("%d of %d kept: %v", m, n, cols[:m])
		}
		sum, wanted := 0.0, 0.0
		for i := 0; i < m; i++ {
			sum += math.Abs(v[i])
			wanted += math.Abs(want[i])
		}
		if sum != wanted {
			t.Fatalf("sizes kept sum to %g, the largest to %g", sum, wanted)
		}
	}
}
