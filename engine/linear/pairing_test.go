package linear

import (
	"slices"
	"strings"
	"testing"
)

// The printed form reads back, and the form of the trade is read too.
func TestParsePairing(t *testing.T) {
	for _, c := range []struct{ in, out string }{
		{"cg", "cg+none"},
		{"cg+ic:0", "cg+ic:0"},
		{"gmres(30)+ilu(0)", "gmres:30+ilu:0"},
		{"gmres:30+ilut:1e-3,10", "gmres:30+ilut:1e-3,10"},
		{"cg+ssor:omega=1.5", "cg+ssor:omega=1.5"},
		{"match,rcm/gmres:30+ilut:1e-3,10", "match,rcm/gmres:30+ilut:1e-3,10"},
		{"shift:2.5,rcm/cg+none", "shift:2.5,rcm/cg+none"},
		{"shift:a=1,b=2,rcm/cg+none", "shift:a=1,b=2,rcm/cg+none"},
		{"x:1e+3+y", "x:1e+3+y"},
		{"cg+ssor:1.0..1.9..0.1", "cg+ssor:1.0..1.9..0.1"},
	} {
		p, err := ParsePairing(c.in)
		if err != nil {
			t.Errorf("%s: %v", c.in, err)
		} else if p.String() != c.out {
			t.Errorf("%s is printed %s, want %s", c.in, p, c.out)
		}
	}
}

func TestParsePairingRefuses(t *testing.T) {
	for _, in := range []string{"", "+", "cg+", "+ic", "CG", "cg+ic:", "cg(30", "cg:1,,2", "/cg", "rcm/", "cg+ic:0+x y",
		"cg+ic:a=b=c", "cg +none", "cg+ic:0;rm", "cg+ssor:=1", "1cg", "cg/ic/x", "é"} {
		if p, err := ParsePairing(in); err == nil {
			t.Errorf("%q was read as %s", in, p)
		}
	}
}

func TestExpand(t *testing.T) {
	for _, c := range []struct {
		in   string
		want string
	}{
		{"cg+ic:0", "cg+ic:0"},
		{"cg+ssor:1.0..1.2..0.1", "cg+ssor:1 cg+ssor:1.1 cg+ssor:1.2"},
		{"cg+ssor:1.3..1..-0.1", "cg+ssor:1.3 cg+ssor:1.2 cg+ssor:1.1 cg+ssor:1"},
		{"cg+ssor:omega=-0.1..0.1..0.1", "cg+ssor:omega=-0.1 cg+ssor:omega=0 cg+ssor:omega=0.1"},
		{"gmres:10..30..10+ilu:0..1..1", "gmres:10+ilu:0 gmres:10+ilu:1 gmres:20+ilu:0 gmres:20+ilu:1 gmres:30+ilu:0 gmres:30+ilu:1"},
		{"cg+ic:1e-14..3e-14..1e-14", "cg+ic:1e-14 cg+ic:2e-14 cg+ic:3e-14"},
		{"cg+ic:1e300..3e300..1e300", "cg+ic:1e300 cg+ic:2e300 cg+ic:3e300"},
		{"cg+ic:5..5..1", "cg+ic:5"},
	} {
		got, err := Expand(c.in)
		if err != nil || !slices.Equal(got, strings.Fields(c.want)) {
			t.Errorf("%s: %q, %v; want %s", c.in, got, err, c.want)
		}
	}
	for _, in := range []string{"cg+ic:1..2", "cg+ic:1..2..0", "cg+ic:1..2..-1", "cg+ic:0..1..1e-9", "cg+ic:a..b..c",
		"cg+ic:1..2..3..4", "cg+ic:0..1e308..1e-308", "cg+ic:1..100..1,1..100..1", "cg+ic:Inf..1..1", "cg+ic:NaN..NaN..NaN"} {
		if got, err := Expand(in); err == nil {
			t.Errorf("%s: %d pairings, want an error", in, len(got))
		}
	}
}

var someParams = []Param{
	{Name: "m", Kind: Int, Default: 30, Min: 1, Max: 1000},
	{Name: "tau", Kind: Real, Default: 1e-3, Min: 0, Max: 1},
	{Name: "side", Kind: Choice, Default: 1, Choices: []string{"left", "right"}},
	{Name: "form", Kind: Choice, Choices: []string{"plain", "fast"}, Quiet: true},
	{Name: "age", Kind: Int, Default: 2, Min: 0, Max: 9, Quiet: true},
}

