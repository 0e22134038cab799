package samples

import "dwindle/engine/linear"

var frame = Sample{
	Name:  "frame",
	Title: "steel frame over the weir: two columns and the deck between them",
	Shows: "supports that spoil the condition: the left foot held by springs of 1e10 kN/m, " +
		"the right one by three rows of the identity; displacements and rotations mixed",
	Source: "plane frame of Euler-Bernoulli members with axial stiffness; E = 2.1e8 kN/m2, A = 0.01 m2, " +
		"I = 1e-4 m4, columns of 6 m, deck of 12 m, b its dead load",
	Spectrum: "clamped: positive definite, three eigenvalues 1 from the identity rows, three near the springs' " +
		"stiffness; unsupported: three zero ones (rigid motions); pin: one zero (a free rotation)",
	Params: []linear.Param{
		{Name: "support", Kind: linear.Choice, Choices: []string{"clamped", "unsupported", "pin"},
			Meaning: "feet held; no support at all; feet held, and a hanger on a hinge near mid-deck"},
		{Name: "n", Kind: linear.Int, Default: 20, Min: 2, Max: 100000, Meaning: "elements a member"},
		{Name: "spring", Kind: linear.Real, Default: 1e10, Min: 1, Max: 1e18, Meaning: "stiffness of the left foot's springs"},
	},
	Size: func(v linear.Values) (int, int) {
		g := layOut(v)
		return g.unknowns, 36*g.elements + 6
	},
	Make:   makeFrame,
	Expect: []string{"row-scaling", "singleton-rows", "penalty-rows", "residual-rises", "lost-orthogonality"},
}

const (
	axialEA   = 2.1e8 * 0.01 // kN
	bendingEI = 2.1e8 * 1e-4 // kN m2
	deadLoad  = 5.0          // kN/m
	columnL   = 6.0          // m
	deckL     = 12.0         // m
)

// layout numbers the frame: nodes run up the left column, along the deck and
// down the right column, three unknowns each (to the right, up, rotation);
// the hanger's own unknowns follow.
type layout struct {
	n                  int // elements a member
	nodes              int // of columns and deck
	unknowns, elements int
	hanger             int // first unknown of the hanger, -1 without
}

func layOut(v linear.Values) layout {
	n := v.Int("n")
	g := layout{n: n, nodes: 3*n + 1, elements: 3 * n, hanger: -1}
	g.unknowns = 3 * g.nodes
	if v.Choice("support") == "pin" {
		g.hanger = g.unknowns
		g.unknowns += 1 + 3*n // its rotation at the hinge, and n nodes
		g.elements += n
	}
	return g
}

func makeFrame(v linear.Values) (linear.System, error) {
	g := layOut(v)
	var s assembly
	joint := func(k int) [3]int { return [3]int{3 * k, 3*k + 1, 3*k + 2} }
	for k := 0; k < 3*g.n; k++ {
		p, q := joint(k), joint(k+1)
		switch k / g.n {
		case 0:
			s.member(p, q, columnL/float64(g.n), 0, 1)
		case 1:
			s.member(p, q, deckL/float64(g.n), 1, 0)
		case 2:
			s.member(p, q, columnL/float64(g.n), 0, -1)
		}
	}
	if g.hanger >= 0 {
		g.hang(&s)
	}
	if v.Choice("support") != "unsupported" {
		s.support(joint(0), joint(g.nodes-1), v.Real("spring"))
	}
	return linear.System{A: linear.FromEntries(g.unknowns, g.unknowns, s.entries), B: g.load()}, nil
}

// member adds an element between joints p and q of length l, whose axis
// points along (cx, cy), one of them 0 and the other 1 or -1.
func (s *assembly) member(p, q [3]int, l, cx, cy float64) {
	along, across := 0, 1
	if cx == 0 {
		along, across = 1, 0
	}
	ka := axialEA / l
	s.add([]int{p[along], q[along]}, []float64{1, 1}, func(i, j int) float64 {
		if i == j {
			return ka
		}
		return -ka
	})
	side := cx - cy // the deflection counts to the left of the axis: (-cy, cx)
	k := bending(bendingEI, l)
	s.add([]int{p[across], p[2], q[across], q[2]}, []float64{side, 1, side, 1},
		func(i, j int) float64 { return k[i][j] })
}

// hang adds the hanger: it shares the displacements of the node near mid-deck
// but turns freely about it.
func (g layout) hang(s *assembly) {
	top := 3 * (g.n + g.n/2)
	p := [3]int{top, top + 1, g.hanger}
	for k := 0; k < g.n; k++ {
		u := g.hanger + 1 + 3*k
		q := [3]int{u, u + 1, u + 2}
		s.member(p, q, columnL/2/float64(g.n), 0, -1)
		p = q
	}
}

// support holds the left foot by springs and replaces the right foot's rows
// and columns by those of the identity.
func (s *assembly) support(left, right [3]int, spring float64) {
	kept := s.entries[:0]
	for _, e := range s.entries {
		if e.I < right[0] || e.I > right[2] {
			if e.J < right[0] || e.J > right[2] {
				kept = append(kept, e)
			}
		}
	}
	for _, d := range right {
		kept = append(kept, linear.Entry{I: d, J: d, V: 1})
	}
	for _, d := range left {
		kept = append(kept, linear.Entry{I: d, J: d, V: spring})
	}
	s.entries = kept
}

// load is the deck's own weight, carried by its nodes.
func (g layout) load() []float64 {
	b := make([]float64, g.unknowns)
	w := -deadLoad * deckL / float64(g.n)
	for k := g.n; k <= 2*g.n; k++ {
		b[3*k+1] = w
	}
	b[3*g.n+1], b[6*g.n+1] = w/2, w/2
	return b
}
