package inspect

import "math"

// lopsided locates where a nonsymmetric A differs from its transpose: the rows
// with an entry that has no equal across, and whether they are rows of the
// identity whose columns were left as they are. Nil for a symmetric A.
func (e *exam) lopsided() *Lopsided {
	if e.symmetric || e.f.PatternSymmetric.Answer == Unknown {
		return nil
	}
	at := e.a.Transpose()
	l := &Lopsided{}
	uneven, identity := make([]bool, e.f.N), make([]bool, e.f.N)
	for i := range e.f.N {
		uneven[i] = len(differing(e, at.Col[at.Ptr[i]:at.Ptr[i+1]], at.Val[at.Ptr[i]:at.Ptr[i+1]], i)) > 0
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
	l.OnlyThem = l.Identity > 0
	for i := range e.f.N {
		if !uneven[i] || identity[i] || !l.OnlyThem {
			continue
		}
		for _, j := range differing(e, at.Col[at.Ptr[i]:at.Ptr[i+1]], at.Val[at.Ptr[i]:at.Ptr[i+1]], i) {
			l.OnlyThem = l.OnlyThem && identity[j]
		}
	}
	return l
}

// differing lists the columns where row i of A and row i of Aᵀ (cols, vals)
// differ beyond rounding.
func differing(e *exam, cols []int32, vals []float64, i int) []int32 {
	var out []int32
	rc, rv := e.a.Row(i)
	for p, q := 0, 0; p < len(rc) || q < len(cols); {
		v, w, j := 0.0, 0.0, int32(0)
		switch {
		case q == len(cols) || p < len(rc) && rc[p] < cols[q]:
			v, j, p = rv[p], rc[p], p+1
		case p == len(rc) || cols[q] < rc[p]:
			w, j, q = vals[q], cols[q], q+1
		default:
			v, w, j, p, q = rv[p], vals[q], rc[p], p+1, q+1
		}
		if !(math.Abs(v-w) <= 16*0x1p-53*max(math.Abs(v), math.Abs(w))) {
			out = append(out, j)
		}
	}
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
