package report

import (
	"strings"
	"testing"

	"dwindle/engine/trace"
)

// A second form of A is told once; plain rows are not.
func TestSecondFormsAreTold(t *testing.T) {
	d := Document{Trials: []trace.History{{Storage: "rows"}, {Storage: "diagonals"}, {}, {Storage: "diagonals"}}}
	text := strings.Join(settingLines(d), "\n")
	if strings.Count(text, "diagonals") != 1 || strings.Contains(text, "rows") {
		t.Errorf("told as:\n%s", text)
	}
}
