package direct

import (
	"math"
	"math/big"
	"math/rand/v2"
	"testing"

	"dwindle/engine/linear"
)

// exactlyDefinite decides by an LDLᵀ in rational numbers, exact for every
// double. Small n only.
func exactlyDefinite(a *linear.CSR) bool {
	n := a.NRows
	m := make([][]*big.Rat, n)
	for i := range n {
		m[i] = make([]*big.Rat, n)
		for j := range n {
			m[i][j] = new(big.Rat).SetFloat64(a.At(i, j))
		}
	}
	for k := range n {
		if m[k][k].Sign() <= 0 {
			return false
		}
		for i := k + 1; i < n; i++ {
			f := new(big.Rat).Quo(m[i][k], m[k][k])
			for j := k; j < n; j++ {
				m[i][j].Sub(m[i][j], new(big.Rat).Mul(f, m[k][j]))
			}
		}
	}
	return true
}

// Matrices B·Bᵀ with integer B of deficient rank are exactly singular; moved by
// a few units of the last place they lie on either side. No verdict may
// contradict exact rational arithmetic.
func TestNeverWrongNearSingular(t *testing.T) {
	rng := rand.New(rand.NewPCG(1, 2))
	var yes, no, left int
	for trial := range 1000 {
		n := 2 + rng.IntN(9)
		if trial%5 == 4 {
			n = 12 + rng.IntN(8) // sparse, in several fronts
		}
		a := nearSingular(rng, n, trial%4)
		r := verify(t, a, 0)
		exact := exactlyDefinite(a)
		switch {
		case r.Definite && !exact:
			t.Fatalf("trial %d: called definite: %+v", trial, a)
		case r.Negative && exact:
			t.Fatalf("trial %d: called indefinite: %+v", trial, a)
		case r.Definite:
			yes++
		case r.Negative:
			no++
		default:
			left++
		}
	}
	if yes < 40 || no < 40 || left < 40 {
		t.Errorf("the cases are one-sided: %d definite, %d indefinite, %d open", yes, no, left)
	}
}

// nearSingular returns B·Bᵀ with integer B of rank n−1, moved by 0, a few ulps,
// or 1e-13 to 1e-9, in badly scaled units.
func nearSingular(rng *rand.Rand, n, how int) *linear.CSR {
	b := make([][]float64, n)
	for i := range b {
		b[i] = make([]float64, n-1)
		for j := range b[i] {
			if n < 12 || rng.IntN(n) < 2 {
				b[i][j] = float64(rng.IntN(19) - 9)
			}
		}
		b[i][rng.IntN(n-1)] += 10
	}
	move := []float64{0, 4e-16, 1e-13, 1e-9}[how] * rng.Float64()
	if rng.IntN(2) == 0 {
		move = -move
	}
	unit := make([]int, n)
	for i := range unit {
		unit[i] = rng.IntN(60) - 30
	}
	return symmetricOf(n, func(i, j int) float64 {
		v := 0.0
		for k := range b[i] {
			v += b[i][k] * b[j][k]
		}
		if i == j {
			v *= 1 + move
		}
		return math.Ldexp(v, unit[i]+unit[j])
	})
}
