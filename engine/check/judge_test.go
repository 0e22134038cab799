package check

import (
	"math"
	"strings"
	"testing"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
)

// Too large to be factorised: the Ritz values bound the condition from below.
// That of the Laplacian of order n is cot²(π/(2(n+1))).
func TestConditionWithoutAFactor(t *testing.T) {
	const n = 60
	b, x := make([]float64, n), make([]float64, n)
	linear.Uniform(b, 2)
	a := asked(t, laplace(n), b, x, func(q *Question) { q.Factor = direct.Limits{} })
	tan := math.Tan(math.Pi / (2 * (n + 1)))
	if want := 1 / (tan * tan); a.Factor != nil || a.Running.Condition > want*(1+1e-9) || a.Running.Condition < 0.99*want {
		t.Errorf("condition %g, truly %g; %q", a.Running.Condition, want, a.NoFactor)
	}
	if text := strings.Join(a.Hints, "\n"); !strings.Contains(text, "the condition of A is at least 1.51e+03") {
		t.Errorf("%s", text)
	}
}

func TestWhatElseIsWrong(t *testing.T) {
	rows := [][]float64{{4, 1, 0}, {0, 3, 1}, {2, 0, 5}}
	m, x := dense(rows...), []float64{1.5, -0.25, 3}
	b, bt := make([]float64, 3), make([]float64, 3)
	m.Apply(b, x)
	m.ApplyT(bt, x)
	negative, thousand := make([]float64, 3), make([]float64, 3)
	linear.Scale(negative, -1, b)
	linear.Scale(thousand, 1000, b)
	for _, c := range []struct {
		what string
		b    []float64
		want string
	}{
		{"transposed", bt, "x solves A'x = b"},
		{"opposite sign", negative, "-1 x solves the system"},
		{"other units", thousand, "1e+03 x solves the system"},
	} {
		a := asked(t, m, c.b, x, nil)
		if text := strings.Join(a.Hints, "\n"); a.Solved || !strings.Contains(text, c.want) {
			t.Errorf("%s: %v\n%s", c.what, a.Solved, text)
		}
	}
	if a := asked(t, m, b, x, nil); !a.Solved || strings.Contains(strings.Join(a.Hints, "\n"), "solves") {
		t.Errorf("a solution: %s %q", a.Verdict, a.Hints)
	}
}

// A is singular: nothing is said about digits, and x = 0 is not solved. The
// second has the null vector (3, 7), which no row sum shows, and a factor that
// rounding lets through.
func TestSingular(t *testing.T) {
	x, y := 1/3., 1/7.
	for _, m := range []*linear.CSR{
		dense([]float64{1, -1}, []float64{-1, 1}),
		dense([]float64{x * x, -x * y}, []float64{-x * y, y * y}),
	} {
		a := asked(t, m, []float64{1 / m.At(1, 1), 1 / -m.At(0, 1)}, []float64{0, 0}, nil)
		if a.Factor != nil || !strings.Contains(a.NoFactor, "singular") {
			t.Errorf("factor %+v, %q", a.Factor, a.NoFactor)
		}
		if text := strings.Join(a.Hints, "\n"); a.Solved || strings.Contains(text, "digits") {
			t.Errorf("%s\n%s", a.Verdict, text)
		}
	}
	a := asked(t, dense([]float64{1, -1}, []float64{-1, 1}), []float64{1, 1}, []float64{0, 0}, nil)
	if text := strings.Join(a.Hints, "\n"); !strings.Contains(text, "least-squares") {
		t.Errorf("%q", text)
	}
}

// A solution printed with five digits is told to be limited by them.
func TestFewPrintedDigits(t *testing.T) {
	const n = 50
	m, b, x := laplace(n), make([]float64, n), make([]float64, n)
	for i := range n { // b = 1: x_i = (i+1)(n−i)/2, times 1/3 to have many digits
		b[i] = 1. / 3
		x[i] = math.Round(float64((i+1)*(n-i))/6*1e2) / 1e2
	}
	a := asked(t, m, b, x, func(q *Question) { q.Said = &Said{Text: "1.2345e-13", Value: 1.2345e-13} })
	if a.Said == nil || !strings.Contains(a.Said.Claim, "x is written with 5 digits") {
		t.Errorf("its number: %+v", a.Said)
	}
	if a.Solved || a.Digits != 5 || !strings.Contains(strings.Join(a.Hints, "\n"), "written with 5 digits") {
		t.Errorf("%d digits: %s %q", a.Digits, a.Verdict, a.Hints)
	}
}

