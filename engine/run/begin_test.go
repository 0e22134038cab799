package run

import (
	"context"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// stopping cancels a context after some products.
type stopping struct {
	*linear.CSR
	left   int
	cancel func()
}

func (s *stopping) Apply(dst, x []float64) {
	if s.left--; s.left == 0 {
		s.cancel()
	}
	s.CSR.Apply(dst, x)
}

func (s *stopping) ApplyDot(dst, x []float64) float64 {
	s.Apply(dst, x)
	return linear.Dot(x, dst)
}

// A method whose Begin takes many products ends within a product or two of
// being cancelled.
func TestBeginCanBeCancelled(t *testing.T) {
	var e []linear.Entry
	n := 400
	for i := range n {
		e = append(e, linear.Entry{I: i, J: i, V: float64(1 + i*i)})
	}
	b := make([]float64, n)
	linear.Uniform(b, 1)
	for _, pairing := range []string{"dcg:20", "chebyshev"} {
		ctx, cancel := context.WithCancel(context.Background())
		a := &stopping{CSR: linear.FromEntries(n, n, e), left: 5, cancel: cancel}
		s := linear.System{A: a, B: b}
		m, err := Parse(pairing)
		if err != nil {
			t.Fatal(err)
		}
		tr := newTrial(1, m, s, measure(s), Limits{Target: Target{Rule: StopRHS, Tol: 1e-8}, Iterations: 10}, watch{clock: MachineClock()}, newScratch(n), 0)
		tr.setUp(ctx)
		if h := tr.History(); h.Stop != trace.Cancelled || a.left < -1 {
			t.Errorf("%s ends %s, %d products after it was cancelled", pairing, h.Stop, -a.left)
		}
	}
}
