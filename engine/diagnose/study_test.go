package diagnose_test

import (
	"context"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/samples"
)

// studyRules are the rules that rest on the second look at a system.
var studyRules = []string{"mechanism", "near-null", "singleton-rows", "row-replaced", "row-scaling", "penalty-rows",
	"mesh-growth", "anisotropy", "coefficient-jump", "non-normal", "restoring-shift",
	"ill-conditioned", "convection", "diagonal", "up-to-a-constant"}

// told returns what these rules say of a system, with b = 1 where it has none.
func told(t *testing.T, s linear.System) map[string]diagnose.Finding {
	t.Helper()
	out := map[string]diagnose.Finding{}
	for _, g := range judged(t, s) {
		if slices.Contains(studyRules, g.Rule) {
			out[g.Rule] = g
		}
	}
	return out
}

// judged returns what all rules say of it after the second look.
func judged(t *testing.T, s linear.System) []diagnose.Finding {
	t.Helper()
	f := first(t, s)
	if s.B == nil {
		s.B = unit(s.N())
	}
	f, err := inspect.Examine(context.Background(), s, f, inspect.Quick, nil)
	if err != nil {
		t.Fatal(err)
	}
	return diagnose.Judge(diagnose.Case{Facts: f, Tol: 1e-8})
}

