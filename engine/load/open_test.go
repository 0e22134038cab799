package load

import (
	"context"
	"errors"
	"math"
	"os"
	"path/filepath"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// TestOpenMatrices holds the open matrices against what is known of them: n,
// entries and explicit zeros as their collections publish them, the digits of
// the longest value as counted by a separate script, 17 for patterns, for
// values that are all exact (pts5ldd03: -64 and 256) and for 17 or more.
func TestOpenMatrices(t *testing.T) {
	dir := openData(t)
	for _, c := range []struct {
		file                             string
		n, entries, stored, zeros, digit int
		symmetric                        bool
	}{
		{"494_bus.mtx", 494, 1666, 1080, 0, 7, true},
		{"LFAT5.mtx", 14, 46, 30, 0, 17, true},
		{"arc130.rua", 130, 1282, 1282, 245, 16, false},
		{"bcsstk01.rb", 48, 400, 224, 0, 12, true},
		{"bcsstk01.rsa", 48, 400, 224, 0, 12, true},
		{"bcsstk13.mtx.gz", 2003, 83883, 42943, 0, 12, true},
		{"bcsstk16.mtx.gz", 4884, 290378, 147631, 0, 17, true},
		{"bcsstk24.rsa", 3562, 159910, 81736, 0, 13, true},
		{"bfwa62.mtx", 62, 450, 450, 0, 16, false},
		{"can_24.psa", 24, 160, 92, 0, 17, true},
		{"cryg2500.mtx", 2500, 12349, 12349, 0, 16, false},
		{"ex14.rua", 3251, 66775, 66775, 900, 15, false},
		{"fs_183_1.mtx", 183, 1069, 1069, 71, 17, false},
		{"hangGlider_2.mtx", 1647, 14754, 7834, 0, 17, true},
		{"jagmesh7.mtx", 1138, 7450, 4294, 0, 17, true},
		{"olm1000.mtx", 1000, 3996, 3996, 0, 9, false},
		{"pts5ldd03.mtx", 161, 745, 745, 0, 17, false},
		{"rajat19.mtx", 1157, 5399, 5399, 1700, 16, false},
		{"reorientation_1.mtx", 677, 7326, 3861, 0, 17, true},
		{"watt_2.mtx", 1856, 11550, 11550, 0, 6, false},
		{"west0067.rua", 67, 294, 294, 0, 12, false},
		{"west0479.mtx", 479, 1910, 1910, 22, 7, false},
		{"west0479.rb", 479, 1910, 1910, 22, 7, false},
	} {
		s := load(t, filepath.Join(dir, c.file))
		a, src := s.Matrix(), s.Source
		checkCSR(t, a)
		if s.Name != c.file || s.N() != c.n || a.Entries() != c.entries || src.Stored != c.stored ||
			src.ExplicitZeros != c.zeros || s.Digits != c.digit || src.Symmetric != c.symmetric || src.Duplicates != 0 || len(src.Notes) != 0 {
			t.Errorf("%s: n %d, entries %d, stored %d, zeros %d, digits %d, %+v", s.Name, s.N(), a.Entries(), src.Stored, src.ExplicitZeros, s.Digits, src)
		}
	}
}

// TestOpenFormsAgree compares the forms in which one matrix is kept.
func TestOpenFormsAgree(t *testing.T) {
	dir := openData(t)
	for _, pair := range [][2]string{{"bcsstk01.rsa", "bcsstk01.rb"}, {"west0479.mtx", "west0479.rb"}} {
		sameMatrix(t, load(t, filepath.Join(dir, pair[0])).Matrix(), load(t, filepath.Join(dir, pair[1])).Matrix())
	}
	text, err := os.ReadFile(filepath.Join(dir, "494_bus.mtx"))
	if err != nil {
		t.Fatal(err)
	}
	packed := put(t, "494_bus.mtx", string(squeeze(t, string(text))))
	sameMatrix(t, load(t, packed).Matrix(), load(t, filepath.Join(dir, "494_bus.mtx")).Matrix())
}

func TestOpenBad(t *testing.T) {
	files, err := filepath.Glob(filepath.Join(openData(t), "bad", "*"))
	if err != nil || len(files) != 12 {
		t.Fatalf("%d bad files, %v; want 12", len(files), err)
	}
	for _, path := range files {
		_, err := File(context.Background(), path, nil)
		var e *Error
		if !errors.As(err, &e) || e.Line < 1 || e.File != path {
			t.Errorf("%s: %v", path, err)
		}
	}
}

func toDense(a *linear.CSR) *mat.Dense { return mat.NewDense(a.NRows, a.NCols, dense(a)) }

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Abs(want)) {
		t.Errorf("%s: %.12g; want %.12g", what, got, want)
	}
}

