package samples

import (
	"math"
	"slices"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

func build(t *testing.T, spec string) (linear.System, *linear.CSR) {
	t.Helper()
	s, err := Build(spec)
	if err != nil {
		t.Fatal(err)
	}
	return s, s.Matrix()
}

// TestCatalogue holds what every sample promises, at its defaults.
func TestCatalogue(t *testing.T) {
	nonsymmetric := []string{"duct", "shift"}
	for _, s := range Catalogue {
		t.Run(s.Name, func(t *testing.T) {
			for what, text := range map[string]string{"title": s.Title, "shows": s.Shows, "source": s.Source, "spectrum": s.Spectrum} {
				if text == "" {
					t.Errorf("no %s", what)
				}
			}
			sys, a := build(t, s.Name)
			checkForm(t, sys, a)
			_, v, err := Parse(s.Name)
			if err != nil {
				t.Fatal(err)
			}
			if n, most := s.Size(v); n != a.NRows || most < a.Entries() || most > 3*a.Entries() {
				t.Errorf("Size says %d, at most %d entries; made %d, %d", n, most, a.NRows, a.Entries())
			}
			_, again := build(t, s.Name)
			if !slices.Equal(a.Ptr, again.Ptr) || !slices.Equal(a.Col, again.Col) || !slices.Equal(a.Val, again.Val) {
				t.Error("two builds differ")
			}
			if got, want := symmetric(a), !slices.Contains(nonsymmetric, s.Name); got != want {
				t.Errorf("exactly symmetric: %v, want %v", got, want)
			}
		})
	}
}

func checkForm(t *testing.T, sys linear.System, a *linear.CSR) {
	t.Helper()
	n := a.NRows
	if a.NCols != n || len(a.Ptr) != n+1 || len(a.Col) != a.Ptr[n] || len(a.Val) != a.Ptr[n] {
		t.Fatal("the compressed rows do not fit together")
	}
	for i := 0; i < n; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			if c < 0 || int(c) >= n || k > 0 && cols[k-1] >= c || math.IsNaN(vals[k]) || math.IsInf(vals[k], 0) {
				t.Fatalf("row %d: bad entry %d", i, k)
			}
		}
	}
	if sys.B != nil && (len(sys.B) != n || sys.RHS != linear.Embedded) || sys.B == nil && sys.RHS != "" {
		t.Errorf("right-hand side: length %d, source %q", len(sys.B), sys.RHS)
	}
	if sys.Digits != 17 {
		t.Errorf("digits %d", sys.Digits)
	}
}

func symmetric(a *linear.CSR) bool {
	b := a.Transpose()
	return slices.Equal(a.Ptr, b.Ptr) && slices.Equal(a.Col, b.Col) && slices.Equal(a.Val, b.Val)
}

// TestNames checks that the canonical name reads back to itself.
func TestNames(t *testing.T) {
	for spec, want := range map[string]string{
		"plate":                     "sample:plate",
		"plate:60":                  "sample:plate",
		"plate:n=8":                 "sample:plate:8",
		"sample:plate:8,jump=1e4":   "sample:plate:8,jump=10000",
		"plate:aniso=1e-3":          "sample:plate:aniso=1e-3",
		"plate(8,100,0.5)":          "sample:plate:8,jump=100,aniso=0.5",
		"seepage:b=leaky":           "sample:seepage:b=leaky",
		"seepage:8,leaky":           "sample:seepage:8,b=leaky",
		"strakos:24,0.6":            "sample:strakos:24,rho=0.6",
		"frame:pin":                 "sample:frame:pin",
		"frame:clamped,4":           "sample:frame:n=4",
		"strut:load=0.99":           "sample:strut:load=0.99",
		"kershaw":                   "sample:kershaw",
		"strakos:48,rho=1,high=1e3": "sample:strakos:rho=1,high=1000",
	} {
		sys, _ := build(t, spec)
		if sys.Name != want {
			t.Errorf("%s: name %s, want %s", spec, sys.Name, want)
		}
		again, _ := build(t, sys.Name)
		if again.Name != want {
			t.Errorf("%s reads back as %s", want, again.Name)
		}
	}
}

func TestBadSpecs(t *testing.T) {
	for spec, want := range map[string]string{
		"":               "not a method name",
		"weir":           "there is no sample \"weir\"; there are plate, frame,",
		"plate:0":        "n must lie in 1 to",
		"plate:x":        "n must be a number",
		"plate:2.5":      "whole number",
		"plate:8,9,1,2":  "takes 3 parameter(s)",
		"plate:size=8":   "no parameter \"size\"",
		"seepage:8,dry":  "one of consistent, leaky",
		"plate:8,n=9":    "given twice",
		"plate:8+jacobi": "n must be a number",
	} {
		_, err := Build(spec)
		if err == nil || !strings.Contains(err.Error(), want) {
			t.Errorf("%q: %v, want %q", spec, err, want)
		}
	}
}

// TestPlateRefined checks that the materials enter as they should: row sums
// vanish inside, and aniso is the ratio of the two directions.
func TestPlateRefined(t *testing.T) {
	_, a := build(t, "plate:9,jump=1e4,aniso=8")
	if !symmetric(a) {
		t.Error("not symmetric")
	}
	k := 4*9 + 4 // the middle, inside the patch
	for off, want := range map[int]float64{0: 1.8e5, 1: -8e4, -1: -8e4, 9: -1e4, -9: -1e4} {
		if got := a.At(k, k+off); got != want {
			t.Errorf("a[%d,%d] = %g, want %g", k, k+off, got, want)
		}
	}
	if got, want := a.At(2*9+4, 3*9+4), -2*1e4/(1e4+1); got != want {
		t.Errorf("face between materials: %g, want %g", got, want)
	}
	if got := a.At(0, 0); got != 18 {
		t.Errorf("corner %g, want 18", got)
	}
}

// TestSeepageSums: row sums vanish exactly in any order, as all entries are
// integers; the wells balance, or leave 0.75.
func TestSeepageSums(t *testing.T) {
	for spec, left := range map[string]float64{"seepage:21": 0, "seepage:21,b=leaky": 0.75} {
		sys, a := build(t, spec)
		for i := 0; i < a.NRows; i++ {
			cols, vals := a.Row(i)
			s := 0.0
			for k, v := range vals {
				s += v
				if v != math.Trunc(v) || int(cols[k]) != i && v >= 0 {
					t.Fatalf("%s: entry (%d,%d) = %g", spec, i, cols[k], v)
				}
			}
			if s != 0 {
				t.Fatalf("%s: row %d sums to %g", spec, i, s)
			}
		}
		total := 0.0
		for _, v := range sys.B {
			total += v
		}
		if total != left {
			t.Errorf("%s: b sums to %g, want %g", spec, total, left)
		}
	}
}

// TestFeederSpread: a network, every row weakly dominant with a positive
// excess, values over at least four decades.
func TestFeederSpread(t *testing.T) {
	_, a := build(t, "feeder")
	low, high := math.Inf(1), 0.0
	for i := 0; i < a.NRows; i++ {
		cols, vals := a.Row(i)
		d, off := 0.0, 0.0
		for k, v := range vals {
			if int(cols[k]) == i {
				d = v
			} else {
				off -= v
			}
		}
		if i > 0 && len(vals) < 2 || d <= off {
			t.Fatalf("row %d: diagonal %g, rest %g, %d entries", i, d, off, len(vals))
		}
		low, high = min(low, d), max(high, d)
	}
	if high/low < 1e4 {
		t.Errorf("diagonal from %g to %g", low, high)
	}
}