// first returns the facts of the first look.
func first(t *testing.T, s linear.System) *inspect.Facts {
	t.Helper()
	if s.B == nil {
		s.B = unit(s.N())
	}
	f, err := inspect.Inspect(context.Background(), s, nil)
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// unit is b = 1.
func unit(n int) []float64 {
	b := make([]float64, n)
	for i := range b {
		b[i] = 1
	}
	return b
}

// only fails unless exactly the rules listed have spoken.
func only(t *testing.T, what string, got map[string]diagnose.Finding, want ...string) {
	t.Helper()
	var rules []string
	for r := range got {
		rules = append(rules, r)
	}
	slices.Sort(rules)
	slices.Sort(want)
	if !slices.Equal(rules, want) {
		t.Errorf("%s: %v spoke, expected %v", what, rules, want)
		for _, r := range rules {
			t.Logf("    %s: %s", r, got[r].Claim)
		}
	}
}

func sample(t *testing.T, spec string) linear.System {
	t.Helper()
	s, err := samples.Build(spec)
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// says fails unless the claim holds the words.
func says(t *testing.T, g diagnose.Finding, words ...string) {
	t.Helper()
	for _, w := range words {
		if !strings.Contains(g.Claim, w) {
			t.Errorf("%s does not say %q: %s", g.Rule, w, g.Claim)
		}
	}
}

// Each rule speaks on the open matrices where it holds, and on no other. The
// numbers are computed densely (NumPy) from the same files.
func TestStudyRulesOnOpenMatrices(t *testing.T) {
	dir := os.Getenv("DWINDLE_OPEN")
	if dir == "" {
		t.Skip("DWINDLE_OPEN does not name the folder of open matrices")
	}
	want := map[string][]string{
		"494_bus.mtx": {"row-scaling"}, "bcsstk01.rsa": {"row-scaling"}, "bcsstk01.rb": {"row-scaling"}, "LFAT5.mtx": {"row-scaling"}, "arc130.rua": {"row-scaling", "non-normal"},
		"bcsstk13.mtx.gz": {"row-scaling"}, "bcsstk24.rsa": {"row-scaling"}, "ex14.rua": {"row-scaling"}, "bcsstk16.mtx.gz": {"singleton-rows", "mesh-growth"},
		"cryg2500.mtx": {"row-scaling", "near-null"}, "fs_183_1.mtx": {"row-scaling"}, "jgl009.mtx": {"near-null"}, "olm1000.mtx": {"row-scaling", "non-normal"}, "utm300.rua": {"ill-conditioned"}, "hangGlider_2.mtx": {"ill-conditioned"},
		"pores_1.mtx": {"row-scaling"}, "rajat19.mtx": {"row-scaling"}, "reorientation_1.mtx": {"row-scaling"},
		"watt_2.mtx": {"row-scaling"}, "west0479.mtx": {"row-scaling", "non-normal"}, "west0479.rb": {"row-scaling", "non-normal"},
	}
	phrases := map[string][]string{ // file, rule, words of its claim
		"arc130.rua":          {"row-scaling", "condition 6.05e+10 of A is almost all scaling: 23"},
		"bcsstk01.rsa":        {"row-scaling", "condition 8.82e+05 of A is mostly scaling: 1.36e+03", "foreseen to take about 49 its"},
		"reorientation_1.mtx": {"row-scaling", "almost all scaling"},
		"bcsstk24.rsa":        {"row-scaling", "the condition of A is 1.95e+11, and 1.34e+07 once rows and columns"},
		"ex14.rua":            {"row-scaling", "of A is almost all scaling: 1.56e+05"},
		"bcsstk16.mtx.gz":     {"singleton-rows", "74 decoupled rows (diagonal 1) are the cause of the condition 4.94e+09", "without them it is 3.11e+03"},
		"cryg2500.mtx":        {"near-null", "one direction is nearly free", "about 4 correct digits"},
		"jgl009.mtx":          {"near-null", "A is singular to rounding: 4 directions"},
		"utm300.rua":          {"ill-conditioned", "7.66e+05 in the 2-norm"},
		"olm1000.mtx":         {"non-normal", "at least 0.994"},
	}
	files, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range files {
		if f.IsDir() || strings.HasSuffix(f.Name(), ".md") {
			continue
		}
		s, err := load.File(context.Background(), filepath.Join(dir, f.Name()), nil)
		if err != nil {
			t.Fatal(err)
		}
		got := told(t, s)
		only(t, f.Name(), got, want[f.Name()]...)
		if p, ok := phrases[f.Name()]; ok {
			says(t, got[p[0]], p[1:]...)
		}
	}
}

// The frame: its mechanisms by number and place; clamped, its springs and its
// rows of the identity.
func TestMechanismsOfTheFrame(t *testing.T) {
	got := told(t, sample(t, "frame:unsupported"))
	only(t, "unsupported", got, "mechanism")
	says(t, got["mechanism"], "3 zero-energy motions of the whole", "b pushes along them")
	if g := got["mechanism"]; g.Weight != diagnose.Blocker || g.Certainty != inspect.Measured {
		t.Errorf("%s, %s", g.Weight, g.Certainty)
	}
	got = told(t, sample(t, "frame:pin"))
	only(t, "pin", got, "mechanism", "row-scaling", "penalty-rows")
	says(t, got["mechanism"], "one zero-energy motion", "by 17 rows", "a part free to move")
	got = told(t, sample(t, "frame"))
	only(t, "clamped", got, "singleton-rows", "row-scaling", "penalty-rows")
	says(t, got["singleton-rows"], "3 decoupled rows (diagonal 1) raise the condition")
	says(t, got["penalty-rows"], "3 rows hold a penalty", "1e+10")
}

// A point that can spin: one rotation without stiffness among others that
// have it, told by its rows.
func TestAPointFreeToSpin(t *testing.T) {
	var out []linear.Entry
	for i := range 30 {
		out = append(out, linear.Entry{I: i, J: i, V: 4})
		if i > 0 {
			out = append(out, linear.Entry{I: i, J: i - 1, V: -1}, linear.Entry{I: i - 1, J: i, V: -1})
		}
	}
	out = append(out, linear.Entry{I: 30, J: 30, V: 1}, linear.Entry{I: 31, J: 31, V: 4},
		linear.Entry{I: 30, J: 31, V: -2}, linear.Entry{I: 31, J: 30, V: -2})
	got := told(t, linear.System{A: linear.FromEntries(32, 32, out), Digits: 17})
	only(t, "spin", got, "mechanism")
	says(t, got["mechanism"], "one zero-energy motion, carried 100 % by rows 31, 32: a point free to spin")
}

// Values fixed by replacing rows are told, with the rows.
func TestReplacedRowsAreTold(t *testing.T) {
	a := sample(t, "plate:12").Matrix()
	var out []linear.Entry
	for i := range a.NRows {
		cols, vals := a.Row(i)
		for k, j := range cols {
			if i >= 3 || int(j) == i {
				out = append(out, linear.Entry{I: i, J: int(j), V: vals[k]})
			}
		}
	}
	got := told(t, linear.System{A: linear.FromEntries(144, 144, out), Digits: 17})
	only(t, "replaced", got, "row-replaced")
	says(t, got["row-replaced"], "3 rows of the identity form", "rows 1, 2, 3")
}

// Meshes: growth, anisotropy and jumps are each told where they are.
func TestMeshRules(t *testing.T) {
	got := told(t, sample(t, "plate"))
	only(t, "plate", got, "mesh-growth")
	says(t, got["mesh-growth"], "n^0.5", "by that law")
	got = told(t, sample(t, "plate:60,aniso=1e3"))
	only(t, "aniso", got, "mesh-growth", "anisotropy")
	says(t, got["anisotropy"], "100 % of rows", "1e+03")
	if claim := got["mesh-growth"].Claim; strings.Contains(claim, "law") { // 67, 207, 245 its: the slopes are 0.9 and 0.12
		t.Errorf("a law is told of counts that follow none: %s", claim)
	}
	got = told(t, sample(t, "plate:60,jump=1e4"))
	only(t, "jump", got, "mesh-growth", "coefficient-jump", "ill-conditioned")
	if rows := got["coefficient-jump"].Evidence[0].Rows; len(rows) != 2 {
		t.Errorf("rows of the jump: %v", rows)
	}
	got = told(t, sample(t, "duct:60,peclet=1000"))
	only(t, "duct", got, "convection")
	says(t, got["convection"], "98 % of rows", "17.4")
	only(t, "slow duct", told(t, sample(t, "duct:60,peclet=10")))
}

// What a system is, told in one word: a diagonal, or singular with an answer
// all the same.
func TestWhatTheSystemIs(t *testing.T) {
	only(t, "strakos", told(t, sample(t, "strakos")), "diagonal")
	got := told(t, sample(t, "seepage"))
	only(t, "seepage", got, "up-to-a-constant")
	says(t, got["up-to-a-constant"], "rows sum to zero", "b is consistent")
	if _, ok := told(t, sample(t, "seepage:b=leaky"))["up-to-a-constant"]; ok {
		t.Error("b=leaky is called consistent")
	}
}

// Nearly definite: the shift is told with the rows, and offered as a
// preconditioner; samples that are definite, singular or far from it are left
// alone.
func TestRestoringShiftIsTold(t *testing.T) {
	got := told(t, sample(t, "acoustics"))
	only(t, "acoustics", got, "restoring-shift")
	says(t, got["restoring-shift"], "from s = 0.029 on")
	if try := got["restoring-shift"].Try; len(try) != 1 || !strings.HasPrefix(try[0], "shift:0.035/minres") {
		t.Errorf("offers %v", try)
	}
	only(t, "strut", told(t, sample(t, "strut")), "restoring-shift", "ill-conditioned")
	for _, spec := range []string{"line", "kershaw", "shift", "seepage:b=leaky", "duct", "drains"} {
		only(t, spec, told(t, sample(t, spec)))
	}
	only(t, "feeder", told(t, sample(t, "feeder")), "row-scaling")
}

// What the digits of a file leave open is said so.
func TestFewDigitsAreSaidOfFreeDirections(t *testing.T) {
	s := sample(t, "frame:pin")
	s.Digits = 6
	if g := told(t, s)["mechanism"]; !strings.Contains(g.Advice, "the file has 6 digits") {
		t.Errorf("advice: %s", g.Advice)
	}
	s.Digits = 17
	if g := told(t, s)["mechanism"]; strings.Contains(g.Advice, "digits") {
		t.Errorf("advice: %s", g.Advice)
	}
}
