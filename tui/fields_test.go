package tui

import (
	"strings"
	"testing"

	"dwindle/engine/inspect"
)

// Facts by field, and rows with their labels; nothing raw comes through.
func TestFactsByFieldAndLabel(t *testing.T) {
	f := &inspect.Facts{N: 3, DiagNegative: 1, DiagPositive: 2, DiagRows: []int{2}}
	f.Names.Labels = []string{"1:ux", "1:uy", "1:\x1b[31mrz"}
	f.Fields = []inspect.FieldFacts{{Name: "rz\a", Rows: 1, DiagNegative: 1,
		Block: inspect.Fact{Answer: inspect.No, Certainty: inspect.Proved, Why: "no diagonal entry is nonzero"}}}
	var all []string
	for _, r := range factRows(f, asciiGlyphs) {
		all = append(all, r.line(false, 200))
	}
	text := strings.Join(all, "\n")
	for _, want := range []string{"rows 3 = 1:", "field rz", "block definite: no (proved), no diagonal entry is nonzero"} {
		if !strings.Contains(text, want) {
			t.Errorf("%q is missing in\n%s", want, text)
		}
	}
	if strings.ContainsAny(text, "\x1b\a") {
		t.Errorf("raw characters come through: %q", text)
	}
}
