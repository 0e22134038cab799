package check

import (
	"context"
	"math"
	"math/big"
	"math/rand/v2"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
)

// dense returns a matrix with the given rows.
func dense(rows ...[]float64) *linear.CSR {
	var e []linear.Entry
	for i, row := range rows {
		for j, v := range row {
			if v != 0 {
				e = append(e, linear.Entry{I: i, J: j, V: v})
			}
		}
	}
	return linear.FromEntries(len(rows), len(rows[0]), e)
}

// laplace is the one-dimensional Laplacian of order n.
func laplace(n int) *linear.CSR {
	var e []linear.Entry
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: 2})
		if i > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1}, linear.Entry{I: i - 1, J: i, V: -1})
		}
	}
	return linear.FromEntries(n, n, e)
}

func asked(t *testing.T, a *linear.CSR, b, x []float64, change func(*Question)) *Answer {
	t.Helper()
	q := Question{System: linear.System{A: a, B: b, Digits: 17}, X: x, Tol: 1e-8, Rule: "rhs", Factor: direct.FactLimits}
	if change != nil {
		change(&q)
	}
	out, err := Check(context.Background(), q)
	if err != nil {
		t.Fatal(err)
	}
	return out
}

// Every value by hand: A = diag(2, 4), b = (2, 4), x = (1, 0), so that
// r = (0, 4) and x* − x = (0, 1); x₀ = (0, 2) gives r₀ = (2, −4).
func TestDefinitionsByHand(t *testing.T) {
	a := asked(t, dense([]float64{2, 0}, []float64{0, 4}), []float64{2, 4}, []float64{1, 0}, func(q *Question) {
		q.System.Guess = []float64{0, 2}
	})
	want := map[string]float64{
		"rhs": 4 / math.Sqrt(20), "rhs-1": 4. / 6, "rhs-inf": 1, "rhs-squared": 0.8,
		"absolute": 4, "absolute-1": 4, "absolute-inf": 4, "squared": 16, "rms": 4 / math.Sqrt2, "mean-squared": 8, "mean": 2,
		"initial": 4 / math.Sqrt(20), "initial-1": 4. / 6, "initial-inf": 1, "initial-squared": 0.8,
		"jacobi-left": 1 / math.Sqrt2, "jacobi-left-rhs": 1 / math.Sqrt(20), "jacobi-left-absolute": 1, "jacobi-left-initial": 1 / math.Sqrt2,
		"jacobi": 2 / math.Sqrt(6), "jacobi-squared": 4. / 6, "jacobi-absolute": 2, "jacobi-absolute-squared": 4, "jacobi-initial": 2 / math.Sqrt(6),
		"normal": 16 / (math.Sqrt(20) * 4), "normal-2": 1, "normal-absolute": 16, "normal-rhs": 16 / math.Hypot(4, 16),
		"backward": 4. / 8, "backward-1": 4. / 10, "backward-2": 4 / (4 + math.Sqrt(20)), "backward-f": 4 / (2 * math.Sqrt(20)),
		"componentwise": 1, "minimal-2": 1, "minimal-f": 4 / math.Sqrt(20), "minimal-1": 1, "minimal-inf": 1,
		"error": 1 / math.Sqrt2, "error-inf": 1, "energy": 2 / math.Sqrt(6),
	}
	for name, value := range want {
		d, ok := a.Definition(name)
		if !ok || math.Abs(d.Value-value) > 1e-12*value {
			t.Errorf("%s = %g (%v), want %g", name, d.Value, ok, value)
		}
	}
	if len(a.Definitions) != len(want) { // x passes for no iterate of minres
		t.Errorf("%d definitions, %d are checked", len(a.Definitions), len(want))
	}
	if a.Solved || a.Worst[0].Row != 1 || a.Unsolved != 1 {
		t.Errorf("solved %v, worst %v, %d unsolved", a.Solved, a.Worst, a.Unsolved)
	}
}

// The residual agrees with exact arithmetic (math/big) within the bound it
// tells, where a plain evaluation is off by many digits.
func TestResidualIsNotLimitedByRounding(t *testing.T) {
	rng := rand.New(rand.NewPCG(3, 4))
	const n = 60
	var e []linear.Entry
	x, b := make([]float64, n), make([]float64, n)
	for i := range n {
		x[i] = rng.NormFloat64()
		for j := range n {
			e = append(e, linear.Entry{I: i, J: j, V: rng.NormFloat64() * math.Exp(6*rng.NormFloat64())})
		}
	}
	m := linear.FromEntries(n, n, e)
	m.Apply(b, x) // rounded: b − Ax is nothing but rounding
	a := asked(t, m, b, x, nil)
	sum := new(big.Float).SetPrec(2000)
	for i := range n {
		s := new(big.Float).SetPrec(2000).SetFloat64(b[i])
		cols, vals := m.Row(i)
		for k, c := range cols {
			p := new(big.Float).SetPrec(2000).Mul(big.NewFloat(vals[k]), big.NewFloat(x[c]))
			s.Sub(s, p)
		}
		sum.Add(sum, new(big.Float).SetPrec(2000).Mul(s, s))
	}
	two, _ := new(big.Float).SetPrec(2000).Sqrt(sum).Float64()
	if off := math.Abs(two - a.Residual.Two); off > a.Residual.Bound+1e-15*two || a.Residual.Bound > 1e-10*two || two > a.Residual.Plain {
		t.Errorf("||r|| = %g, exactly %g: off by %g, bound %g, plain %g", a.Residual.Two, two, off, a.Residual.Bound, a.Residual.Plain)
	}
}

