package inspect_test

import (
	"math"
	"math/rand/v2"
	"slices"
	"strconv"
	"strings"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// printed rounds to that many significant digits, as a file would.
func printed(v float64, digits int) float64 {
	w, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'e', digits-1, 64), 64)
	return w
}

func TestDefiniteness(t *testing.T) {
	for _, c := range []struct {
		name         string
		a            *linear.CSR
		digits       int
		pd, nd, semi inspect.Answer
		sure         inspect.Certainty // of the first
		rows         []int             // of the first; nil: not checked
	}{
		{"identity", dense([]float64{1}), 17, inspect.Yes, inspect.No, inspect.Yes, inspect.Proved, nil},
		{"dominant", dense([]float64{2, -1}, []float64{-1, 2}), 2, inspect.Yes, inspect.No, inspect.Yes, inspect.Proved, nil},
		{"weakly dominant, few digits", dense([]float64{1, -1}, []float64{-1, 2}), 2, inspect.Yes, inspect.No, inspect.Yes, inspect.Proved, nil},
		{"hardly dominant, few digits", dense([]float64{1, 0.99}, []float64{0.99, 1}), 2, inspect.Yes, inspect.No, inspect.Yes, inspect.Measured, nil},
		{"not dominant", dense([]float64{2, 1.5, 1}, []float64{1.5, 2, 1}, []float64{1, 1, 2}), 17, inspect.Yes, inspect.No, inspect.Yes, inspect.Proved, nil},
		{"all rows of an odd cycle equal", dense([]float64{2, 1, 1}, []float64{1, 2, 1}, []float64{1, 1, 2}), 17, inspect.Yes, inspect.No, inspect.Yes, inspect.Proved, nil},
		{"opposite sign", dense([]float64{-2, 1}, []float64{1, -2}), 17, inspect.No, inspect.Yes, inspect.No, inspect.Proved, []int{0, 1}},
		{"opposite sign, not dominant", dense([]float64{-2, 1.5, 1}, []float64{1.5, -2, 1}, []float64{1, 1, -6}), 17, inspect.No, inspect.Yes, inspect.No, inspect.Proved, []int{2, 0, 1}},
		{"negative entry", dense([]float64{5, 0}, []float64{0, -1e-300}), 1, inspect.No, inspect.No, inspect.No, inspect.Proved, []int{1}},
		{"missing entry", dense([]float64{5, 1}, []float64{1, 0}), 17, inspect.No, inspect.No, inspect.No, inspect.Proved, []int{1}},
		{"empty row", dense([]float64{5, 0}, []float64{0, 0}), 17, inspect.No, inspect.No, inspect.Yes, inspect.Proved, []int{1}},
		{"minor", dense([]float64{1, 0, 2}, []float64{0, 9, 0}, []float64{2, 0, 3}), 3, inspect.No, inspect.No, inspect.No, inspect.Proved, []int{0, 2}},
		{"minor within digits", dense([]float64{1, 1.01}, []float64{1.01, 1}), 2, inspect.No, inspect.No, inspect.No, inspect.Measured, []int{0, 1}},
		{"minor negative by one ulp", dense([]float64{1, math.Nextafter(1, 2)}, []float64{math.Nextafter(1, 2), 1}), 17, inspect.No, inspect.No, inspect.No, inspect.Proved, []int{0, 1}},
		{"minor of far units", dense([]float64{1e-200, 1.5}, []float64{1.5, 1e200}), 17, inspect.No, inspect.No, inspect.No, inspect.Proved, []int{0, 1}},
		{"not symmetric", dense([]float64{2, 1}, []float64{0, 2}), 17, inspect.Unknown, inspect.No, inspect.Unknown, "", nil},
		{"not symmetric, negative entry", dense([]float64{-2, 1}, []float64{0, 2}), 17, inspect.No, inspect.No, inspect.No, inspect.Proved, []int{0}},
		{"symmetric to rounding", dense([]float64{2, 1}, []float64{math.Nextafter(1, 2), 2}), 17, inspect.Yes, inspect.No, inspect.Yes, inspect.Proved, nil},
		{"hidden", dense([]float64{2, 1.9, -1.9}, []float64{1.9, 2, 1.9}, []float64{-1.9, 1.9, 2}), 17, inspect.No, inspect.No, inspect.No, inspect.Proved, nil},
	} {
		f := inspected(t, ones(c.a, c.digits))
		expect(t, c.name+": positive definite", f.PositiveDefinite, c.pd, c.sure)
		expect(t, c.name+": negative definite", f.NegativeDefinite, c.nd, "")
		expect(t, c.name+": semidefinite", f.Semidefinite, c.semi, "")
		if c.rows != nil && !slices.Equal(f.PositiveDefinite.Rows, c.rows) {
			t.Errorf("%s: rows %v, want %v", c.name, f.PositiveDefinite.Rows, c.rows)
		}
	}
}

// cantilever is the stiffness of a clamped beam of uneven elements: two
// unknowns a node, deflection and rotation.
func cantilever(elements int, length func(k int) float64) *linear.CSR {
	var out []linear.Entry
	for k := range elements {
		h := length(k)
		c := 1 / (h * h * h)
		m := [4][4]float64{{12, 6 * h, -12, 6 * h}, {6 * h, 4 * h * h, -6 * h, 2 * h * h},
			{-12, -6 * h, 12, -6 * h}, {6 * h, 2 * h * h, -6 * h, 4 * h * h}}
		for i := range 4 {
			for j := range 4 {
				if p, q := 2*(k-1)+i, 2*(k-1)+j; p >= 0 && q >= 0 {
					out = append(out, e(p, q, c*m[i][j]))
				}
			}
		}
	}
	n := 2 * elements
	return linear.FromEntries(n, n, out)
}

