package tui

import (
	"errors"
	"slices"
	"strings"
	"testing"

	"dwindle/engine"
	"dwindle/engine/trace"
)

// recordedScreen shows a session that was read from a file.
func recordedScreen(readOnly string) (*model, *fake) {
	s := sessionOf(historyOf(trace.Converged, 1, 1e-9))
	s.snap.Phase, s.snap.Recorded, s.snap.ReadOnly = engine.Ended, true, readOnly
	return screenOf(s, 80, 24, "ascii"), s.session.(*fake)
}

// A reopened session says what it is, and whether it can go on.
func TestReopenedSessionSaysSo(t *testing.T) {
	m, f := recordedScreen("sluice4.mtx is neither here nor beside it")
	for _, want := range []string{"recorded 1 done", "a recorded session, read-only: sluice4.mtx is neither here nor beside it"} {
		if !strings.Contains(m.View(), want) {
			t.Errorf("%q is missing:\n%s", want, m.View())
		}
	}
	for _, key := range []string{"n", "p"} {
		if press(m, key); m.over != nil || !strings.Contains(m.View(), "read-only: sluice4.mtx") {
			t.Errorf("%s does not say that nothing can be added:\n%s", key, m.View())
		}
	}
	if len(f.calls) > 0 {
		t.Errorf("did %v", f.calls)
	}
	m, f = recordedScreen("")
	if !strings.Contains(m.View(), "its race is over; a new pairing (n) reads its system again") {
		t.Errorf("it does not say that it can go on:\n%s", m.View())
	}
	if press(m, "n", "enter", "enter"); !slices.Equal(f.calls, []string{"add cg+ic:0"}) {
		t.Errorf("did %v", f.calls)
	}
}

// Recording that fails is told once and hides nothing afterwards.
func TestFailedRecordingIsToldOnce(t *testing.T) {
	s := sessionOf(historyOf(trace.Running, 1, 0.1))
	s.snap.RecordErr = errors.New("x.dwindle: the session file: no space left on device")
	m := screenOf(s, 80, 24, "ascii")
	if !strings.Contains(m.View(), "no space left on device; the trials go on") {
		t.Errorf("it is not told:\n%s", m.View())
	}
	press(m, "j")
	m.looked = false // a new snapshot comes
	m.look()
	if strings.Contains(m.View(), "no space left") {
		t.Errorf("it is told again:\n%s", m.View())
	}
}

// W records once, and says where.
func TestRecordKey(t *testing.T) {
	s := sessionOf(historyOf(trace.Running, 1, 0.1))
	m := screenOf(s, 80, 24, "ascii")
	if press(m, "W"); !strings.Contains(m.View(), "no session is recorded here") {
		t.Errorf("%s", m.View())
	}
	m.cfg.keepNow = func(session) (string, error) { return "s.dwindle", nil }
	if press(m, "W"); !strings.Contains(m.View(), "recorded from now on to s.dwindle") {
		t.Errorf("%s", m.View())
	}
	m.snap.Recording = "s.dwindle"
	if press(m, "W"); !strings.Contains(m.View(), "already") {
		t.Errorf("%s", m.View())
	}
}
