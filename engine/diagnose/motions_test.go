package diagnose_test

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// sheets are so many separate lattices of 5 x 4 nodes in the plane, all nodes of
// a cell tied by springs; rows of the first are held.
func sheets(count int, held ...int) linear.System {
	var out []linear.Entry
	add := func(i, j int, v float64) { out = append(out, linear.Entry{I: i, J: j, V: v}) }
	spring := func(p, q int, dx, dy float64) {
		square := dx*dx + dy*dy
		for i, di := range []float64{dx, dy} {
			for j, dj := range []float64{dx, dy} {
				k := 1e4 * di * dj / (square * math.Sqrt(square))
				add(2*p+i, 2*p+j, k)
				add(2*q+i, 2*q+j, k)
				add(2*p+i, 2*q+j, -k)
				add(2*q+i, 2*p+j, -k)
			}
		}
	}
	for first := 0; first < 20*count; first += 20 {
		for k := range 20 {
			p, right, up := first+k, k%5 < 4, k < 15
			if right {
				spring(p, p+1, 1, 0)
			}
			if up {
				spring(p, p+5, 0, 1)
			}
			if right && up {
				spring(p, p+6, 1, 1)
				spring(p+1, p+5, -1, 1)
			}
		}
	}
	for _, i := range held {
		add(i, i, 1e4)
	}
	n := 40 * count
	s := linear.System{A: linear.FromEntries(n, n, out), B: make([]float64, n), Digits: 17}
	for i := range s.B {
		s.B[i] = float64(i%7) - 2
	}
	return s
}

// What holds a body too little is told by what it can do: nothing holds it, a
// hinge, separate parts, or more motions than are held; and never that x were
// known up to one constant where more is free.
func TestMotionsAreToldRightly(t *testing.T) {
	for _, c := range []struct {
		count      int
		held       []int
		claim, try string
	}{
		{1, nil, "3 zero-energy motions of the whole: nothing holds it in place; b pushes along them with", "project/cg+ic:0"},
		{1, []int{0}, "2 zero-energy motions of the whole: too few supports hold it in place, or none; b pushes along them with", "project/cg+ic:0"},
		{1, []int{0, 1}, "one zero-energy motion of the whole: a hinge, or a support too few; b pushes along it with", "project/cg+ic:0"},
		{2, nil, "6 zero-energy motions of 2 separate parts: nothing holds them in place; b pushes along them with", "project/cg+ic:0"},
		{9, nil, "27 zero-energy motions of 9 separate parts: nothing holds them in place; b pushes along them with", "project/cg+ic:0"},
		{13, nil, "at least 37 zero-energy motions (LDL' leaves 39 pivots zero to rounding) of 13 separate parts: nothing holds them in place; b pushes along them with at least", "minres+none"},
	} {
		what := fmt.Sprintf("%d sheets, held %v", c.count, c.held)
		got := told(t, sheets(c.count, c.held...))
		only(t, what, got, "mechanism")
		g := got["mechanism"]
		says(t, g, c.claim)
		if g.Weight != diagnose.Blocker || len(g.Try) != 1 || g.Try[0] != c.try {
			t.Errorf("%s: %s, tries %v", what, g.Weight, g.Try)
		}
	}
	got := told(t, sheets(1, 0, 1, 3)) // the fourth row is the second node's, upwards
	only(t, "held", got)
}

// A couple sums to zero along each axis and turns the sheet: nothing is said of
// a consistent b, and the number is that of the rotation, by its closed form.
// Loads in balance push along nothing.
func TestACoupleTurnsTheSheet(t *testing.T) {
	s := sheets(1)
	clear(s.B)
	s.B[1], s.B[9] = -1, 1 // along y, at the ends of the lowest row of nodes
	turn, moment := 0.0, 4.0
	for k := range 20 {
		x, y := float64(k%5)-2, float64(k/5)-1.5
		turn += x*x + y*y
	}
	got := told(t, s)
	only(t, "couple", got, "mechanism")
	says(t, got["mechanism"], fmt.Sprintf("b pushes along them with %.3g of its norm, and no x can answer that", moment/math.Sqrt(turn)/math.Sqrt2))
	x := append([]float64(nil), sheets(1).B...)
	s.A.Apply(s.B, x)
	got = told(t, s)
	only(t, "balanced", got, "mechanism")
	if g := got["mechanism"]; strings.Contains(g.Claim, "pushes") || !strings.Contains(g.Advice, "b pushes along none of it") {
		t.Errorf("%s; %s", g.Claim, g.Advice)
	}
}

// Where a constant on the rows without a diagonal is all that is free and b is
// in reach, that is a note, with the rows by their range or their labels; with b
// out of reach nothing is worse. A complete factorisation is offered of neither.
func TestSaddleUpToAConstant(t *testing.T) {
	const m = 4 // cells a side of a square, and what flows between them
	const first = 2 * m * (m - 1)
	var out []linear.Entry
	flow := func(k, from, to int) {
		out = append(out, linear.Entry{I: k, J: k, V: 2})
		for cell, sign := range map[int]float64{from: -1, to: 1} {
			out = append(out, linear.Entry{I: k, J: first + cell, V: sign}, linear.Entry{I: first + cell, J: k, V: sign})
		}
	}
	for k := range m * (m - 1) {
		i, j := k%(m-1), k/(m-1)
		flow(k, i+m*j, i+1+m*j)
		flow(m*(m-1)+k, j+m*i, j+m*i+m)
	}
	n := first + m*m
	s := linear.System{A: linear.FromEntries(n, n, out), B: make([]float64, n), Digits: 17}
	s.B[2] = 1
	got := told(t, s)
	only(t, "in reach", got, "near-null")
	g := got["near-null"]
	says(t, g, "A is singular to rounding", "constant on rows 25 to 40 (those with a zero on the diagonal), zero on all others", "known up to a constant there")
	if g.Weight != diagnose.Note || len(g.Evidence[0].Rows) > 0 {
		t.Errorf("%s, rows %v", g.Weight, g.Evidence[0].Rows)
	}
	s.Labels = make([]string, n)
	s.Labels[first], s.Labels[n-1] = "p1", "p16"
	says(t, told(t, s)["near-null"], "constant on rows 25 = p1 to 40 = p16")
	s.B[first] = 1
	if g := told(t, s)["near-null"]; g.Weight != diagnose.Blocker || strings.Contains(g.Claim, "known up to") {
		t.Errorf("out of reach: %s: %s", g.Weight, g.Claim)
	}
	for _, g := range judged(t, s) {
		for _, p := range g.Try {
			if strings.Contains(p, "ldl") || strings.Contains(p, "jacobi") {
				t.Errorf("%s offers %s", g.Rule, p)
			}
		}
		if strings.Contains(g.Advice, "ldl") {
			t.Errorf("%s: %s", g.Rule, g.Advice)
		}
	}
}

// What the sums leave open is not called settled before the second look.
func TestUpToAConstantAsFarAsSeen(t *testing.T) {
	s := sheets(1)
	clear(s.B)
	s.B[1], s.B[9] = -1, 1
	f := first(t, s)
	for _, g := range diagnose.Judge(diagnose.Case{Facts: f, Tol: 1e-8}) {
		if g.Rule == "up-to-a-constant" {
			says(t, g, "up to more if A has other null vectors")
			return
		}
	}
	t.Errorf("nothing is said; unreachable %s (%s)", f.Unreachable.Answer, f.Unreachable.Why)
	if f.Unreachable.Answer != inspect.Unknown {
		t.Error("settled by sums alone")
	}
}
