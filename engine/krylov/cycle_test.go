package krylov

import (
	"math"
	"testing"

	"dwindle/engine/linear"
)

// A M⁻¹V_m = V_{m+1}H̄ holds for the basis of the cycle that has just become
// whole; between two there is none to show.
func TestCycleIsTheArnoldiRelation(t *testing.T) {
	const n, m = 40, 7
	var entries []linear.Entry
	b := make([]float64, n)
	for i := range n {
		b[i] = 1 / float64(i+1)
		entries = append(entries, linear.Entry{I: i, J: i, V: 3 + float64(i%5)})
		if i > 0 {
			entries = append(entries, linear.Entry{I: i, J: i - 1, V: -2}, linear.Entry{I: i - 1, J: i, V: .5})
		}
	}
	a := linear.FromEntries(n, n, entries)
	values, err := linear.Resolve("gmres", gmresEntry.Params, []linear.Arg{{Text: "7"}})
	if err != nil {
		t.Fatal(err)
	}
	s := gmresEntry.New(values).(*gmres)
	if _, err := s.Begin(Problem{A: a, M: halve{}, B: b}); err != nil {
		t.Fatal(err)
	}
	seen := 0
	for step := 1; step <= 3*m; step++ {
		if _, err := s.Step(); err != nil {
			t.Fatal(err)
		}
		h, k := s.Cycle()
		if (h != nil) != (step%m == 0) {
			t.Fatalf("step %d: a whole cycle is shown: %v", step, h != nil)
		}
		if h == nil {
			continue
		}
		seen++
		if worst := relation(s, a, h, k); k != m || worst > 1e-12 {
			t.Errorf("step %d: order %d, A inv(M) V - V H is %g", step, k, worst)
		}
	}
	if seen != 3 {
		t.Errorf("%d cycles seen", seen)
	}
}

// halve applies M⁻¹ = I/2.
type halve struct{}

func (halve) Apply(dst, x []float64) { linear.Scale(dst, .5, x) }

// relation is the largest entry of A M⁻¹V_m − V_{m+1}H̄.
func relation(s *gmres, a *linear.CSR, h []float64, m int) (worst float64) {
	z, w := make([]float64, s.n), make([]float64, s.n)
	for j := range m {
		halve{}.Apply(z, s.v[j])
		a.Apply(w, z)
		for i := range m + 1 {
			linear.Axpy(-h[i*m+j], s.v[i], w)
		}
		worst = math.Max(worst, linear.NormInf(w))
	}
	return worst
}
