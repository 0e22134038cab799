package inspect

import (
	"slices"

	"dwindle/engine/linear"
)

// lopsided locates where a nonsymmetric A differs from its transpose: the rows
// with an entry that has no equal across, and whether they are rows of the
// identity whose columns were left as they are. Nil for a symmetric A.
func (e *exam) lopsided() *Lopsided {
	if e.symmetric || e.f.PatternSymmetric.Answer == Unknown {
		return nil
	}
	at := e.a.Transpose()
	e.mirror = linear.NewMirror(e.a)
	l := &Lopsided{}
	uneven, identity := make([]bool, e.f.N), make([]bool, e.f.N)
	for i := range e.f.N {
		uneven[i] = len(e.differing(at, i)) > 0
		identity[i] = uneven[i] && e.identityRow(i)
		if uneven[i] {
			l.Count++
			l.Rows = first16(l.Rows, i)
		}
		if identity[i] {
			l.Identity++
			l.IdentityRows = first16(l.IdentityRows, i)
		}
	}
	e.replaced = identity
	l.Few = e.fewest(at, uneven)
	l.Pairs = e.pairs(at, uneven, l.Count)
	l.OnlyThem = l.Identity > 0
	for i := range e.f.N {
		if !uneven[i] || identity[i] || !l.OnlyThem {
			continue
		}
		for _, j := range e.differing(at, i) {
			l.OnlyThem = l.OnlyThem && identity[j]
		}
	}
	return l
}

// differing lists the columns where row i of A and row i of Aᵀ, which is at,
// differ beyond rounding.
func (e *exam) differing(at *linear.CSR, i int) (out []int32) {
	linear.Pairs(e.a, at, i, func(j int, v, w float64) {
		if !e.mirror.Same(i, j, v, w) {
			out = append(out, int32(j))
		}
	})
	return out
}

// identityRow says whether row i holds nothing but its diagonal.
func (e *exam) identityRow(i int) bool {
	cols, vals := e.a.Row(i)
	held := false
	for k, j := range cols {
		switch {
		case int(j) == i:
			held = vals[k] != 0
		case vals[k] != 0:
			return false
		}
	}
	return held
}

// mostPairs is how many unequal pairs are told one by one, where A has fiftyfold
// as many rows.
const mostPairs = 3

// pairs lists the unequal pairs a_ij and a_ji, i < j, of which count rows hold
// one; nil where they are not few.
func (e *exam) pairs(at *linear.CSR, uneven []bool, count int) (out [][2]int) {
	if count > 2*mostPairs {
		return nil
	}
	for i, is := range uneven {
		if !is {
			continue
		}
		for _, j := range e.differing(at, i) {
			if i < int(j) {
				out = append(out, [2]int{i, int(j)})
			}
		}
	}
	if len(out) > mostPairs || 50*len(out) > e.f.N {
		return nil
	}
	return out
}

// mostFew is how many rows may carry all asymmetry to be called few.
const mostFew = 16

// fewest looks for few rows with which every unequal pair has to do, each with
// several: it takes the row of most pairs, again and again. Nil where that does
// not end soon, where so many rows are but single pairs, and where they are more
// than one in fifty.
func (e *exam) fewest(at *linear.CSR, uneven []bool) []int {
	left := map[int]map[int]bool{} // row -> rows it is unequal with
	pairs := 0
	for i, is := range uneven {
		if !is {
			continue
		}
		if len(left) > mostFew*64 {
			return nil
		}
		left[i] = map[int]bool{}
		for _, j := range e.differing(at, i) {
			left[i][int(j)] = true
			pairs++
		}
	}
	pairs /= 2
	var few []int
	for len(left) > 0 && len(few) < mostFew {
		worst := -1
		for i, with := range left {
			if worst < 0 || len(with) > len(left[worst]) || len(with) == len(left[worst]) && i < worst {
				worst = i
			}
		}
		few = append(few, worst)
		for j := range left[worst] {
			if delete(left[j], worst); len(left[j]) == 0 {
				delete(left, j)
			}
		}
		delete(left, worst)
	}
	if len(left) > 0 || pairs < 2*len(few) || 50*len(few) > e.f.N {
		return nil
	}
	slices.Sort(few)
	return few
}