// Converged in the norm, one row in small units unsolved: told beside the
// verdict, by its label.
func TestUnsolvedRowIsNamed(t *testing.T) {
	m := dense([]float64{1, 0}, []float64{0, 1e-12})
	a := asked(t, m, []float64{1, 1e-12}, []float64{1, 0}, func(q *Question) { q.System.Labels = []string{"", "7:p"} })
	if !a.Solved || !strings.Contains(a.Verdict, "1 row is unsolved, worst row 2 = 7:p") {
		t.Errorf("%v: %s", a.Solved, a.Verdict)
	}
}

// Where x has died away a row may be off by all of its own terms and is solved
// all the same: tridiag(-1,4,-1) x = e_1, cut off after 30 rows.
func TestRowsBeyondTheSolutionAreSolved(t *testing.T) {
	const n = 60
	var e []linear.Entry
	b, x := make([]float64, n), make([]float64, n)
	b[0] = 1
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: 4})
		if i > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1}, linear.Entry{I: i - 1, J: i, V: -1})
		}
		if i < 30 { // x_i = (2-sqrt 3)^(i+1), the infinite system's
			x[i] = math.Pow(2-math.Sqrt(3), float64(i+1))
		}
	}
	a := asked(t, linear.FromEntries(n, n, e), b, x, nil)
	if !a.Solved || a.Componentwise < 0.5 || a.Unsolved != 0 || strings.Contains(a.Verdict, "unsolved") {
		t.Errorf("componentwise error %g: %s", a.Componentwise, a.Verdict)
	}
}

// Aᵀr is small because A is ill-conditioned, not because b is out of reach.
func TestSmallNormalResidualOfARegularMatrix(t *testing.T) {
	m := dense([]float64{1, 0}, []float64{0, 1e-12}) // x misses b in the second row
	a := asked(t, m, []float64{1, 1}, []float64{1, 0}, nil)
	if text := strings.Join(a.Hints, "\n"); a.Solved || !strings.Contains(text, "A is regular") || strings.Contains(text, "x is a least-squares solution") {
		t.Errorf("%s", text)
	}
}

// What overflows is never called solved.
func TestOverflowIsNotSolved(t *testing.T) {
	for _, rule := range []string{"rhs", "initial", "backward", "absolute"} {
		for _, x := range []float64{1e308, -1.7e308, math.MaxFloat64} {
			a := asked(t, dense([]float64{3, 1}, []float64{-1e10, 2}), []float64{3, 1}, []float64{x, x}, func(q *Question) { q.Rule = rule })
			if a.Solved || !strings.Contains(a.Verdict, "not a finite number") {
				t.Errorf("%s, x = %g: %s", rule, x, a.Verdict)
			}
		}
	}
}

func TestFieldToleranceDecidesAsWell(t *testing.T) {
	m := dense([]float64{1, 0}, []float64{0, 1})
	for _, p := range []struct {
		x      float64
		solved bool
	}{{1e-10, true}, {0, false}} {
		a := asked(t, m, []float64{1, 1e-10}, []float64{1, p.x}, func(q *Question) {
			q.System.Fields, q.System.FieldOf, q.FieldTol = []string{"u", "p"}, []int32{0, 1}, []float64{0, 1e-6}
		})
		if a.Solved != p.solved || !p.solved && !strings.Contains(a.Verdict, "field p stands at 1,") {
			t.Errorf("x = %g: %v, %s", p.x, a.Solved, a.Verdict)
		}
	}
}

// What rounding could do at most says nothing of a residual far below it: with
// x = (1, 1) the first row cancels, and the bound is u times 1+1, not b.
func TestRoundingLevelIsToldAtItOnly(t *testing.T) {
	m := dense([]float64{1, -1}, []float64{0, 1e-8})
	level := 3 * unit / (1 - 3*unit) * 2 // of the first row, with |A||x|+|b| = 2 to 1e-8
	for _, c := range []struct {
		part float64 // of the level
		told bool
	}{{0.5, true}, {0.001, false}, {50, false}} {
		r := math.Round(c.part*level/0x1p-60) * 0x1p-60
		a := asked(t, m, []float64{r, 1e-8}, []float64{1, 1}, nil)
		if text := strings.Join(a.Hints, "\n"); strings.Contains(text, "rounding of double precision") != c.told {
			t.Errorf("residual %g of the level %g (%g): %s", a.Residual.Two, a.Residual.Plain, c.part, text)
		}
	}
}

// Digits: as many as can be expected are not told as more than that.
func TestExpectedDigits(t *testing.T) {
	for _, c := range []struct {
		error, digits float64
		want          string
	}{{1e-13, 12.4, "as many as"}, {1e-12, 12.9, "as many as"}, {1e-5, 7.5, "of about 7 "}} {
		if text := (&Factor{ErrorInf: c.error, Digits: c.digits}).expected(); !strings.HasPrefix(text, c.want) {
			t.Errorf("error %g, %g digits: %s", c.error, c.digits, text)
		}
	}
}