// Condition and reach against the inverse that gonum computes; both estimates
// are lower bounds.
func TestConditionAndReach(t *testing.T) {
	rng := rand.New(rand.NewPCG(5, 6))
	const n = 30
	for _, symmetric := range []bool{true, false} {
		d := mat.NewDense(n, n, nil)
		var rows [][]float64
		for i := range n {
			rows = append(rows, make([]float64, n))
			for j := range n {
				rows[i][j] = rng.NormFloat64()
			}
			rows[i][i] += 8
		}
		for i := range n {
			for j := range n {
				if symmetric && j > i {
					rows[i][j] = rows[j][i]
				}
				d.Set(i, j, rows[i][j])
			}
		}
		b, x := make([]float64, n), make([]float64, n)
		for i := range b {
			b[i], x[i] = 1, rng.NormFloat64()
		}
		var inv mat.Dense
		if err := inv.Inverse(d); err != nil {
			t.Fatal(err)
		}
		star := mat.NewVecDense(n, nil)
		star.MulVec(&inv, mat.NewVecDense(n, b))
		reach, largest := 0.0, 0.0
		for i := range n {
			s := 0.0
			for j := range n {
				g := 1.0
				for k := range n {
					g += math.Abs(d.At(j, k) * star.AtVec(k))
				}
				s += math.Abs(inv.At(i, j)) * g
			}
			reach, largest = math.Max(reach, s), math.Max(largest, math.Abs(star.AtVec(i)))
		}
		f := asked(t, dense(rows...), b, x, nil).Factor
		if f == nil {
			t.Fatal("no factor")
		}
		within := func(what string, got, want float64) {
			if got > want*(1+1e-10) || got < want/3 {
				t.Errorf("symmetric %v: %s %g, truly %g", symmetric, what, got, want)
			}
		}
		within("condition", f.Condition, mat.Norm(d, 1)*mat.Norm(&inv, 1))
		within("reach", f.Reach, reach/largest)
		star.SubVec(star, mat.NewVecDense(n, x))
		e := mat.Norm(star, 2)
		star.AddVec(star, mat.NewVecDense(n, x))
		if want := e / mat.Norm(star, 2); math.Abs(f.Error2-want) > 1e-10*want || !f.Sure {
			t.Errorf("symmetric %v: error %g, truly %g", symmetric, f.Error2, want)
		}
	}
}

// After n steps T is similar to A, so that its Frobenius norm is A's; the same
// holds for the bidiagonalisation.
func TestRunningNormEndsAtTheFrobeniusNorm(t *testing.T) {
	unsymmetric := dense([]float64{4, 1, 0, 2}, []float64{0, 3, 1, 0}, []float64{1, 0, 5, 1}, []float64{0, 2, 0, 7})
	for _, m := range []*linear.CSR{laplace(9), unsymmetric} {
		n := m.NRows
		b, x := make([]float64, n), make([]float64, n)
		linear.Uniform(b, 7)
		a := asked(t, m, b, x, nil)
		if got, want := a.Running.Norms[n-1], linear.Norm2(m.Val); math.Abs(got-want) > 1e-9*want {
			t.Errorf("order %d: %g after n steps, Frobenius %g", n, got, want)
		}
	}
}

// The 2-norm of the Laplacian is 4 sin²(nπ/(2(n+1))).
func TestTwoNorm(t *testing.T) {
	const n = 200
	a := asked(t, laplace(n), make([]float64, n), make([]float64, n), nil)
	want := 4 * math.Pow(math.Sin(n*math.Pi/(2*(n+1))), 2)
	if got := a.Norms.Two; !(got <= want*(1+1e-12)) || got < 0.99*want {
		t.Errorf("||A||2 = %g, want %g", got, want)
	}
}

// diag(1, 0) with b = (1, 0): (1, 0) solves it, and so does (1, 5).
func TestOneOfMany(t *testing.T) {
	singular := asked(t, dense([]float64{1, 0}, []float64{0, 0}), []float64{1, 0}, []float64{1, 5}, nil)
	if !singular.Solved || !strings.Contains(strings.Join(singular.Hints, "; "), "one of many") {
		t.Errorf("solved %v: %v", singular.Solved, singular.Hints)
	}
	regular := asked(t, dense([]float64{1, 0}, []float64{0, 1}), []float64{1, 0}, []float64{1, 0}, nil)
	if strings.Contains(strings.Join(regular.Hints, "; "), "one of many") {
		t.Errorf("a regular A: %v", regular.Hints)
	}
}
