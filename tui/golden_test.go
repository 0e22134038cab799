package tui

import (
	"flag"
	"fmt"
	"os"
	"path/filepath"
	"testing"

	"github.com/charmbracelet/lipgloss"
)

var update = flag.Bool("update", false, "write the golden screens anew")

// golden compares the frame with testdata/name.
func golden(t *testing.T, m *model, name string) {
	t.Helper()
	sound(t, m, name)
	got := m.View() + "\n"
	path := filepath.Join("testdata", name)
	if *update {
		if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	if got != string(want) {
		t.Errorf("%s differs; go test ./tui -update writes it anew. Got:\n%s", path, got)
	}
}

func TestGoldenTrials(t *testing.T) {
	for _, size := range [][2]int{{40, 12}, {80, 24}, {120, 40}, {200, 60}} {
		for _, g := range glyphNames {
			m := screenOf(newFake(8, still(12.3)), size[0], size[1], g)
			press(m, "3")
			golden(t, m, fmt.Sprintf("trials-%dx%d-%s.txt", size[0], size[1], g))
		}
	}
}

func TestGoldenColour(t *testing.T) {
	m := screenOf(newFake(8, still(12.3)), 80, 24, "dot")
	m.on = true
	press(m, "3")
	golden(t, m, "trials-80x24-dot-ansi.txt")
}

func TestGoldenOthers(t *testing.T) {
	views := []struct {
		name string
		keys []string
	}{
		{"system", []string{"tab"}},
		{"spectrum", []string{"3", "tab", "tab"}},
		{"ofa", []string{"tab", "tab", "o"}},
		{"findings", []string{"tab", "tab", "tab"}},
		{"choice", []string{"tab", "tab", "tab", "G"}},
		{"info", []string{"3", "i"}},
		{"energy", []string{"3", "e"}},
		{"solvers", []string{"n"}},
		{"form", []string{"3", "p"}},
		{"help", []string{"?"}},
		{"add", []string{"n", "enter"}},
		{"tries", []string{"a"}},
		{"ask", []string{"s"}},
		{"true", []string{"r", "x", "X"}},
	}
	for _, v := range views {
		for _, size := range [][2]int{{40, 12}, {80, 24}} {
			m := screenOf(newFake(8, still(12.3)), size[0], size[1], "dot")
			press(m, append([]string{"7"}, v.keys...)...)
			golden(t, m, fmt.Sprintf("%s-%dx%d-dot.txt", v.name, size[0], size[1]))
		}
	}
}

func TestGoldenChooser(t *testing.T) {
	m := newModel(Config{Glyphs: "dot", Samples: []SampleInfo{
		{"plate", "a clamped plate", "Symmetric positive definite; every method converges, the better preconditioner sooner."},
		{"seepage", "seepage with no fixed head", "Singular: constants are a null vector."},
	}}, nil)
	m.w, m.h = 80, 24
	press(m, "j")
	golden(t, m, "chooser-80x24-dot.txt")
}

// The colours of the environment decide, and the terminal is never asked.
func TestColoursByEnvironment(t *testing.T) {
	t.Setenv("NO_COLOR", "1")
	if coloured(os.Stdout) {
		t.Error("colours although NO_COLOR is set")
	}
	t.Setenv("NO_COLOR", "")
	t.Setenv("TERM", "dumb")
	if coloured(os.Stdout) {
		t.Error("colours on a dumb terminal")
	}
	if !lipgloss.HasDarkBackground() {
		t.Error("the question of the background was not settled beforehand")
	}
}
