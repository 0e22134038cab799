package precond

import (
	"context"
	"fmt"

	"dwindle/engine/direct"
	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

var rasEntry = Entry{
	Name: "ras", Title: "restricted additive Schwarz, overlapping parts",
	Source: "Cai and Sarkis, SIAM J. Sci. Comput. 21 (1999) 792–797",
	Params: []linear.Param{
		{Name: "parts", Kind: linear.Int, Default: 8, Min: 1, Max: 65536, Meaning: "parts the unknowns are cut into"},
		{Name: "overlap", Kind: linear.Int, Default: 1, Min: 0, Max: 10, Meaning: "layers of neighbours that a part sees"},
		{Name: "local", Kind: linear.Choice, Choices: []string{"ilu", "ic", "lu"}, Meaning: "how a part is solved: ilu:0, ic:0 or exactly"},
	},
	Needs: linear.NeedsEntries,
	Fixed: true, Transposes: true,
	Estimate: estimateRAS,
	Build:    buildRAS,
}

// estimateRAS takes the parts for twice the matrix, or for the factors of the
// whole of it.
func estimateRAS(a *linear.CSR, v linear.Values) (int64, bool) {
	if a == nil {
		return 0, false
	}
	if v.Choice("local") == "lu" {
		return 2*direct.PlanLU(a, direct.AMD).Bytes() + 48*int64(a.NRows), false
	}
	lower, upper := halves(a)
	return 2*factorBytes(a.NRows, lower, upper, v) + 48*int64(a.NRows), false
}

// ras applies M⁻¹ = Σ R̃_iᵀ A_i⁻¹ R_i: R_i restricts to part i with its
// overlap, R̃_i to the unknowns it owns.
type ras struct {
	parts []rasPart
	dst   []float64 // of the use under way
	x     []float64
	do    func(part int)
}

// rasPart is one part: its unknowns with the overlap, ascending, and which of
// them it owns.
type rasPart struct {
	rows []int32
	own  []bool
	m    local
	x, y []float64 // of the length of rows
}

// local solves with one part on the calling thread.
type local interface {
	linear.Applier
	linear.Transposer
}

// localLU is a local solve by LU factors.
type localLU struct{ *direct.LU }

// Apply computes dst = A_i⁻¹ x.
func (e localLU) Apply(dst, x []float64) { e.Solve(dst, x) }

// ApplyT computes dst = A_i⁻ᵀ x.
func (e localLU) ApplyT(dst, x []float64) { e.SolveT(dst, x) }

// Apply computes dst = M⁻¹ x, the parts side by side.
func (m *ras) Apply(dst, x []float64) {
	m.dst, m.x = dst, x
	linear.Parallel(len(m.parts), m.do)
	m.dst, m.x = nil, nil
}

func (m *ras) part(k int) {
	p := &m.parts[k]
	for i, r := range p.rows {
		p.x[i] = m.x[r]
	}
	p.m.Apply(p.y, p.x)
	for i, r := range p.rows {
		if p.own[i] {
			m.dst[r] = p.y[i]
		}
	}
}

// ApplyT computes dst = M⁻ᵀ x = Σ R_iᵀ A_i⁻ᵀ R̃_i x.
func (m *ras) ApplyT(dst, x []float64) {
	clear(dst)
	for k := range m.parts {
		p := &m.parts[k]
		for i, r := range p.rows {
			p.x[i] = 0
			if p.own[i] {
				p.x[i] = x[r]
			}
		}
		p.m.ApplyT(p.y, p.x)
		for i, r := range p.rows {
			dst[r] += p.y[i]
		}
	}
}

func buildRAS(ctx context.Context, s linear.System, v linear.Values, progress func(float64)) (linear.Applier, trace.BuildNotes, error) {
	var notes trace.BuildNotes
	a, err := entriesOf(s, "ras")
	if err != nil {
		return nil, notes, err
	}
	if err := ctx.Err(); err != nil {
		return nil, notes, err
	}
	g, n := graph{a, a.Transpose()}, a.NRows
	m, mark := &ras{}, make([]int32, n)
	m.do = m.part
	sets := partition(g, min(v.Int("parts"), n))
	for k, own := range sets {
		if progress != nil {
			progress((float64(k) + 0.5) / float64(len(sets)))
		}
		rows := g.widen(own, v.Int("overlap"), mark)
		p := rasPart{rows: rows, own: make([]bool, len(rows)), x: make([]float64, len(rows)), y: make([]float64, len(rows))}
		for i, r := range rows {
			if len(own) > 0 && own[0] == r {
				p.own[i], own = true, own[1:]
			}
		}
		earlier := len(notes.Broke)
		p.m, err = solveLocally(ctx, within(a, rows, mark), v.Choice("local"), &notes)
		for i := earlier; i < len(notes.Broke); i++ {
			notes.Broke[i].Row = int(rows[notes.Broke[i].Row])
		}
		if err != nil {
			return nil, notes, asPart(err, rows, k)
		}
		notes.Bytes += 21 * int64(len(rows))
		m.parts = append(m.parts, p)
	}
	notes.Fill = float64(notes.Entries) / float64(a.Entries())
	notes.Growth = growth(m, a)
	return m, notes, nil
}

// solveLocally builds the solver of one part and adds to the notes.
func solveLocally(ctx context.Context, a *linear.CSR, how string, notes *trace.BuildNotes) (local, error) {
	if how == "lu" {
		f, err := direct.FactorLU(ctx, a, direct.PlanLU(a, direct.AMD), nil)
		if err != nil {
			return nil, err
		}
		notes.Entries, notes.Bytes = notes.Entries+f.Entries(), notes.Bytes+f.Bytes()
		return localLU{f}, nil
	}
	build := buildILU0
	if how == "ic" {
		build = buildIC0
	}
	f, more, err := build(ctx, linear.System{A: a})
	notes.Broke = append(notes.Broke, more.Broke...)
	if err != nil {
		return nil, err
	}
	notes.Entries, notes.Bytes = notes.Entries+more.Entries, notes.Bytes+f.bytes()
	notes.Shift = max(notes.Shift, more.Shift)
	pivot(notes, more.MinPivot)
	pivot(notes, more.MaxPivot)
	return f, nil
}

func buildILU0(ctx context.Context, s linear.System) (*factors, trace.BuildNotes, error) {
	return buildILU(ctx, s, "ilu:0", 0, false, linear.Values{}, nil)
}

func buildIC0(ctx context.Context, s linear.System) (*factors, trace.BuildNotes, error) {
	return buildIC(ctx, s, 0, linear.Values{}, nil)
}

// asPart names the row of A and the part in the error of a local factorisation.
func asPart(err error, rows []int32, part int) error {
	switch e := err.(type) {
	case *Breakdown:
		err = &Breakdown{Method: fmt.Sprintf("ras (part %d, %s)", part+1, e.Method), Row: int(rows[e.Row]), Pivot: e.Pivot, Why: e.Why}
	case *direct.PivotError:
		err = &Breakdown{Method: fmt.Sprintf("ras (part %d, lu)", part+1), Row: int(rows[e.Row]), Pivot: e.Pivot, Why: "no pivot beyond rounding"}
	}
	return err
}