func TestResolve(t *testing.T) {
	p, err := ParsePairing("s:side=left,m=7+none")
	if err != nil {
		t.Fatal(err)
	}
	v, err := Resolve("s", someParams, p.Solver.Args)
	if err != nil || v.Int("m") != 7 || v.Real("tau") != 1e-3 || v.Choice("side") != "left" {
		t.Errorf("%+v, %v", v, err)
	}
	if s := (Part{Name: "s", Args: v.Args()}).String(); s != "s:7,1e-3,left" {
		t.Errorf("printed %s", s)
	}
	for in, part := range map[string]string{
		"s:0": "1 to 1000", "s:1.5": "whole", "s:x=1": "no parameter", "s:m=1,m=2": "twice", "s:1,m=2": "twice",
		"s:1,2": "0 to 1", "s:1,.1,up": "one of", "s:1,.1,left,4": "one of", "s:1,.1,left,fast,1,1": "takes 5", "s:NaN": "number", "s:1e999": "number",
	} {
		p, err := ParsePairing(in)
		if err != nil {
			t.Fatal(err)
		}
		if _, err = Resolve("s", someParams, p.Solver.Args); err == nil || !strings.Contains(err.Error(), part) {
			t.Errorf("%s: %v, want a word about %q", in, err, part)
		}
	}
}

// A quiet parameter is printed only where it, or one after it, is not at its
// default.
func TestQuietParameters(t *testing.T) {
	for in, want := range map[string]string{"s": "s:30,1e-3,right", "s:form=plain,age=2": "s:30,1e-3,right",
		"s:form=fast": "s:30,1e-3,right,fast", "s:age=3": "s:30,1e-3,right,plain,3", "s:age=0": "s:30,1e-3,right,plain,0"} {
		p, err := ParsePairing(in)
		if err != nil {
			t.Fatal(err)
		}
		v, err := Resolve("s", someParams, p.Solver.Args)
		if s := (Part{Name: "s", Args: v.Args()}).String(); err != nil || s != want {
			t.Errorf("%s is printed %s, want %s (%v)", in, s, want, err)
		}
	}
}

func TestShortNumbers(t *testing.T) {
	for x, want := range map[float64]string{0: "0", 1: "1", 30: "30", 1.5: "1.5", 1e-2: "0.01", 1e-3: "1e-3", 1e-4: "1e-4", 2.5e-7: "2.5e-7",
		1e6: "1000000", 1e7: "1e7", 1e300: "1e300", -0.25: "-0.25", 0.1: "0.1", 123456.5: "123456.5"} {
		if got := short(x); got != want {
			t.Errorf("%v is printed %s, want %s", x, got, want)
		}
	}
}

var pairingSeeds = []string{"cg", "cg+ic:0", "gmres(30)+ilu(0)", "match,rcm/gmres:30+ilut:1e-3,10", "cg+ssor:omega=1.5",
	"cg+ssor:1.0..1.9..0.1", "a:1,b=2,c/d:+1+e:.5", "x:1e+3+y", "s:7,0.5,left+none", "s:age=3,form=fast", "s:form=fast+none", "cg+ic:1e-14..3e-14..1e-14"}

// What is read prints to something that reads to the same; what resolves is
// printed in one canonical form that resolves to itself.
func FuzzPairing(f *testing.F) {
	for _, s := range pairingSeeds {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		p, err := ParsePairing(s)
		if err != nil {
			return
		}
		printed := p.String()
		q, err := ParsePairing(printed)
		if err != nil || q.String() != printed || !samePairing(p, q) {
			t.Fatalf("%q is printed %q, which reads as %q (%v)", s, printed, q, err)
		}
		v, err := Resolve("s", someParams, p.Solver.Args)
		if err != nil {
			return
		}
		canonical := Part{Name: "s", Args: v.Args()}.String()
		again, err := ParsePairing(canonical)
		if err != nil {
			t.Fatalf("canonical %q: %v", canonical, err)
		}
		w, err := Resolve("s", someParams, again.Solver.Args)
		if err != nil || !slices.Equal(v.vals, w.vals) || (Part{Name: "s", Args: w.Args()}).String() != canonical {
			t.Fatalf("canonical %q resolves to %v, not %v (%v)", canonical, w.vals, v.vals, err)
		}
	})
}

func samePairing(p, q Pairing) bool {
	same := func(a, b Part) bool { return a.Name == b.Name && slices.Equal(a.Args, b.Args) }
	return slices.EqualFunc(p.Preps, q.Preps, same) && same(p.Solver, q.Solver) && same(p.Precond, q.Precond)
}

// A family is never larger than allowed, and each of its pairings reads, has
// no range left and expands to itself.
func FuzzExpand(f *testing.F) {
	for _, s := range pairingSeeds {
		f.Add(s)
	}
	f.Fuzz(func(t *testing.T, s string) {
		family, err := Expand(s)
		if err != nil {
			return
		}
		if len(family) == 0 || len(family) > maxFamily {
			t.Fatalf("%q expands to %d", s, len(family))
		}
		for _, one := range family {
			again, err := Expand(one)
			if err != nil || len(again) != 1 || again[0] != one {
				t.Fatalf("%q holds %q, which expands to %q (%v)", s, one, again, err)
			}
		}
	})
}
