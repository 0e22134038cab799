package check

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

func TestParseSaid(t *testing.T) {
	for _, c := range []struct {
		text        string
		value, half float64
		log         bool
	}{
		{"9e-11", 9e-11, 0.5e-11, false},
		{"9.1D-11", 9.1e-11, 0.05e-11, false},
		{" 0.907 ", 0.907, 0.5e-3, false},
		{"120", 120, 0.5, false},
		{"-10.04", -10.04, 0.5e-2, true},
	} {
		s, err := ParseSaid(c.text)
		if err != nil || s.Value != c.value || math.Abs(s.Half-c.half) > 1e-12*c.half || s.Log != c.log {
			t.Errorf("%q: %+v, %v", c.text, s, err)
		}
	}
	for _, bad := range []string{"", "x", "1e", "nan", "inf", "0x1p-3", "1_000", "9e-11 s", "1e-99999"} {
		if s, err := ParseSaid(bad); err == nil && s.Value != 0 {
			t.Errorf("%q is read as %+v", bad, s)
		}
	}
}

// One printed number for each definition of the example by hand names it.
func TestEachDefinitionIsRecognised(t *testing.T) {
	m, b, x := dense([]float64{2, 1, 0}, []float64{1, 7, 1}, []float64{0, 1, 11}), []float64{1, 2, 5}, []float64{0.3, 0.2, 0.4}
	start := func(q *Question) { q.System.Guess = []float64{1, 1, 1} }
	for _, d := range asked(t, m, b, x, start).Definitions {
		said, err := ParseSaid(four(d.Value))
		if err != nil {
			t.Fatal(err)
		}
		got := asked(t, m, b, x, func(q *Question) { start(q); q.Said = said }).Said
		var names []string
		for _, f := range got.Fitting {
			names = append(names, f.Definition.Name)
		}
		if all := " " + strings.Join(names, " ") + " "; !strings.Contains(all, " "+d.Name+" ") && d.after == nil {
			t.Errorf("%s = %s is taken for %v", d.Name, said.Text, names)
		}
	}
}

func four(x float64) string { return fmt.Sprintf("%.3e", x) }

func TestNoDefinitionFits(t *testing.T) {
	said, _ := ParseSaid("4.44e-5")
	a := asked(t, dense([]float64{2, 0}, []float64{0, 4}), []float64{2, 4}, []float64{1, 0}, func(q *Question) { q.Said = said })
	if len(a.Said.Fitting) > 0 || a.Said.Nearest == nil || !strings.HasPrefix(a.Said.Claim, "none of the common definitions gives 4.44e-5") {
		t.Errorf("%+v", a.Said)
	}
}

// The decimal logarithm of a measure is recognised too.
func TestLogarithm(t *testing.T) {
	said, _ := ParseSaid("-0.048") // log10 of 4/√20 = −0.0485
	a := asked(t, dense([]float64{2, 0}, []float64{0, 4}), []float64{2, 4}, []float64{1, 0}, func(q *Question) { q.Said = said })
	if len(a.Said.Fitting) == 0 || a.Said.Fitting[0].Definition.Name != "rhs" {
		t.Errorf("%+v", a.Said)
	}
}

// The iterates of minres and of lsqr by dense least squares: the residual by
// recurrence is the true one, and the number that each would have printed is
// named; the same number beside another x is not.
func TestRunningMeasureNeedsTheIterate(t *testing.T) {
	const n, steps = 60, 12
	lopsided := laplace(n)
	lopsided.Val[1] = -0.5
	for _, m := range []*linear.CSR{laplace(n), lopsided} {
		b, r := make([]float64, n), make([]float64, n)
		linear.Uniform(b, 5)
		x := minimal(t, m, b, steps)
		run := asked(t, m, b, x, nil).Running
		two := linear.Residual(r, m, x, b)
		if math.Abs(run.Residuals[steps-1]-two) > 1e-9*two {
			t.Errorf("%s: ||r|| after %d steps %g by recurrence, truly %g", run.Method, steps, run.Residuals[steps-1], two)
		}
		number := two / (run.Norms[steps-1] * linear.Norm2(x))
		said := &Said{Text: fmt.Sprintf("%.3e", number), Value: number}
		got := asked(t, m, b, x, func(q *Question) { q.Said = said }).Said
		if len(got.Fitting) != 1 || got.Fitting[0].First > steps || got.Fitting[0].Last < steps {
			t.Errorf("%s: its own number: %+v", run.Method, got)
		}
		if !m.ExactlySymmetric() { // the other test of lsqr
			z := make([]float64, n)
			m.ApplyT(z, r)
			number := linear.Norm2(z) / (run.Norms[steps-1] * two)
			said := &Said{Text: fmt.Sprintf("%.3e", number), Value: number}
			got := asked(t, m, b, x, func(q *Question) { q.Said = said }).Said
			if len(got.Fitting) != 1 || got.Fitting[0].Definition.Name != "running-normal" {
				t.Errorf("lsqr's other number: %+v", got)
			}
		}
		other := make([]float64, n)
		linear.Scale(other, 0.5, x)
		for _, f := range asked(t, m, b, other, func(q *Question) { q.Said = said }).Said.Fitting {
			if f.First > 0 {
				t.Errorf("%s: the number passes beside another x: %+v", run.Method, f)
			}
		}
	}
}

// minimal returns the vector that makes ‖b−Ax‖₂ smallest in the Krylov space
// of order k, K(A, b) for a symmetric A and K(AᵀA, Aᵀb) else, by gonum's dense
// least squares on an orthogonal basis.
func minimal(t *testing.T, a *linear.CSR, b []float64, k int) []float64 {
	t.Helper()
	n := len(b)
	basis, image := mat.NewDense(n, k, nil), mat.NewDense(n, k, nil)
	v, y, x := append([]float64(nil), b...), make([]float64, n), make([]float64, n)
	symmetric := a.ExactlySymmetric()
	if !symmetric {
		a.ApplyT(v, b)
	}
	for j := range k {
		for range 2 {
			for i := range j {
				q := mat.Col(nil, i, basis)
				linear.Axpy(-linear.Dot(q, v), q, v)
			}
		}
		linear.Scale(v, 1/linear.Norm2(v), v)
		basis.SetCol(j, v)
		a.Apply(y, v)
		image.SetCol(j, y)
		copy(v, y)
		if !symmetric {
			a.ApplyT(v, y)
		}
	}
	var c mat.VecDense
	if err := c.SolveVec(image, mat.NewVecDense(n, b)); err != nil {
		t.Fatal(err)
	}
	mat.NewVecDense(n, x).MulVec(basis, &c)
	return x
}
