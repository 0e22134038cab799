package krylov_test

import (
	"math"
	"math/big"
	"runtime"
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// hilbert returns the Hilbert matrix of order n times lcm(1, …, 2n−1), whose
// entries are whole numbers, and the exact solution of A x = 1: the inverse is
// (−1)^{i+j}(i+j−1) C(n+i−1,n−j) C(n+j−1,n−i) C(i+j−2,i−1)² over that number
// (Savage and Lukacs, Nat. Bur. Standards AMS 39 (1954) 105–108).
func hilbert(t *testing.T, n int64) (*linear.CSR, []*big.Rat) {
	t.Helper()
	scale := big.NewInt(1)
	for k := int64(2); k < 2*n; k++ {
		g := new(big.Int).GCD(nil, nil, scale, big.NewInt(k))
		scale.Mul(scale, big.NewInt(k)).Div(scale, g)
	}
	binomial := func(n, k int64) *big.Int { return new(big.Int).Binomial(n, k) }
	rows, x := make([][]float64, n), make([]*big.Rat, n)
	for i := int64(1); i <= n; i++ {
		sum := new(big.Int)
		for j := int64(1); j <= n; j++ {
			e := new(big.Int).Div(scale, big.NewInt(i+j-1))
			v, exact := new(big.Float).SetInt(e).Float64()
			if exact != big.Exact {
				t.Fatalf("order %d: %s is no double", n, e)
			}
			rows[i-1] = append(rows[i-1], v)
			c := binomial(i+j-2, i-1)
			term := new(big.Int).Mul(c, c)
			term.Mul(term, big.NewInt(i+j-1)).Mul(term, binomial(n+i-1, n-j)).Mul(term, binomial(n+j-1, n-i))
			if (i+j)%2 == 1 {
				term.Neg(term)
			}
			sum.Add(sum, term)
		}
		x[i-1] = new(big.Rat).SetFrac(sum, scale)
	}
	for i, row := range rows { // the formula is right: A x = 1 exactly
		sum := new(big.Rat)
		for j, v := range row {
			sum.Add(sum, new(big.Rat).Mul(new(big.Rat).SetFloat64(v), x[j]))
		}
		if sum.Cmp(big.NewRat(1, 1)) != 0 {
			t.Fatalf("order %d: row %d of A x is %s", n, i, sum)
		}
	}
	return fromRows(rows...), x
}

// pairError returns max |x_i + low_i − want_i|/|want_i|, exactly but for its
// last rounding.
func pairError(r *trial, want []*big.Rat) float64 {
	low := make([]float64, r.n)
	r.s.(krylov.Tailer).Tail(low)
	worst := 0.0
	for i, x := range r.x() {
		d := new(big.Rat).SetFloat64(x)
		d.Add(d, new(big.Rat).SetFloat64(low[i])).Sub(d, want[i]).Quo(d, want[i])
		e, _ := d.Float64()
		worst = math.Max(worst, math.Abs(e))
	}
	return worst
}

// Iterative refinement in two doubles is right to about 32 digits less those
// of the condition number (4.8e5, 1.5e10 and 1.6e13 for orders 5, 8 and 10 by
// Todd, Nat. Bur. Standards AMS 39 (1954) 109–116), where one double has 16
// less them. The upper doubles are the solution rounded.
func TestTwoDoublesAgainstRationals(t *testing.T) {
	for n, kappa := range map[int64]float64{5: 4.8e5, 8: 1.5e10, 10: 1.6e13} {
		a, want := hilbert(t, n)
		for _, m := range []string{"lu", "cholesky"} {
			r := begun(t, a, ones(int(n)), nil, "richardson:1,2+"+m)
			for range 12 {
				if !r.last.Done {
					r.step()
				}
			}
			if got := pairError(r, want); !(got <= 4*kappa*0x1p-106) {
				t.Errorf("order %d, %s: error %.1e, condition %.1e", n, m, got, kappa)
			} else if n == 5 && !(got < 1e-25) {
				t.Errorf("order 5, %s: error %.1e: not 25 digits", m, got)
			}
			for i, x := range r.x() {
				if v, _ := want[i].Float64(); x != v {
					t.Errorf("order %d, %s: x_%d is %.17g, exactly %s, rounded %.17g", n, m, i, x, want[i].FloatString(20), v)
				}
			}
		}
	}
}

// A reading is the residual of the pair itself, to γ²(|A||x|+|b|).
func TestTwoDoublesMeasure(t *testing.T) {
	a, _ := hilbert(t, 8)
	r := begun(t, a, ones(8), nil, "richardson:1,2+lu")
	low := make([]float64, 8)
	for range 4 {
		got := r.step().Residual
		r.s.(krylov.Tailer).Tail(low)
		x, sum, bound := r.x(), new(big.Rat), 0.0
		for i := range 8 {
			cols, vals := a.Row(i)
			_, size := a.RowResidual(i, x, low, 1)
			bound = math.Max(bound, size)
			d := big.NewRat(1, 1)
			for k, c := range cols {
				v := new(big.Rat).SetFloat64(x[c])
				v.Add(v, new(big.Rat).SetFloat64(low[c]))
				d.Sub(d, v.Mul(v, new(big.Rat).SetFloat64(vals[k])))
			}
			sum.Add(sum, d.Mul(d, d))
		}
		square, _ := sum.Float64()
		near(t, "‖b−A(x+low)‖", got, math.Sqrt(square), 1e-15*got+100*0x1p-106*bound)
	}
}

// With a preconditioner that does not solve, the iterates are those of the
// method in one double, to its rounding; a step allocates nothing, the memory
// is what is told, and the bits do not depend on the number of threads.
func TestTwoDoublesAsInOne(t *testing.T) {
	a, b := plate(40), make([]float64, 1600)
	linear.Uniform(b, 5)
	for _, m := range []string{"none", "jacobi", "ssor:1.2"} {
		omega := "1"
		if m == "none" {
			omega = "0.2"
		}
		one, two := begun(t, a, b, b, "richardson:"+omega+"+"+m), begun(t, a, b, b, "richardson:"+omega+",2+"+m)
		for range 60 {
			near(t, m, two.step().Residual, one.step().Residual, 1e-12*one.first.Residual)
		}
		x, y := one.x(), two.x()
		for i := range x {
			near(t, m, y[i], x[i], 1e-12*linear.NormInf(x))
		}
		if got := testing.AllocsPerRun(10, func() { two.step() }); got != 0 {
			t.Errorf("%s: %g allocations a step", m, got)
		}
	}
}

func TestTwoDoublesThreads(t *testing.T) {
	defer linear.SetThreads(linear.Threads())
	a, b := plate(150), make([]float64, 22500)
	linear.Uniform(b, 9)
	var x [2][]float64
	for k := range x {
		linear.SetThreads(1 + k)
		r := begun(t, a, b, nil, "richardson:1,2+jacobi")
		r.until(0, 12)
		x[k] = r.x()
	}
	sameVector(t, x[0], x[1])
}

func TestTwoDoublesMemory(t *testing.T) {
	e, _ := krylov.Lookup("richardson")
	v, err := linear.Resolve(e.Name, e.Params, []linear.Arg{{Name: "parts", Text: "2"}})
	if err != nil {
		t.Fatal(err)
	}
	a, s, b := plate(200), e.New(v), ones(40000)
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	if _, err := s.Begin(krylov.Problem{A: a, M: halving{}, B: b}); err != nil {
		t.Fatal(err)
	}
	runtime.ReadMemStats(&after)
	got, want := float64(after.TotalAlloc-before.TotalAlloc), float64(e.Memory(40000, v))
	if got > 1.03*want || got < 0.99*want {
		t.Errorf("takes %.0f bytes, says %.0f", got, want)
	}
}

// Products alone are refused, an overflow ends with the iterate before it, and
// what does not contract grows by |1 − ω| a step.
func TestTwoDoublesEnds(t *testing.T) {
	e, _ := krylov.Lookup("richardson")
	v, err := linear.Resolve(e.Name, e.Params, []linear.Arg{{Text: "2"}, {Text: "2"}})
	if err != nil {
		t.Fatal(err)
	}
	if _, err := e.New(v).Begin(krylov.Problem{A: linear.Func{N: 4, Do: plate(2).Apply}, M: linear.Identity{}, B: ones(4)}); err == nil {
		t.Error("takes an operator without entries")
	}
	r := begun(t, diagonal(1e200, 1), ones(2), nil, "richardson:1e12,2")
	r.until(0, 10)
	if ev, ok := r.event(trace.NonFinite); !ok || ev.Quantity != "|b-Ax|" || !r.last.Done {
		t.Errorf("overflow: %+v, events %+v", r.last, r.seen)
	}
	for _, x := range r.x() {
		if math.IsNaN(x) || math.IsInf(x, 0) {
			t.Errorf("the iterate holds %g", x)
		}
	}
	rough := begun(t, diagonal(1, 1), ones(2), nil, "richardson:3,2")
	rough.until(0, 20)
	near(t, "growth of |1-omega| a step", rough.last.Residual/rough.first.Residual, math.Pow(2, 20), 1e-6)
}
