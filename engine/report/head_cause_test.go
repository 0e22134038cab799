package report

import (
	"testing"

	"dwindle/engine/diagnose"
)

// Where there is a cause to tell, the head does not use its lines for how much
// today's pairing is beaten: TODAY and USE say it. Where there is none, it does.
func TestHeadTellsTheCauseFirst(t *testing.T) {
	beaten := diagnose.Finding{Rule: "today-beaten", Weight: diagnose.Drag}
	cause := diagnose.Finding{Rule: "singleton-rows", Weight: diagnose.Drag}
	note := diagnose.Finding{Rule: "plateau", Weight: diagnose.Note}
	for _, c := range []struct {
		in   []diagnose.Finding
		want string
	}{
		{[]diagnose.Finding{beaten, cause, note}, "singleton-rows"},
		{[]diagnose.Finding{beaten, note}, "today-beaten"},
	} {
		if got := leading(c.in); got[0].Rule != c.want {
			t.Errorf("first is %s, want %s", got[0].Rule, c.want)
		}
	}
}
