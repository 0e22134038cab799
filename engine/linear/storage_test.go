package linear

import (
	"math"
	"slices"
	"testing"
)

// bandMatrix has entries on the given diagonals, drawn from seed; every
// missing-th row is left empty. The symmetric one equals its transpose.
func bandMatrix(n int, offs []int, missing int, symmetric bool) *CSR {
	var entries []Entry
	draws := make([]float64, n*len(offs))
	Uniform(draws, 7)
	for i := range n {
		for k, off := range offs {
			j, v := i+off, draws[i*len(offs)+k]
			if j < 0 || j >= n || missing > 0 && i%missing == 0 || symmetric && off < 0 {
				continue
			}
			entries = append(entries, Entry{i, j, v})
			if symmetric && off > 0 {
				entries = append(entries, Entry{j, i, v})
			}
		}
	}
	return FromEntries(n, n, entries)
}

// nodeMatrix couples m nodes with r unknowns each to the neighbours at the
// given distances, by full blocks.
func nodeMatrix(m, r int, distances []int) *CSR {
	var entries []Entry
	for I := range m {
		for _, d := range distances {
			J := I + d*(1+I%3)
			if J < 0 || J >= m {
				continue
			}
			v := make([]float64, r*r)
			Uniform(v, uint64(I*m+J))
			for q, w := range v {
				entries = append(entries, Entry{I*r + q/r, J*r + q%r, w})
			}
		}
	}
	return FromEntries(m*r, m*r, entries)
}

// forms are matrices and the form that is right for each by counting bytes.
var forms = []struct {
	name, form string
	a          *CSR
}{
	{"plate", "half of the diagonals", plateMatrix(71)},
	{"one diagonal", "half of the diagonals", bandMatrix(3001, []int{0}, 0, true)},
	{"no main diagonal", "half of the diagonals", bandMatrix(2050, []int{-40, 40}, 0, true)},
	{"far corners", "diagonals", bandMatrix(5003, []int{-5002, -1, 0, 1, 2}, 0, false)},
	{"one side", "diagonals", bandMatrix(1030, []int{1, 2, 5}, 0, false)},
	{"with gaps", "diagonals", bandMatrix(4099, []int{-64, -1, 0, 1, 64}, 13, false)},
	{"half empty", "rows", bandMatrix(4099, []int{-64, -1, 0, 1, 64}, 2, false)},
	{"many diagonals", "rows", bandMatrix(401, distances(65), 0, false)},
	{"2 a node", "rows", nodeMatrix(1999, 2, distances(7))},
	{"3 a node", "3x3 blocks", nodeMatrix(1001, 3, distances(9))},
	{"4 a node", "4x4 blocks", nodeMatrix(999, 4, distances(6))},
	{"6 a node", "6x6 blocks", nodeMatrix(501, 6, distances(5))},
	{"5 a node", "rows", nodeMatrix(501, 5, distances(25))},
	{"not square", "rows", FromEntries(3, 2, []Entry{{0, 0, 1}, {2, 1, 1}})},
	{"nothing", "rows", FromEntries(0, 0, nil)},
}

// distances are k numbers around 0.
func distances(k int) []int {
	d := make([]int, k)
	for i := range d {
		d[i] = i - k/2
	}
	return d
}

func TestFormFollowsTheMatrix(t *testing.T) {
	for _, c := range forms {
		p := Foresee(c.a)
		if p.Form != c.form {
			t.Errorf("%s: stored as %s, want %s", c.name, p.Form, c.form)
			continue
		}
		op := p.Build()
		s, ok := As[Storage](op)
		if !ok || s.Form() != p.Form || s.ExtraBytes() != p.Extra {
			t.Errorf("%s: built other than foreseen: %+v", c.name, p)
		}
		if rows, ok := As[*CSR](op); !ok || rows != c.a {
			t.Errorf("%s: the rows are not to be had", c.name)
		}
		if r, ok := As[Rower](op); !ok || !slices.Equal(lastRow(r, c.a.NRows), lastRow(c.a, c.a.NRows)) {
			t.Errorf("%s: no rows", c.name)
		}
	}
}

func lastRow(r Rower, rows int) []float64 {
	if rows == 0 {
		return nil
	}
	_, vals := r.Row(rows - 1)
	return vals
}