// A long beam has an eigenvalue far below its entries: rounding to six digits
// makes the printed matrix indefinite, which says nothing about the beam.
func TestDigitsOfACantilever(t *testing.T) {
	a := cantilever(50, func(k int) float64 { return 1 + 0.2*math.Sin(float64(k)) })
	f := inspected(t, ones(a, 17))
	expect(t, "17 digits", f.PositiveDefinite, inspect.Yes, inspect.Proved)
	for k, v := range a.Val {
		a.Val[k] = printed(v, 6)
	}
	if w := inertia(a); w.negative == 0 {
		t.Fatalf("the printed matrix should be indefinite: %+v", w)
	}
	f = inspected(t, ones(a, 6))
	expect(t, "6 digits", f.PositiveDefinite, inspect.No, inspect.Measured)
	expect(t, "6 digits, semidefinite", f.Semidefinite, inspect.No, inspect.Measured)
	if !strings.Contains(f.PositiveDefinite.Why, "6 digits") || !strings.Contains(f.PositiveDefinite.Why, "17 digits") {
		t.Errorf("no word on the digits: %s", f.PositiveDefinite.Why)
	}
	expect(t, "as if these were all digits", inspected(t, ones(a, 17)).PositiveDefinite, inspect.No, inspect.Proved)
}

// No proved statement may contradict exact rational arithmetic, for the matrix
// itself and, with few digits, for any within them.
func TestProvedIsTrue(t *testing.T) {
	rng := rand.New(rand.NewPCG(7, 9))
	seen := map[string]int{}
	for trial := range 1500 {
		a := randomSymmetric(rng)
		digits := []int{17, 17, 3, 2}[trial%4]
		f := inspected(t, ones(a, digits))
		for k := range 3 {
			m := a
			if k > 0 {
				if digits == 17 {
					break
				}
				m = shaken(rng, a, f.Delta, true)
			}
			w := inertia(m)
			n := m.NRows
			check(t, m, "positive definite", f.PositiveDefinite, w.positive == n, seen)
			check(t, m, "negative definite", f.NegativeDefinite, w.negative == n, seen)
			check(t, m, "semidefinite", f.Semidefinite, w.negative == 0, seen)
			check(t, m, "singular", f.Singular, w.zero > 0, seen)
		}
	}
	for _, s := range []string{"positive definite", "negative definite", "semidefinite", "singular"} {
		if seen[s+" yes"] < 30 || seen[s+" no"] < 30 {
			t.Errorf("%s was proved %d times, disproved %d times: too few to judge", s, seen[s+" yes"], seen[s+" no"])
		}
	}
}

func TestProvedSingularIsTrueUnsymmetric(t *testing.T) {
	rng := rand.New(rand.NewPCG(8, 9))
	seen := map[string]int{}
	for range 1000 {
		n := 1 + rng.IntN(5)
		var out []linear.Entry
		for i := range n {
			for j := range n {
				if i == j || rng.IntN(3) == 0 {
					out = append(out, e(i, j, float64(rng.IntN(7)-3)))
				}
			}
		}
		a := linear.FromEntries(n, n, out)
		check(t, a, "singular", inspected(t, ones(a, 17)).Singular, !regular(a), seen)
	}
	if seen["singular yes"] < 50 || seen["singular no"] < 50 {
		t.Errorf("one-sided: %v", seen)
	}
}

// check holds a proved fact against the truth.
func check(t *testing.T, a *linear.CSR, what string, f inspect.Fact, is bool, seen map[string]int) {
	t.Helper()
	if f.Answer == "" {
		t.Fatalf("%s was not answered", what)
	}
	if f.Certainty != inspect.Proved || f.Answer == inspect.Unknown {
		return
	}
	seen[what+" "+string(f.Answer)]++
	if (f.Answer == inspect.Yes) != is {
		t.Fatalf("%s: %s is proved (%s), the truth is %v for %+v", what, f.Answer, f.Why, is, a)
	}
}

// randomSymmetric makes small integer matrices of many kinds: arbitrary,
// dominant, singular products, Laplacians; of either sign.
func randomSymmetric(rng *rand.Rand) *linear.CSR {
	n := 1 + rng.IntN(6)
	m := make([][]float64, n)
	for i := range m {
		m[i] = make([]float64, n)
	}
	kind := rng.IntN(4)
	for i := range m {
		for j := range i {
			if rng.IntN(2) == 0 {
				m[i][j] = float64(rng.IntN(9) - 4)
			}
			if kind == 2 {
				m[i][j] = -math.Abs(m[i][j])
			}
			m[j][i] = m[i][j]
		}
	}
	for i := range m {
		sum := 0.0
		for j := range m {
			if j != i {
				sum += math.Abs(m[i][j])
			}
		}
		m[i][i] = [4]float64{float64(rng.IntN(9) - 1), sum + float64(rng.IntN(2)), sum, 1 + sum*rng.Float64()}[kind]
	}
	if rng.IntN(3) == 0 {
		for i := range m {
			for j := range m {
				m[i][j] = -m[i][j]
			}
		}
	}
	return dense(m...)
}
