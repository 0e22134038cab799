package prepare

import (
	"context"
	"fmt"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
)

var rcmEntry = reordering("rcm", "reverse Cuthill–McKee order: entries near the diagonal",
	"Cuthill and McKee, Proc. 24th ACM Conf. (1969) 157–172; George (1971)", direct.ReverseCuthillMcKee)

var amdEntry = reordering("amd", "approximate minimum degree order: low fill",
	"Amestoy, Davis and Duff, SIAM J. Matrix Anal. Appl. 17 (1996) 886–905", direct.MinimumDegree)

var ndEntry = reordering("nd", "nested dissection order: low fill on meshes",
	"George, SIAM J. Numer. Anal. 10 (1973) 345–363", direct.NestedDissection)

var colourEntry = reordering("colour", "rows by colour: those of one colour are not joined",
	"Welsh and Powell, Comput. J. 10 (1967) 85–86", func(a *linear.CSR) linear.Permutation {
		return direct.ByColour(direct.Colour(a))
	})

// reordering is a preparation by the symmetric permutation P A Pᵀ (P x) = P b.
func reordering(name, title, source string, order func(*linear.CSR) linear.Permutation) Entry {
	return Entry{
		Name: name, Title: title, Source: source,
		Needs:    linear.NeedsEntries,
		Estimate: func(a *linear.CSR, _ linear.Values) int64 { return a.Bytes() + 36*int64(a.NRows) },
		Apply: func(ctx context.Context, s linear.System, _ linear.Values) (linear.System, Back, error) {
			a := s.Matrix()
			if a == nil {
				return s, nil, fmt.Errorf("%s needs the entries of the matrix", name)
			}
			if err := ctx.Err(); err != nil {
				return s, nil, err
			}
			p := order(a)
			if err := ctx.Err(); err != nil {
				return s, nil, err
			}
			back := permuted{p}
			s.A = a.Permute(p, p)
			s.B, s.Guess, s.Exact = guessed(back, s.B), guessed(back, s.Guess), guessed(back, s.Exact)
			return s, back, ctx.Err()
		},
	}
}

// permuted is the way back from P A Pᵀ y = P b: x = Pᵀ y.
type permuted struct{ p linear.Permutation }

// Solution computes dst = Pᵀ x.
func (m permuted) Solution(dst, x []float64) { m.p.Backward(dst, x) }

// Guess computes dst = P x.
func (m permuted) Guess(dst, x []float64) { m.p.Forward(dst, x) }

// Row returns the original row at place i.
func (m permuted) Row(i int) int { return int(m.p[i]) }
