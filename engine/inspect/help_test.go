package inspect_test

import (
	"context"
	"math/big"
	"math/rand/v2"
	"testing"

	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// e is a short name for an entry at (i, j), from 0.
func e(i, j int, v float64) linear.Entry { return linear.Entry{I: i, J: j, V: v} }

// dense builds a matrix from rows; every zero is left out.
func dense(rows ...[]float64) *linear.CSR {
	var out []linear.Entry
	for i, r := range rows {
		for j, v := range r {
			if v != 0 {
				out = append(out, e(i, j, v))
			}
		}
	}
	return linear.FromEntries(len(rows), len(rows), out)
}

// ones is A x = (1, …, 1) with that many printed digits.
func ones(a *linear.CSR, digits int) linear.System {
	s := linear.System{Name: "test", A: a, B: make([]float64, a.NRows), RHS: linear.Ones, Digits: digits}
	for i := range s.B {
		s.B[i] = 1
	}
	return s
}

func inspected(t *testing.T, s linear.System) *inspect.Facts {
	t.Helper()
	f, err := inspect.Inspect(context.Background(), s, nil)
	if err != nil {
		t.Fatal(err)
	}
	if !f.Complete {
		t.Error("the facts are not complete")
	}
	return f
}

// expect checks answer and certainty; an empty certainty is not checked.
func expect(t *testing.T, what string, f inspect.Fact, a inspect.Answer, c inspect.Certainty) {
	t.Helper()
	if f.Answer != a || c != "" && f.Certainty != c {
		t.Errorf("%s: %s %s (%s), want %s %s", what, f.Answer, f.Certainty, f.Why, a, c)
	}
	if f.Why == "" {
		t.Errorf("%s: no reason given", what)
	}
}

// truth is the inertia of a symmetric matrix, exactly.
type truth struct{ positive, negative, zero int }

// inertia diagonalises by congruence in rational numbers.
func inertia(a *linear.CSR) (w truth) {
	n := a.NRows
	m := rational(a)
	live := make([]int, n)
	for i := range live {
		live[i] = i
	}
	for len(live) > 0 {
		p := pivot(m, live)
		if p < 0 {
			w.zero += len(live)
			break
		}
		if m[p][p].Sign() > 0 {
			w.positive++
		} else {
			w.negative++
		}
		var rest []int
		for _, i := range live {
			if i != p {
				rest = append(rest, i)
			}
		}
		for _, i := range rest {
			if m[i][p].Sign() == 0 {
				continue
			}
			f := new(big.Rat).Quo(m[i][p], m[p][p])
			for _, j := range rest {
				m[i][j].Sub(m[i][j], new(big.Rat).Mul(f, m[p][j]))
			}
		}
		live = rest
	}
	return w
}

// pivot returns a row with a nonzero diagonal, made by adding one row and
// column to another where there is none; −1 if the rest is zero.
func pivot(m [][]*big.Rat, live []int) int {
	for _, i := range live {
		if m[i][i].Sign() != 0 {
			return i
		}
	}
	for _, i := range live {
		for _, j := range live {
			if m[i][j].Sign() != 0 {
				for _, k := range live {
					m[i][k].Add(m[i][k], m[j][k])
				}
				for _, k := range live {
					m[k][i].Add(m[k][i], m[k][j])
				}
				return i
			}
		}
	}
	return -1
}

func rational(a *linear.CSR) [][]*big.Rat {
	n := a.NRows
	m := make([][]*big.Rat, n)
	for i := range n {
		m[i] = make([]*big.Rat, n)
		for j := range n {
			m[i][j] = new(big.Rat).SetFloat64(a.At(i, j))
		}
	}
	return m
}

// regular reports by exact elimination whether a matrix has full rank.
func regular(a *linear.CSR) bool {
	m := rational(a)
	for k := range m {
		p := k
		for p < len(m) && m[p][k].Sign() == 0 {
			p++
		}
		if p == len(m) {
			return false
		}
		m[k], m[p] = m[p], m[k]
		for i := k + 1; i < len(m); i++ {
			f := new(big.Rat).Quo(m[i][k], m[k][k])
			for j := k; j < len(m); j++ {
				m[i][j].Sub(m[i][j], new(big.Rat).Mul(f, m[k][j]))
			}
		}
	}
	return true
}

// shaken returns a with each entry changed by up to the relative amount
// delta, alike on both sides of the diagonal if symmetric.
func shaken(rng *rand.Rand, a *linear.CSR, delta float64, symmetric bool) *linear.CSR {
	var out []linear.Entry
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			v := vals[k] * (1 + delta*(1-1e-9)*float64(1-2*rng.IntN(2)))
			switch {
			case !symmetric || int(j) == i:
				out = append(out, e(i, int(j), v))
			case int(j) > i:
				out = append(out, e(i, int(j), v), e(int(j), i, v))
			}
		}
	}
	return linear.FromEntries(a.NRows, a.NRows, out)
}
