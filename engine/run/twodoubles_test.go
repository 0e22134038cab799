package run

import (
	"context"
	"math"
	"math/big"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/engine/trace"
)

// hilbert is the Hilbert matrix of order n times lcm(1, …, 2n−1), of whole
// numbers, with b = 1 and the exact solution: the row sums of the inverse,
// (−1)^{n+i}·i·C(n+i−1,i)·C(n−1,i−1) (from the inverse by Savage and Lukacs, Nat.
// Bur. Standards AMS 39 (1954) 105–108), over the same number.
func hilbert(t *testing.T, n int64) (linear.System, []*big.Rat) {
	t.Helper()
	scale := big.NewInt(1)
	for k := int64(2); k < 2*n; k++ {
		g := new(big.Int).GCD(nil, nil, scale, big.NewInt(k))
		scale.Mul(scale, big.NewInt(k)).Div(scale, g)
	}
	var e []linear.Entry
	s, x := linear.System{RHS: linear.Ones}, make([]*big.Rat, n)
	for i := range n {
		for j := range n {
			v, _ := new(big.Float).SetInt(new(big.Int).Div(scale, big.NewInt(i+j+1))).Float64()
			e = append(e, linear.Entry{I: int(i), J: int(j), V: v})
		}
		c := new(big.Int).Mul(big.NewInt(i+1), new(big.Int).Binomial(n+i, i+1))
		c.Mul(c, new(big.Int).Binomial(n-1, i))
		if (n+i)%2 == 0 {
			c.Neg(c)
		}
		x[i], s.B = new(big.Rat).SetFrac(c, scale), append(s.B, 1)
	}
	a := linear.FromEntries(int(n), int(n), e)
	s.A = a
	for i := range x {
		if r := exactResidual(a, i, x, 1); r.Sign() != 0 {
			t.Fatalf("order %d: row %d of b−Ax is %s", n, i, r)
		}
	}
	return s, x
}

func rat(v float64) *big.Rat { return new(big.Rat).SetFloat64(v) }

// exactResidual is b − (A x)_i in rational arithmetic (math/big).
func exactResidual(a *linear.CSR, i int, x []*big.Rat, b float64) *big.Rat {
	r := rat(b)
	cols, vals := a.Row(i)
	for k, c := range cols {
		r.Sub(r, new(big.Rat).Mul(rat(vals[k]), x[c]))
	}
	return r
}

// exactNorm is ‖b−Ax‖₂/‖b‖₂, rational but for the roots and the last rounding.
func exactNorm(s linear.System, x []*big.Rat) float64 {
	sum := new(big.Float).SetPrec(200)
	for i := range x {
		r := new(big.Float).SetPrec(200).SetRat(exactResidual(s.Matrix(), i, x, s.B[i]))
		sum.Add(sum, r.Mul(r, r))
	}
	v, _ := sum.Sqrt(sum).Float64()
	return v / linear.Norm2(s.B)
}

// pairOf is the sum of the parts of an answer.
func pairOf(u *Trial) (sum, upper []*big.Rat) {
	for i, v := range u.answer {
		upper = append(upper, rat(v))
		sum = append(sum, new(big.Rat).Add(rat(v), rat(u.low[i])))
	}
	return sum, upper
}

// relative is ‖x−want‖₂/‖want‖₂.
func relative(x, want []*big.Rat) float64 {
	up, down := new(big.Float).SetPrec(200), new(big.Float).SetPrec(200)
	for i := range x {
		d := new(big.Float).SetPrec(200).SetRat(new(big.Rat).Sub(x[i], want[i]))
		up.Add(up, d.Mul(d, d))
		w := new(big.Float).SetPrec(200).SetRat(want[i])
		down.Add(down, w.Mul(w, w))
	}
	v, _ := up.Quo(up, down).Float64()
	return math.Sqrt(v)
}

