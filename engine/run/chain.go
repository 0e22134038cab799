package run

import (
	"context"

	"dwindle/engine/linear"
	"dwindle/engine/prepare"
)

// chain applies the preparations in the order written and composes the ways
// back. Without preparations back is nil and the system is s itself.
func chain(ctx context.Context, preps []Prep, s linear.System) (linear.System, prepare.Back, error) {
	var back prepare.Back
	for _, p := range preps {
		next, b, err := p.Entry.Apply(ctx, s, p.Values)
		if err != nil {
			return s, nil, err
		}
		if back == nil {
			back = b
		} else {
			back = twice{first: back, second: b, tmp: make([]float64, s.N())}
		}
		s = next
	}
	return s, back, nil
}

// twice is the way back through two preparations: second, then first.
type twice struct {
	first, second prepare.Back
	tmp           []float64 // length n
}

func (t twice) Solution(dst, x []float64) {
	t.second.Solution(t.tmp, x)
	t.first.Solution(dst, t.tmp)
}

func (t twice) Guess(dst, x []float64) {
	t.first.Guess(t.tmp, x)
	t.second.Guess(dst, t.tmp)
}

func (t twice) Row(i int) int { return t.first.Row(t.second.Row(i)) }
