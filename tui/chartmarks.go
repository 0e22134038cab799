package tui

import (
	"sort"

	"dwindle/engine/trace"
)

// stopLetters are the signs of common stopping rules on the picked curve,
// capitals that are no tag of a trial.
var stopLetters = map[string]string{"rhs": "R", "initial": "I", "preconditioned": "P", "backward": "B", "energy": "E"}

// marking says whose curves are marked.
type marking int

const (
	markPicked marking = iota
	markAll
	markNone
)

// markingWords is the one table of markings, in the order the key walks.
var markingWords = [...]string{
	markPicked: "marks, picked curve: R by b, I by r0, P preconditioned, B backward, E energy",
	markAll:    "marks, every curve: R by b, I by r0, P preconditioned, B backward, E energy",
	markNone:   "marks of common stopping rules are left out",
}

// recordAt is the first record not before an iteration.
func recordAt(h *trace.History, iter int) (trace.Record, bool) {
	k := sort.Search(len(h.Records), func(i int) bool { return int(h.Records[i].Iter) >= iter })
	if k == len(h.Records) {
		return trace.Record{}, false
	}
	return h.Records[k], true
}

// stops marks on a curve where a code with each common rule would
// have stopped; rules that stop in the same column share a tag. The rule that
// ended the trial is told by its head.
func (p plot) stops(t *tags, d drawn, c curve) {
	if p.marks == markNone || p.marks == markPicked && !d.picked {
		return
	}
	letters := map[int]string{} // by column
	rows := map[int]int{}
	var order []int
	for _, s := range d.h.WouldStop {
		r, ok := recordAt(d.h, s.Iter)
		if s.Iter < 0 || !ok || stopLetters[s.Rule] == "" {
			continue
		}
		x := columnOf(p.x.place(p.x.fix.of(r)), t.on.w)
		if x == c.head && d.h.Stop.Ended() {
			continue
		}
		y, ok := p.rowOf(residual(r, false), t.on.h)
		if p.truth {
			y, ok = p.rowOf(s.True, t.on.h)
		}
		if !ok {
			continue
		}
		if letters[x] == "" {
			order = append(order, x)
		}
		letters[x] += stopLetters[s.Rule]
		rows[x] = y
	}
	for _, x := range order {
		t.within(x, rows[x], letters[x], care, 4, 2)
	}
}

// energy draws the bounds of the error of the picked trial in the energy norm,
// relative to the first error, where no curve lies: "." the lower one, "'" the
// upper one.
func (p plot) energy(c *canvas) {
	if !p.bounds {
		return
	}
	for _, d := range p.curves {
		if !d.picked {
			continue
		}
		p.bound(c, d.h, '.', func(e trace.EnergyError) float64 { return e.Lower })
		p.bound(c, d.h, '\'', func(e trace.EnergyError) float64 { return e.Upper })
	}
}

// bound draws one of the two bounds.
func (p plot) bound(c *canvas, h *trace.History, sign rune, of func(trace.EnergyError) float64) {
	var list []trace.Record
	for _, e := range h.EnergyErrors {
		if r, ok := recordAt(h, e.Iter); ok {
			r.Residual = of(e)
			list = append(list, r)
		}
	}
	for x, y := range reduce(list, p.x.fix, false, p.x.place, max(c.w, 1)).mid {
		if row, ok := cellRow(p.y.row(y), c.h); ok && c.at(x, row) == ' ' {
			c.set(x, row, sign, care)
		}
	}
}