// raced runs the pairings to their ends on one bench.
func raced(t *testing.T, s linear.System, l Limits, pairings ...string) []*Trial {
	t.Helper()
	b := NewBench(s, l, 0, nil)
	ctx, cancel := context.WithCancel(context.Background())
	defer cancel()
	for _, p := range pairings {
		m, err := Parse(p)
		if err != nil {
			t.Fatal(err)
		}
		b.Add(m)
	}
	go b.Run(ctx)
	wait, stop := context.WithTimeout(ctx, time.Minute)
	defer stop()
	b.WaitEnded(wait)
	return b.Trials()
}

// Where one double leaves far more, the pair converges; what is told of it, of
// the same x rounded and of others beside it is what rational arithmetic gives.
// Hilbert 12 contracts by a tenth a step only, and the doubt about the pair
// covers its true error.
func TestTwoDoublesToldAsTheyAre(t *testing.T) {
	for _, n := range []int64{6, 8, 10, 12} {
		s, want := hilbert(t, n)
		trials := raced(t, s, limits(1e-18, 100), "richardson:1,2+lu", "richardson+lu", "rcm/richardson:parts=2+lu")
		one := trials[1].History()
		if one.Stop == trace.Converged || one.TwoDoubles || !math.IsNaN(one.Rounded) || one.Near == nil {
			t.Fatalf("order %d in one double: %s, %+v", n, one.Stop, one.Near)
		}
		var x []*big.Rat
		for _, v := range trials[1].answer {
			x = append(x, rat(v))
		}
		if got := relative(x, want); math.Abs(one.Near.Error/got-1) > 0.01 || one.Near.Of != "richardson:1,2+lu" {
			t.Errorf("order %d: error %g against %s, truly %g", n, one.Near.Error, one.Near.Of, got)
		}
		for _, u := range []*Trial{trials[0], trials[2]} {
			h := u.History()
			if h.Stop != trace.Converged || !h.TwoDoubles || !strings.Contains(h.Reason, "two doubles, and rounded to one it leaves") {
				t.Fatalf("order %d, %s: %s, %q", n, h.Pairing, h.Stop, h.Reason)
			}
			sum, upper := pairOf(u)
			if got := exactNorm(s, sum); math.Abs(got-h.TrueResidual) > 1e-6*got+1e-29 {
				t.Errorf("order %d, %s: true residual %g, exactly %g", n, h.Pairing, h.TrueResidual, got)
			}
			if got := exactNorm(s, upper); math.Abs(got-h.Rounded) > 1e-6*got {
				t.Errorf("order %d, %s: rounded %g, exactly %g", n, h.Pairing, h.Rounded, got)
			}
			off := relative(sum, want)
			if !(off <= 1.2*u.doubt.norm+1e-32) || u.doubt.norm > 1e-6 {
				t.Errorf("order %d, %s: error %g, doubt %g", n, h.Pairing, off, u.doubt.norm)
			}
		}
	}
}

// Beyond condition 1/u nothing contracts (order 14: 5e17 by the growth law
// e^{3.5n}/√n of Todd 1954): the pair ends without an answer, and soon.
func TestTwoDoublesBeyondTheirCondition(t *testing.T) {
	s, _ := hilbert(t, 14)
	for _, u := range raced(t, s, limits(1e-18, 2000), "richardson:1,2+lu", "richardson+lu") {
		if h := u.History(); h.TwoDoubles && (h.Stop != trace.Stagnated || h.Iterations > 60 || !strings.Contains(h.Reason, "not halved")) || h.Near != nil {
			t.Errorf("%s: %s after %d, %q, %+v", h.Pairing, h.Stop, h.Iterations, h.Reason, h.Near)
		}
	}
}