// TestOpenSpectra compares extreme eigenvalues with those that NumPy 1.24
// finds for the same files (read by SciPy 1.10), to the digits noted down.
func TestOpenSpectra(t *testing.T) {
	dir := openData(t)
	for _, c := range []struct {
		file   string
		lo, hi float64
		tol    float64
	}{
		{"bcsstk01.rsa", 3417.267563, 3.015179090e9, 1e-9},
		{"494_bus.mtx", .01242237513, 30005.14176, 1e-8},
		{"LFAT5.mtx", .149918935, 2.145218666e7, 1e-7},
		{"pts5ldd03.mtx", 9.693162214, 502.3068378, 1e-9},
		{"can_24.psa", -2.0995, 7.33557, 1e-4},
	} {
		a := toDense(load(t, filepath.Join(dir, c.file)).Matrix())
		n, _ := a.Dims()
		sym := mat.NewSymDense(n, a.RawMatrix().Data)
		if !mat.Equal(a, sym) {
			t.Errorf("%s is not symmetric", c.file)
		}
		var eig mat.EigenSym
		if !eig.Factorize(sym, false) {
			t.Fatalf("%s: no eigenvalues", c.file)
		}
		v := eig.Values(nil)
		near(t, c.file+" smallest", v[0], c.lo, c.tol)
		near(t, c.file+" largest", v[n-1], c.hi, c.tol)
	}
	for _, c := range []struct {
		file string
		cond float64
		tol  float64
	}{{"bfwa62.mtx", 553.0615, 1e-6}, {"west0067.rua", 130.217, 1e-5}, {"arc130.rua", 6.054211e10, 1e-5}, {"west0479.mtx", 3.2524e11, 1e-3}} {
		near(t, c.file+" condition", mat.Cond(toDense(load(t, filepath.Join(dir, c.file)).Matrix()), 2), c.cond, c.tol)
	}
}

// TestOpenValues looks at single values that are published or plain to see in
// the files.
func TestOpenValues(t *testing.T) {
	dir := openData(t)
	var sum float64
	for _, v := range load(t, filepath.Join(dir, "bcsstk01.rsa")).Matrix().Val {
		sum += v * v
	}
	near(t, "Frobenius norm of bcsstk01", math.Sqrt(sum), 7.521821564e9, 1e-9) // NumPy 1.24
	for file, want := range map[string]int{"west0479.mtx": 471, "west0067.rua": 65} {
		zeros := 0
		a := load(t, filepath.Join(dir, file)).Matrix()
		for i := range a.NRows {
			if a.At(i, i) == 0 {
				zeros++
			}
		}
		if zeros != want {
			t.Errorf("%s: %d zero diagonals; want %d", file, zeros, want)
		}
	}
	dam, alone := load(t, filepath.Join(dir, "bcsstk16.mtx.gz")).Matrix(), 0
	for i := range dam.NRows {
		if cols, vals := dam.Row(i); len(cols) == 1 && vals[0] == 1 {
			alone++
		}
	}
	if alone != 74 || dam.At(0, 0) != 285559874.91949999 {
		t.Errorf("bcsstk16: %d rows with only a diagonal 1, first entry %v", alone, dam.At(0, 0))
	}
	for i, d := range load(t, filepath.Join(dir, "pts5ldd03.mtx")).Matrix().Val {
		if d != 256 && d != -64 {
			t.Fatalf("pts5ldd03: value %d is %v", i, d)
		}
	}
}
