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
		carryNearNull(&next, s, b)
		next.Null, next.LeftNull = carried(s.Null, b), prepare.CarryLeft(s.LeftNull, b)
		carrySecond(&next, s, b)
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

// carryNearNull takes the near-null vectors of a system along into the one
// prepared from it: what solves A x ≈ 0 there is turned as a guess is. Nodes
// need not stay together, so that constants become vectors of their own.
func carryNearNull(next *linear.System, s linear.System, back prepare.Back) {
	vectors := s.NearNull
	if vectors == nil && s.Dofs > 1 {
		for d := range s.Dofs {
			v := make([]float64, s.N())
			for i := d; i < len(v); i += s.Dofs {
				v[i] = 1
			}
			vectors = append(vectors, v)
		}
	}
	next.NearNull, next.Dofs = carried(vectors, back), 0
}

// carried turns vectors as a guess is turned.
func carried(vectors [][]float64, back prepare.Back) (out [][]float64) {
	for _, v := range vectors {
		w := make([]float64, len(v))
		back.Guess(w, v)
		out = append(out, w)
	}
	return out
}

// carrySecond takes the second block of a saddle system along.
func carrySecond(next *linear.System, s linear.System, back prepare.Back) {
	if s.Second == nil {
		return
	}
	next.Second = make([]bool, len(s.Second))
	for i := range next.Second {
		next.Second[i] = s.Second[back.Row(i)]
	}
}