// What cannot keep x in two doubles is refused in plain words.
func TestTwoDoublesRefused(t *testing.T) {
	s := sample(t, "plate:8")
	free := Offers(linear.System{A: linear.Func{N: 64, Do: s.A.Apply}, B: s.B})
	for pairing, want := range map[string]string{
		"richardson:1,2+none":          "needs the entries of A",
		"scale/richardson:1,2+lu":      "scale rounds A or b anew",
		"rcm,match/richardson:1,2+lu":  "match rounds A or b anew",
		"project/richardson:1,2+lu":    "project rounds A or b anew",
		"symmetrise/richardson:1,2+lu": "symmetrise rounds A or b anew",
	} {
		m, err := Parse(pairing)
		if err != nil {
			t.Fatal(err)
		}
		have := Offers(s)
		if strings.HasPrefix(want, "needs") {
			have = free
		}
		if got := m.Refuse(have); !strings.Contains(got, want) {
			t.Errorf("%s: %q", pairing, got)
		}
	}
	for _, pairing := range []string{"rcm/richardson:1,2+lu", "shift:0.1/richardson:1,2+lu", "amd,nd/richardson:1,2+jacobi", "richardson:1,2+none"} {
		if m, err := Parse(pairing); err != nil || m.Refuse(Offers(s)) != "" {
			t.Errorf("%s: %v, %q", pairing, err, m.Refuse(Offers(s)))
		}
	}
}

// Threads and company change no bit; each step is one product and one use of M.
func TestTwoDoublesCompanyAndThreads(t *testing.T) {
	defer linear.SetThreads(linear.Threads())
	s := sample(t, "plate:150")
	var first trace.History
	for k, company := range [][]string{nil, {"cg+jacobi"}} {
		linear.SetThreads(1 + k)
		h := finish(t, s, limits(1e-3, 300), nil, append([]string{"richardson:1,2+ic:0"}, company...)...)[0]
		if h.Products != h.Iterations || h.PrecondUses != h.Iterations || h.Storage != "rows" {
			t.Errorf("%d steps, %d products, %d uses, on %s", h.Iterations, h.Products, h.PrecondUses, h.Storage)
		}
		if k == 0 {
			first = h
			continue
		}
		for i := range h.Records {
			if !sameBits(h.Records[i], first.Records[i]) {
				t.Fatalf("record %d: %+v and %+v", i, h.Records[i], first.Records[i])
			}
		}
	}
}

// Two open systems with b = 1 whose solution no double holds to 1e-8: the pair
// does, by its audit and by rational arithmetic (to γ²|A||x|, where what
// rounding x leaves is about u|A||x|), row by row as well.
func TestTwoDoublesOnOpenSystems(t *testing.T) {
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("DWINDLE_OPEN is not set: the open matrices are left out")
	}
	for file, m := range map[string]string{"cryg2500.mtx": "lu", "reorientation_1.mtx": "ldl"} {
		s, err := load.File(context.Background(), filepath.Join(dir, file), nil)
		if err != nil {
			t.Fatal(err)
		}
		s.B = make([]float64, s.N())
		for i := range s.B {
			s.B[i] = 1
		}
		trials := raced(t, s, limits(1e-8, 1000), "richardson:1,2+"+m, "richardson+"+m)
		h, one := trials[0].History(), trials[1].History()
		sum, upper := pairOf(trials[0])
		exact, rounded := exactNorm(s, sum), exactNorm(s, upper)
		if h.Stop != trace.Converged || !(exact <= 1e-8) || math.Abs(h.TrueResidual-exact) > 1e-6*exact+1e-14*rounded || !(h.Componentwise <= 1e-3) {
			t.Errorf("%s: %s, true residual %g, exactly %g, by rows %g", file, h.Stop, h.TrueResidual, exact, h.Componentwise)
		}
		if !(rounded > 1e-8) || math.Abs(h.Rounded/rounded-1) > 1e-6 {
			t.Errorf("%s: rounded %g, exactly %g", file, h.Rounded, rounded)
		}
		if one.Stop == trace.Converged || one.Near == nil || one.Near.Doubt > 1e-6*one.Near.Error {
			t.Errorf("%s in one double: %s, %+v", file, one.Stop, one.Near)
		}
		t.Logf("%s: %d steps to %.2g (rounded %.2g); in one double %.2g, error %.2g, by entry %.2g; doubt %.1g",
			file, h.Iterations, h.TrueResidual, h.Rounded, one.TrueResidual, one.Near.Error, one.Near.Worst, one.Near.Doubt)
	}
}