// Products of every form agree with those of the rows to rounding: each sum of
// k products errs by at most k·2⁻⁵³ of the sum of sizes, in either order.
func TestFormsAgreeWithRows(t *testing.T) {
	for _, c := range forms {
		op := Fastest(c.a)
		rows, cols := c.a.Dims()
		x, y := make([]float64, cols), make([]float64, rows)
		Uniform(x, 3)
		Uniform(y, 4)
		got, want := make([]float64, rows), make([]float64, rows)
		op.Apply(got, x)
		c.a.Apply(want, x)
		near(t, c.name, c.a, got, want, x)
		gotT, wantT := make([]float64, cols), make([]float64, cols)
		at, _ := As[Transposer](op)
		at.ApplyT(gotT, y)
		c.a.ApplyT(wantT, y)
		near(t, c.name+", transposed", c.a.Transpose(), gotT, wantT, y)
		if rows != cols {
			continue
		}
		clear(want)
		dot := ApplyDot(op, want, x)
		if !slices.Equal(got, want) {
			t.Errorf("%s: the product with dot differs", c.name)
		}
		sum := 0.0
		for i, v := range x {
			sum += v * want[i]
		}
		if math.Abs(dot-sum) > 1e-12*float64(rows+1) {
			t.Errorf("%s: dot %g, plain loop %g", c.name, dot, sum)
		}
	}
}

func near(t *testing.T, name string, a *CSR, got, want, x []float64) {
	t.Helper()
	for i := range want {
		cols, vals := a.Row(i)
		size := 0.0
		for k, j := range cols {
			size += math.Abs(vals[k] * x[j])
		}
		if math.Abs(got[i]-want[i]) > 2*float64(len(cols)+1)*0x1p-53*size {
			t.Errorf("%s, row %d: %v, rows give %v", name, i, got[i], want[i])
			return
		}
	}
}

// Every form gives the same bits on any number of threads, and with the
// processor's vector instructions as without.
func TestFormsDoNotDependOnThreadsOrProcessor(t *testing.T) {
	defer SetThreads(1)
	defer func(v bool) { vectored = v }(vectored)
	for _, c := range forms {
		rows, cols := c.a.Dims()
		if rows != cols {
			continue
		}
		op := Fastest(c.a)
		x := make([]float64, cols)
		Uniform(x, 5)
		var want []float64
		var wantDot float64
		for _, v := range []bool{false, vectored} {
			vectored = v
			for _, threads := range []int{1, 2, 3} {
				SetThreads(threads)
				got := make([]float64, rows)
				dot := ApplyDot(op, got, x)
				if want == nil {
					want, wantDot = got, dot
				}
				if dot != wantDot || !slices.Equal(got, want) {
					t.Errorf("%s: %d threads, vectored %v: other bits", c.name, threads, v)
				}
			}
		}
	}
}

// An exactly symmetric matrix gives the same bits from all of its diagonals as
// from half of them.
func TestHalfOfTheDiagonalsGivesTheBitsOfAll(t *testing.T) {
	a := plateMatrix(83)
	x, all, half := make([]float64, a.NRows), make([]float64, a.NRows), make([]float64, a.NRows)
	Uniform(x, 6)
	byDiagonals(a, a.offsets()).Apply(all, x)
	byHalf(a, a.offsets()).Apply(half, x)
	if !slices.Equal(all, half) {
		t.Error("other bits")
	}
}

// Products by the forms allocate nothing once warm.
func TestFormsDoNotAllocate(t *testing.T) {
	for _, c := range forms {
		rows, cols := c.a.Dims()
		if rows != cols {
			continue
		}
		op := Fastest(c.a)
		x, y := make([]float64, cols), make([]float64, rows)
		if got := testing.AllocsPerRun(10, func() { op.Apply(y, x); ApplyDot(op, y, x) }); got > 0 {
			t.Errorf("%s: %g allocations", c.name, got)
		}
	}
}

// One entry that differs, or has no partner, in a row that no sample shows
// leaves the matrix in rows.
func TestHalfNeedsExactSymmetry(t *testing.T) {
	for name, spoil := range map[string]func(a *CSR, k int){
		"an entry differs":         func(a *CSR, k int) { a.Val[k] += 1e-9 },
		"an entry is missing":      func(a *CSR, k int) { a.Val[k] = 0 },
		"an entry is not a number": func(a *CSR, k int) { a.Val[k] = math.NaN() },
	} {
		for entry := range 2 { // of the row: below the main diagonal, and above
			a := bandMatrix(4096, []int{-9, 0, 9}, 0, true) // of 64 rows 8 are looked at
			spoil(a, a.Ptr[1000]+2*entry)
			if p := Foresee(a); p.Form != "half of the diagonals" || p.Build() != Operator(a) {
				t.Errorf("%s: foreseen as %s, or built in spite of it", name, p.Form)
			}
		}
	}
}
