package engine

import (
	"fmt"
	"path/filepath"
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/diagnose"
	"dwindle/samples"
)

// openSystems lists the open matrices with the rules that must speak when
// their line-up runs at default settings; no other may. What holds of them is
// in the tables of the collections they come from: LFAT5, arc130, cryg2500,
// ex14, fs_183_1, reorientation_1, watt_2 and west0479 in very different units;
// ex14, rajat19, hangGlider_2, reorientation_1, jgl009 and the west matrices with
// zeros on the diagonal; olm1000, arc130 and west0479 far from normal; can_24
// and jagmesh7 indefinite; cryg2500 and jgl009 singular to rounding; bcsstk16
// with 74 rows of the identity; 494_bus, watt_2 and west0479 printed with 6 or
// 7 digits.
var openSystems = map[string][]string{
	"494_bus.mtx":         {"not-your-rhs", "row-scaling", "residual-rises", "superlinear", "few-digits"},
	"LFAT5.mtx":           {"not-your-rhs", "pivot", "row-scaling", "residual-rises", "lost-orthogonality"},
	"arc130.rua":          {"not-your-rhs", "false-convergence", "row-scaling", "non-normal"},
	"bcsstk01.rsa":        {"not-your-rhs", "row-scaling", "plateau", "residual-rises", "superlinear", "lost-orthogonality"},
	"bcsstk13.mtx.gz":     {"not-your-rhs", "pivot", "row-scaling", "residual-rises", "superlinear"},
	"bcsstk16.mtx.gz":     {"not-your-rhs", "singleton-rows", "mesh-growth", "condition", "plateau", "residual-rises", "lost-orthogonality"},
	"bcsstk24.rsa":        {"not-your-rhs", "pivot", "accuracy-floor", "row-scaling", "residual-rises"},
	"bfwa62.mtx":          {"not-your-rhs"},
	"can_24.psa":          {"not-your-rhs", "not-definite", "pivot"},
	"cryg2500.mtx":        {"not-your-rhs", "double-precision", "near-null", "row-scaling"},
	"ex14.rua":            {"not-your-rhs", "double-precision", "zero-diagonal", "row-scaling"},
	"fs_183_1.mtx":        {"not-your-rhs", "false-convergence", "restart-stagnation", "row-scaling"},
	"g20.rua":             {"not-your-rhs", "preconditioner-changes-nothing"},
	"hangGlider_2.mtx":    {"not-your-rhs", "ill-conditioned", "restart-stagnation", "zero-diagonal"},
	"jagmesh7.mtx":        {"not-your-rhs", "not-definite", "pivot", "restart-length"},
	"jgl009.mtx":          {"not-your-rhs", "zero-diagonal", "near-null"},
	"lund_a.mtx":          {"not-your-rhs", "plateau", "residual-rises", "lost-orthogonality"},
	"olm1000.mtx":         {"not-your-rhs", "divergence", "restart-stagnation", "row-scaling", "non-normal"},
	"pores_1.mtx":         {"not-your-rhs", "false-convergence", "row-scaling"},
	"pts5ldd03.mtx":       {"not-your-rhs", "preconditioner-changes-nothing"},
	"rajat19.mtx":         {"not-your-rhs", "restart-stagnation", "zero-diagonal", "restart-length", "row-scaling"},
	"reorientation_1.mtx": {"not-your-rhs", "double-precision", "zero-diagonal", "row-scaling"},
	"utm300.rua":          {"restart-stagnation", "ill-conditioned"},
	"watt_2.mtx":          {"not-your-rhs", "false-convergence", "accuracy-floor", "restart-length", "row-scaling", "few-digits"},
	"west0067.rua":        {"not-your-rhs", "breakdown", "restart-stagnation", "zero-diagonal"},
	"west0479.mtx":        {"not-your-rhs", "false-convergence", "breakdown", "divergence", "restart-stagnation", "zero-diagonal", "row-scaling", "non-normal", "few-digits"},
}

// frozen is a clock that stands still: what rests on times is silent, and a
// trial runs to its end in one slice.
func frozen() time.Duration { return 0 }

// alarmOptions run a line-up so that it ends alike on every machine.
func alarmOptions(t *testing.T, source string) Options {
	return Options{Pairs: lineUp(t, source), Iterations: 2500, Clock: frozen}
}

// Every rule over all samples and open systems: the table of how often each
// has spoken and on what, and what of that nobody expects, which is nothing.
func TestNoRuleSpeaksUnexpectedly(t *testing.T) {
	folder := open(t)
	spoke := map[string][]string{}
	unexpected := 0
	look := func(name, source string, want []string) {
		v := ended(t, source, alarmOptions(t, source))
		got := map[string]bool{}
		for _, f := range v.Findings {
			got[f.Rule] = true
		}
		for _, r := range diagnose.Catalogue {
			switch {
			case got[r.Name]:
				spoke[r.Name] = append(spoke[r.Name], name)
				if !slices.Contains(want, r.Name) {
					unexpected++
					t.Errorf("%s: %s speaks unexpectedly:%s", name, r.Name, rules(v))
				}
			case slices.Contains(want, r.Name):
				t.Errorf("%s: %s is silent:%s", name, r.Name, rules(v))
			}
		}
	}
	for _, s := range samples.Catalogue {
		look(s.Name, samples.Prefix+s.Name, s.Expect)
	}
	names := make([]string, 0, len(openSystems))
	for name := range openSystems {
		names = append(names, name)
	}
	slices.Sort(names)
	for _, name := range names {
		look(name, filepath.Join(folder, name), openSystems[name])
	}
	t.Log(alarmTable(spoke, len(samples.Catalogue)+len(names), unexpected))
}

// alarmTable prints what each rule has spoken of.
func alarmTable(spoke map[string][]string, systems, unexpected int) string {
	var b strings.Builder
	fmt.Fprintf(&b, "rules over %d systems: %d unexpected\n", systems, unexpected)
	for _, r := range diagnose.Catalogue {
		fmt.Fprintf(&b, "  %-32s %2d  %s\n", r.Name, len(spoke[r.Name]), strings.Join(spoke[r.Name], " "))
	}
	return b.String()
}
