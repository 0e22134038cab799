package precond

import (
	"math"
	"slices"
	"strings"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// singles are the factorisations that can keep single precision, with other
// parameters than their defaults, and a matrix for each.
func singles() map[string]*linear.CSR {
	return map[string]*linear.CSR{
		"ic:0": plate(9), "ic:2": plate(9), "mic:0": plate(9), "ict:1e-3,4": plate(9),
		"ilu:0": unsymmetric(60), "ilu:2": unsymmetric(60), "milu:0": unsymmetric(60), "ilut:1e-3,8": unsymmetric(60), "ilutp:1e-3,8,1": scrambled(40),
	}
}

// factorsIn returns the factors of a built preconditioner, and the columns
// that ilutp exchanged.
func factorsIn(t *testing.T, m linear.Applier) (*factors, []int32) {
	t.Helper()
	switch m := m.(type) {
	case *factors:
		return m, nil
	case *permuted:
		return m.f, m.col
	}
	t.Fatalf("%T has no factors", m)
	return nil, nil
}

// rounded multiplies L D R out densely, its strict triangles rounded to single
// precision, and inverts it; ilutp's columns go back to their places.
func rounded(t *testing.T, m linear.Applier) *mat.Dense {
	t.Helper()
	f, col := factorsIn(t, m)
	n := len(f.inverse)
	l, r := dense(f.lower), dense(f.upper)
	for i := range n {
		for j := range n {
			l.Set(i, j, float64(float32(l.At(i, j))))
			r.Set(i, j, float64(float32(r.At(i, j)))/f.inverse[i])
		}
		l.Set(i, i, 1)
		r.Set(i, i, 1/f.inverse[i])
	}
	var p, inv mat.Dense
	p.Mul(l, r)
	if err := inv.Inverse(&p); err != nil {
		t.Fatal(err)
	}
	if col == nil {
		return &inv
	}
	back := mat.NewDense(n, n, nil)
	for k, c := range col {
		back.SetRow(int(c), inv.RawRowView(k))
	}
	return back
}

// M⁻¹ of single factors, and its transpose, are those of the double factors
// rounded, to the rounding of double sums; they are not those of the double
// factors themselves.
func TestSingleRoundsTheFactors(t *testing.T) {
	for name, a := range singles() {
		double, _ := made(t, a, name)
		single, _ := made(t, a, name+",store=single")
		want := rounded(t, double)
		size := mat.Norm(want, 2)
		if off := distance(inverse(single, a.NRows), want); off > 1e-14*size {
			t.Errorf("%s: M⁻¹ differs by %g from the rounded one of norm %g", name, off, size)
		}
		if off := distance(inverse(double, a.NRows), want); off < 1e-9*size {
			t.Errorf("%s: the double factors differ by %g only", name, off)
		}
		mt, ok := linear.As[linear.Transposer](single)
		if !ok {
			t.Fatalf("%s has no transpose in single precision", name)
		}
		if off := distance(inverse(linear.Func{N: a.NRows, Do: mt.ApplyT}, a.NRows), want.T()); off > 1e-14*size {
			t.Errorf("%s: M⁻ᵀ differs by %g from the rounded one of norm %g", name, off, size)
		}
	}
}

// distance is the Frobenius norm of a difference.
func distance(a, b mat.Matrix) float64 {
	var d mat.Dense
	d.Sub(a, b)
	return mat.Norm(&d, 2)
}

// Of a symmetric factorisation L is rounded once for both sweeps: M⁻¹ stays
// symmetric to the rounding of its sums.
func TestSingleStaysSymmetric(t *testing.T) {
	for _, name := range []string{"ic:0", "ic:2", "mic:0", "ict:1e-3,4"} {
		m, notes := made(t, plate(9), name+",store=single")
		inv := inverse(m, 81)
		if off := distance(inv, inv.T()); off > 1e-15*mat.Norm(inv, 2) {
			t.Errorf("%s: M⁻¹ is unsymmetric by %g", name, off)
		}
		var e mat.EigenSym
		if !e.Factorize(symmetrised(inv), false) || e.Values(nil)[0] <= 0 || !notes.Symmetric || !notes.Definite {
			t.Errorf("%s: M is not told, or not, symmetric and definite", name)
		}
	}
}

// Single factors stored by diagonals are double ones with rounded values.
func TestSingleByDiagonals(t *testing.T) {
	for name, a := range map[string]*linear.CSR{"ic:0": plate(110), "ilu:0": drifting(110)} {
		m, notes := made(t, a, name+",single")
		f, rows := m.(*factors), byRows(t, a, name == "ic:0")
		if f.down == nil || f.below != nil || f.lower != nil {
			t.Fatalf("%s of the plate is not stored by diagonals", name)
		}
		if want := int64(a.NRows) * 4 * 2; notes.Bytes != f.bytes() || name == "ic:0" && f.bytes() != want+8*int64(a.NRows) {
			t.Errorf("%s: %d bytes noted, %d taken", name, notes.Bytes, f.bytes())
		}
		for _, v := range [][]float64{rows.lower.Val, rows.upper.Val} {
			for k := range v {
				v[k] = float64(float32(v[k]))
			}
		}
		x, got, want := make([]float64, a.NRows), make([]float64, a.NRows), make([]float64, a.NRows)
		linear.Uniform(x, 7)
		f.Apply(got, x)
		rows.Apply(want, x)
		if !slices.Equal(got, want) {
			t.Errorf("%s: other bits than by rows", name)
		}
		f.ApplyT(got, x)
		rows.ApplyT(want, x)
		linear.Axpy(-1, want, got)
		if off := linear.NormInf(got); off > 1e-14*linear.NormInf(want) {
			t.Errorf("%s: the transpose differs from that by rows by %g", name, off)
		}
	}
}

// Four bytes less an entry are taken, told and foreseen.
func TestSingleBytes(t *testing.T) {
	for name, a := range singles() {
		e, v := lookup(t, name+",store=single")
		_, other := lookup(t, name)
		double, doubled := made(t, a, name)
		single, notes := made(t, a, name+",store=single")
		f, _ := factorsIn(t, single)
		d, _ := factorsIn(t, double)
		saved := 4 * int64(f.entries)
		if doubled.Bytes-notes.Bytes != saved || d.bytes()-f.bytes() != saved || notes.Entries != doubled.Entries {
			t.Errorf("%s: %d bytes noted, %d in double, %d entries", name, notes.Bytes, doubled.Bytes, f.entries)
		}
		bytes, exact := e.Estimate(a, v)
		most, _ := e.Estimate(a, other)
		if exact && bytes != notes.Bytes || bytes < notes.Bytes || bytes >= most {
			t.Errorf("%s: %d bytes foreseen, %d taken; in double %d foreseen", name, bytes, notes.Bytes, most)
		}
	}
}

// The word is printed where it is not the default, reads back, and nothing
// else is taken for it.
func TestSingleIsWritten(t *testing.T) {
	for in, want := range map[string]string{
		"ic": "ic:0", "ic:store=double": "ic:0", "ic:1,single": "ic:1,single", "mic:store=single": "mic:0,single", "milu:0,single": "milu:0,single",
		"ilu:store=single": "ilu:0,single", "ict:store=single": "ict:1e-3,10,single", "ilut:1e-3,25,single": "ilut:1e-3,25,single",
		"ilut": "ilut:1e-3,10", "ilutp:store=single": "ilutp:1e-3,10,0.1,single",
	} {
		e, v := lookup(t, in)
		got := linear.Part{Name: e.Name, Args: v.Args()}.String()
		if _, again := lookup(t, got); got != want || again.Choice("store") != v.Choice("store") {
			t.Errorf("%s is printed %s, want %s", in, got, want)
		}
	}
	e, _ := lookup(t, "ic")
	if _, err := linear.Resolve(e.Name, e.Params, []linear.Arg{{Name: "store", Text: "half"}}); err == nil || !strings.Contains(err.Error(), "double, single") {
		t.Errorf("half precision: %v", err)
	}
}

// An entry that single precision would turn into infinity, zero or a subnormal
// number is refused with its row; double precision takes it, and a stored zero
// is no such entry.
func TestSingleRange(t *testing.T) {
	for name, c := range map[string]struct {
		a   [][]float64
		row int
	}{
		"ilu:0":     {[][]float64{{1, 0, 0}, {0, 1e-30, 1}, {0, 1e10, 1}}, 2},        // l = 1e40
		"milu:0":    {[][]float64{{1, 1e-50}, {1, 1}}, 0},                            // r = 1e-50
		"ilut:0,3":  {[][]float64{{1, 0}, {-1e-39, 1}}, 1},                           // l = −1e-39, subnormal
		"ilutp:0,3": {[][]float64{{1, 1e-60}, {1, 1}}, 0},                            // r = 1e-60
		"ic:0":      {[][]float64{{1, 0, 0}, {0, 1, 1e-45}, {0, 1e-45, 1}}, 2},       // l = 1e-45
		"mic:0":     {[][]float64{{1e-30, 1e9, 0}, {1e9, 1e50, 0}, {0, 0, 1}}, 1},    // l = 1e39
		"ict:0,3":   {[][]float64{{1, 1e-50, 0}, {1e-50, 1, 1e-3}, {0, 1e-3, 1}}, 1}, // l = 1e-50
		"ilu:1":     {[][]float64{{1, 1e-50}, {1, 1}}, 0},
	} {
		if _, _, err := tryMake(t, fromRows(c.a), name); err != nil {
			t.Errorf("%s in double precision: %v", name, err)
		}
		_, _, err := tryMake(t, fromRows(c.a), name+",store=single")
		if broke(t, err, c.row); err != nil && !strings.Contains(err.Error(), "range of single precision") {
			t.Errorf("%s: %v", name, err)
		}
	}
	a := plate(4)
	a.Val[1], a.Val[a.Ptr[1]] = 0, 0
	made(t, a, "ic:0,single")
	for v, fine := range map[float64]bool{math.MaxFloat32: true, 3.5e38: false, leastSingle: true, leastSingle * 0.99: false, -1e-46: false, 0: true} {
		if err := fits(fromEntry(v), "ilu:0"); (err == nil) != fine {
			t.Errorf("%g: %v", v, err)
		}
	}
}

// fromEntry is a strict triangle with one entry, which may be zero.
func fromEntry(v float64) *linear.CSR {
	return linear.FromEntries(2, 2, []linear.Entry{{I: 1, J: 0, V: v}})
}

// What single precision keeps of M costs no iterations to speak of: M⁻¹A has
// the same condition to single precision.
func TestSingleConditions(t *testing.T) {
	a := plate(16)
	for _, name := range []string{"ic:0", "mic:0", "ict:1e-3,10"} {
		double, _ := made(t, a, name)
		single, _ := made(t, a, name+",store=single")
		near(t, name+": condition", condition(t, single, a), condition(t, double, a), 1e-5)
	}
}
