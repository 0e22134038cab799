package tui

import (
	"strings"

	tea "github.com/charmbracelet/bubbletea"
)

// chooser is the screen of the built-in samples, when no system was given.
type chooser struct {
	all       []SampleInfo
	at, first int
	line      *prompt // a file or sample being typed
}

// newChooser returns the screen for these samples.
func newChooser(all []SampleInfo) *chooser { return &chooser{all: all} }

func (v *chooser) name() string   { return "samples" }
func (v *chooser) entry() *prompt { return v.line }

// keys are the bindings of the screen, or of the line being typed.
func (v *chooser) keys(m *model) []action {
	if v.line != nil {
		return []action{
			bind("open", v.openTyped, "enter"),
			bind("take back", func(m *model) tea.Cmd { v.line = nil; return nil }, "esc"),
		}
	}
	list := []action{
		bind("open", v.enter, "enter"),
		bind("type a file or a sample", v.write, "/"),
		bind("glyphs", (*model).nextGlyphs, "u"),
		bind("help", (*model).openHelp, "?"),
		bind("quit", (*model).quit, "q"),
		bindKey("pick", v.pickDigit, "1", "2", "3", "4", "5", "6", "7", "8", "9").named("1-9"),
	}
	return append(list, moves(v.move)...)
}

func (v *chooser) write(m *model) tea.Cmd {
	v.line = &prompt{label: "open", text: ""}
	return nil
}

func (v *chooser) move(m *model, step int) {
	v.at = max(min(v.at+step, len(v.all)-1), 0)
}

func (v *chooser) pickDigit(m *model, pressed string) tea.Cmd {
	if k := int(pressed[0] - '1'); k < len(v.all) {
		v.at = k
	}
	return nil
}

// enter opens the picked sample.
func (v *chooser) enter(m *model) tea.Cmd {
	if v.at >= len(v.all) {
		return nil
	}
	return v.open(m, "sample:"+v.all[v.at].Name)
}

// openTyped opens what was typed.
func (v *chooser) openTyped(m *model) tea.Cmd {
	source := strings.TrimSpace(v.line.text)
	v.line = nil
	if source == "" {
		return nil
	}
	return v.open(m, source)
}

// open opens a source. The session works in the background from the start.
func (v *chooser) open(m *model, source string) tea.Cmd {
	if m.cfg.openNow == nil {
		m.say("nothing can be opened here")
		return nil
	}
	m.attach(m.cfg.openNow(source))
	return nil
}

// draw draws the samples, with what the picked one shows below.
func (v *chooser) draw(m *model, w, h int) []string {
	title := m.on.paint(faint, clip("built-in systems with known answers; / opens a file", w))
	if v.line != nil {
		title = v.line.line(m.signs, w)
	}
	lines := []string{title, ""}
	if len(v.all) == 0 {
		return append(lines, "  there are none")
	}
	room := max(h-5, 1)
	v.first = scroll(v.first, v.at, len(v.all), room)
	for i := v.first; i < min(v.first+room, len(v.all)); i++ {
		lines = append(lines, v.row(m, i, w))
	}
	lines = append(lines, "")
	return append(lines, paragraph(m.signs.clean(v.all[v.at].Shows), 2, w)...)
}

// row is one sample.
func (v *chooser) row(m *model, i, w int) string {
	mark, on := "  ", plain
	if i == v.at {
		mark, on = "> ", strong
	}
	s := v.all[i]
	return m.on.paint(on, clip(mark+left(m.signs.clean(s.Name), 14)+" "+m.signs.clean(s.Title), w))
}
