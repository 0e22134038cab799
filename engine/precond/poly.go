package precond

import (
	"context"
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var polyEntry = Entry{
	Name: "poly", Title: "Chebyshev polynomial of the scaled matrix",
	Source: "Johnson, Micchelli and Paul, SIAM J. Numer. Anal. 20 (1983) 362–376; Saad, Iterative Methods for Sparse Linear Systems, 2nd ed. (2003), section 12.3",
	Params: []linear.Param{
		{Name: "degree", Kind: linear.Int, Default: 4, Min: 1, Max: 100, Meaning: "products with A in one use"},
		{Name: "ratio", Kind: linear.Real, Default: 30, Min: 1.01, Max: 1e8,
			Meaning: "the polynomial is best on the part from 1/ratio of the largest eigenvalue's bound up"},
	},
	Needs: linear.NeedsEntries | linear.NeedsDiagonal,
	Fixed: true, Symmetric: true, Transposes: true,
	Estimate: func(a *linear.CSR, _ linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		return 24 * int64(a.NRows), true
	},
	Build: buildPoly,
}

// poly applies M⁻¹ = p(D⁻¹A) D⁻¹, D = diag(A), where 1 − λ p(λ) is the
// Chebyshev polynomial of degree+1 that is 1 at 0 and least on
// [top/ratio, top]. top = ‖D⁻¹A‖∞ bounds the eigenvalues of D⁻¹A (Gershgorin);
// p is positive on all numbers up to it.
type poly struct {
	a       *linear.CSR
	inverse []float64 // 1/a_ii, length n
	r, step []float64 // length n
	degree  int
	c, e    float64 // centre and half length of the interval
}

// Apply computes dst = M⁻¹ x by degree+1 steps of the Chebyshev iteration for
// D⁻¹A z = D⁻¹x from zero.
func (p *poly) Apply(dst, x []float64) { p.iterate(dst, x, p.a.Apply) }

// ApplyT computes dst = M⁻ᵀ x = p(D⁻¹Aᵀ) D⁻¹ x.
func (p *poly) ApplyT(dst, x []float64) { p.iterate(dst, x, p.a.ApplyT) }

func (p *poly) iterate(dst, x []float64, product func(dst, x []float64)) {
	sigma := p.c / p.e
	rho := 1 / sigma
	linear.MulDot(p.step, p.inverse, x)
	linear.Scale(p.step, 1/p.c, p.step)
	copy(dst, p.step)
	for range p.degree {
		product(p.r, dst)
		linear.Lin(p.r, 1, x, -1, p.r)
		linear.MulDot(p.r, p.inverse, p.r)
		next := 1 / (2*sigma - rho)
		linear.Lin(p.step, next*rho, p.step, 2*next/p.e, p.r)
		linear.Axpy(1, p.step, dst)
		rho = next
	}
}

func buildPoly(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	const name = "poly"
	var notes trace.BuildNotes
	a, err := entriesOf(s, name)
	if err != nil {
		return nil, notes, err
	}
	n := a.NRows
	p := &poly{a: a, degree: v.Int("degree"), r: linear.Bulk[float64](n), step: linear.Bulk[float64](n)}
	if _, p.inverse, err = pivots(ctx, a, name, 1, &notes, progress); err != nil {
		return nil, notes, err
	}
	top := 0.0
	for i := 0; i < n; i++ {
		_, vals := a.Row(i)
		sum := 0.0
		for _, x := range vals {
			sum += math.Abs(x)
		}
		top = max(top, sum*math.Abs(p.inverse[i]))
	}
	low := top / v.Real("ratio")
	p.c, p.e = (top+low)/2, (top-low)/2
	notes.Entries = int64(n)
	notes.Fill = float64(n) / float64(a.Entries())
	notes.Bytes = 24 * int64(n)
	notes.Symmetric = symmetric(a)
	notes.Definite = notes.Symmetric && positive(p.inverse)
	return p, notes, nil
}
