package linear

import (
	"math"
	"math/big"
	"testing"
)

// exactRow returns b − (A(x+low))_i in exact rational arithmetic (math/big).
func exactRow(a *CSR, i int, x, low []float64, b float64) *big.Rat {
	r := new(big.Rat).SetFloat64(b)
	cols, vals := a.Row(i)
	for k, c := range cols {
		v := new(big.Rat).SetFloat64(x[c])
		if low != nil {
			v.Add(v, new(big.Rat).SetFloat64(low[c]))
		}
		r.Sub(r, v.Mul(v, new(big.Rat).SetFloat64(vals[k])))
	}
	return r
}

// cancelling returns a matrix with rows of 1 to 12 entries of both signs and
// sizes 1e-6 to 1e6, and x, low and a b that lies within rounding of A x.
func cancelling(n int) (a *CSR, x, low, b []float64) {
	var e []Entry
	u := make([]float64, 40*n)
	Uniform(u, 11)
	for i := range n {
		for k := range 1 + i%12 {
			size := math.Pow(10, math.Round(6*u[20*i+k]))
			e = append(e, Entry{I: i, J: (7*i + 5*k) % n, V: size * u[20*n+k+i]})
		}
	}
	a = FromEntries(n, n, e)
	x, low, b = make([]float64, n), make([]float64, n), make([]float64, n)
	Uniform(x, 12)
	Uniform(low, 13)
	for i := range low {
		low[i] *= 0x1p-54 * math.Abs(x[i])
	}
	a.Apply(b, x)
	return a, x, low, b
}

// The residual of a pair lies within u|r| + 2γ_m²(|A||x|+|b|) of the exact one
// (Ogita, Rump and Oishi 2005, and as much again for the products with low),
// where everything that plain evaluation shows is rounding.
func TestPairResidual(t *testing.T) {
	const n = 300
	const u = 0x1p-53
	a, x, low, b := cancelling(n)
	for name, tail := range map[string][]float64{"one double": nil, "two doubles": low} {
		dst, plain, lost := make([]float64, n), make([]float64, n), 0
		norm := a.PairResidual(dst, x, tail, b)
		Residual(plain, a, x, b)
		for i := range n {
			r, size := a.RowResidual(i, x, tail, b[i])
			want := exactRow(a, i, x, tail, b[i])
			value, _ := want.Float64()
			off, _ := new(big.Rat).Sub(new(big.Rat).SetFloat64(r), want).Float64()
			g := float64(14) * u
			if math.Abs(off) > u*math.Abs(value)+2*g*g*size || r != dst[i] {
				t.Errorf("%s, row %d: %g and %g, exactly %g", name, i, r, dst[i], value)
			}
			if math.Abs(plain[i]-value) > 0.01*math.Abs(value) {
				lost++
			}
		}
		if lost < n/2 {
			t.Errorf("%s: plain evaluation loses %d of %d rows only: nothing is tested", name, lost, n)
		}
		if math.Abs(norm-Norm2(dst)) > 1e-14*norm {
			t.Errorf("%s: norm %g, want %g", name, norm, Norm2(dst))
		}
	}
}

// Adding to a pair keeps it rounded, x = fl(x + low), and is right to 2⁻¹⁰⁴ of
// the larger of the two numbers added.
func TestPairAxpy(t *testing.T) {
	const n = 4000
	_, x, low, _ := cancelling(n)
	d := make([]float64, n)
	Uniform(d, 14)
	for i := range d {
		d[i] *= math.Pow(2, float64(-(i % 60)))
		if i%7 == 0 {
			d[i] = -x[i] // all that x holds is taken away
		}
	}
	up, down := make([]float64, n), make([]float64, n)
	PairAxpy(up, down, 0.5, d, x, low)
	PairAxpy(up, down, 0.5, d, up, down)
	rat := func(v float64) *big.Rat { return new(big.Rat).SetFloat64(v) }
	for i := range d {
		want := rat(x[i])
		want.Add(want, rat(low[i])).Add(want, rat(d[i]))
		got := rat(up[i])
		got.Add(got, rat(down[i]))
		off, _ := got.Sub(got, want).Float64()
		if math.Abs(off) > 0x1p-104*math.Max(math.Abs(x[i]), math.Abs(d[i])) || up[i]+down[i] != up[i] {
			t.Fatalf("entry %d: %g + %g plus %g gives %g + %g, off by %g", i, x[i], low[i], d[i], up[i], down[i], off)
		}
	}
}

// The bits do not depend on the number of threads.
func TestPairThreads(t *testing.T) {
	defer SetThreads(Threads())
	a, x, low, b := cancelling(30_000)
	var norms [2]float64
	var got [2][]float64
	for k := range 2 {
		SetThreads(1 + k)
		got[k] = make([]float64, len(b))
		norms[k] = a.PairResidual(got[k], x, low, b)
	}
	if norms[0] != norms[1] {
		t.Errorf("norms %v", norms)
	}
	for i := range b {
		if got[0][i] != got[1][i] {
			t.Fatalf("entry %d: %g and %g", i, got[0][i], got[1][i])
		}
	}
}
