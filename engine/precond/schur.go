package precond

import (
	"context"
	"fmt"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var schurEntry = Entry{
	Name: "schur", Title: "block factorisation of a saddle system, with an approximate Schur complement",
	Source: "Benzi, Golub and Liesen, Acta Numerica 14 (2005) 1–137, section 10; Murphy, Golub and Wathen, SIAM J. Sci. Comput. 21 (2000) 1969–1972",
	Params: []linear.Param{
		{Name: "form", Kind: linear.Choice, Choices: []string{"diagonal", "full"},
			Meaning: "the two blocks alone (definite where A is symmetric), or with their coupling"},
		{Name: "inner", Kind: linear.Choice, Choices: []string{"incomplete", "exact"},
			Meaning: "how each block is solved: by ilu:0, or directly"},
	},
	Needs:     linear.NeedsEntries | linear.NeedsSplit,
	Fixed:     true,
	Symmetric: true,
	Estimate: func(a *linear.CSR, v linear.Values) (int64, bool) {
		if a == nil {
			return 0, false
		}
		blocks := 2*a.Bytes() + 64*int64(a.NRows)
		if v.Choice("inner") == "exact" {
			return blocks + meshBytes(a.NRows), false
		}
		return 2 * blocks, false
	},
	Build: buildSchur,
}

// schur solves with M made from A = [F B; C D] and T = C diag(F)⁻¹ B − D, the
// Schur complement with F replaced by its diagonal and the sign changed. In the
// form diagonal M = [F 0; 0 T]; in the form full
//
//	M = [I 0; C F⁻¹ I] [F 0; 0 −T] [I F⁻¹B; 0 I],
//
// each block solved by a factorisation of its own. With both exact and F
// diagonal, M⁻¹A has the eigenvalues 1 and (1 ± √5)/2 in the first form, and 1
// alone in the second (Murphy, Golub and Wathen 2000).
type schur struct {
	full          bool
	first, second half
	b, c          *linear.CSR
	f, t          linear.Applier // solve with F and T
	x1, y1, z1    []float64      // length of the first block
	x2, y2        []float64      // length of the second
}

// Apply computes dst = M⁻¹ x.
func (m *schur) Apply(dst, x []float64) {
	m.first.take(m.x1, x)
	m.second.take(m.x2, x)
	m.f.Apply(m.y1, m.x1)
	if m.full {
		m.c.Apply(m.y2, m.y1)
		linear.Lin(m.x2, 1, m.y2, -1, m.x2)
	}
	m.t.Apply(m.y2, m.x2)
	if m.full {
		m.b.Apply(m.x1, m.y2)
		m.f.Apply(m.z1, m.x1)
		linear.Axpy(-1, m.z1, m.y1)
	}
	m.first.put(dst, m.y1)
	m.second.put(dst, m.y2)
}

// buildSchur cuts A into its blocks and factorises F and T.
func buildSchur(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(s, "schur")
	if err != nil {
		return nil, notes, err
	}
	m := &schur{full: v.Choice("form") == "full"}
	m.first, m.second = halvesOf(s, a)
	n1, n2 := len(m.first.rows), len(m.second.rows)
	if n1 == 0 || n2 == 0 {
		return nil, notes, fmt.Errorf("schur needs two blocks of unknowns; one of them is empty")
	}
	f := block(a, m.first, m.first)
	m.b, m.c = block(a, m.first, m.second), block(a, m.second, m.first)
	t, err := complement(f, m.b, m.c, block(a, m.second, m.second))
	if err != nil {
		return nil, notes, m.first.original(err)
	}
	half := func(from float64) func(float64) {
		return func(p float64) {
			if progress != nil {
				progress(from + p/2)
			}
		}
	}
	inner := v.Choice("inner")
	var nf, nt trace.BuildNotes
	if m.f, nf, err = innerSolve(ctx, f, inner, half(0)); err != nil {
		return nil, nf, m.first.original(err)
	}
	if m.t, nt, err = innerSolve(ctx, t, inner, half(0.5)); err != nil {
		return nil, nt, m.second.original(err)
	}
	m.x1, m.y1, m.z1 = make([]float64, n1), make([]float64, n1), make([]float64, n1)
	m.x2, m.y2 = make([]float64, n2), make([]float64, n2)
	notes.Entries = nf.Entries + nt.Entries
	notes.Fill = float64(notes.Entries) / float64(a.Entries())
	notes.Bytes = nf.Bytes + nt.Bytes + m.b.Bytes() + m.c.Bytes() + 32*int64(n1) + 24*int64(n2)
	notes.MinPivot, notes.MaxPivot = min(nf.MinPivot, nt.MinPivot), max(nf.MaxPivot, nt.MaxPivot)
	notes.Growth = max(nf.Growth, nt.Growth)
	notes.Remarks = []string{fmt.Sprintf("blocks of %d and %d unknowns; the Schur complement has %d entries", n1, n2, t.Entries())}
	return m, notes, nil
}

// innerSolve factorises one block: on its pattern, or directly.
func innerSolve(ctx context.Context, a *linear.CSR, how string, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	s := linear.System{A: a}
	if how == "incomplete" {
		return built(buildILU(ctx, s, "ilu:0", 0, false, linear.Values{}, progress))
	}
	v, err := linear.Resolve("lu", exactParams, nil)
	if err != nil {
		return nil, trace.BuildNotes{}, err
	}
	return buildDirect(ctx, a, v, progress)
}
