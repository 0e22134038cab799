package tui

import (
	"slices"
	"time"

	"github.com/charmbracelet/bubbles/key"
	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine"
)

// action is a binding with what it does. Bindings are data: the key line and
// the help screen are derived from them. "[" and "O" stay unbound, since torn
// escape sequences hold them.
type action struct {
	key.Binding
	do func(m *model, pressed string) tea.Cmd
}

// bind makes an action whose help text is says.
func bind(says string, do func(*model) tea.Cmd, keys ...string) action {
	return bindKey(says, func(m *model, _ string) tea.Cmd { return do(m) }, keys...)
}

// bindKey makes an action that is told which of its keys was pressed.
func bindKey(says string, do func(*model, string) tea.Cmd, keys ...string) action {
	return action{key.NewBinding(key.WithKeys(keys...), key.WithHelp(keyName(keys), says)), do}
}

// named gives an action another name for its keys in help texts.
func (a action) named(keys string) action {
	a.SetHelp(keys, a.Help().Desc)
	return a
}

// keyName is how help names the first of keys.
func keyName(keys []string) string {
	switch keys[0] {
	case " ":
		return "space"
	}
	return keys[0]
}

// everywhere are the bindings that work on every screen.
var everywhere = []action{
	bind("quit at once; what there is stays", (*model).interrupt, "ctrl+c"),
	bind("suspend; the trials wait", (*model).suspend, "ctrl+z"),
	bind("draw again", func(*model) tea.Cmd { return tea.ClearScreen }, "ctrl+l"),
}

// common are the bindings of the screens of a session.
var common = []action{
	bind("screen; the next one", func(m *model) tea.Cmd { m.turn(1); return nil }, "tab"),
	bind("screen; the one before", func(m *model) tea.Cmd { m.turn(-1); return nil }, "shift+tab"),
	bind("advice; try the leading finding's", (*model).tryLeading, "a"),
	bind("new pairing; from a list, or typed", (*model).openAdd, "n"),
	bind("write; the report", (*model).write, "w"),
	bind("record; the session, to open it again", (*model).record, "W"),
	bind("glyphs; dots, lines, ASCII", (*model).nextGlyphs, "u"),
	bind("slower screen", func(m *model) tea.Cmd { return m.changeRate(0.5) }, "-"),
	bind("faster screen", func(m *model) tea.Cmd { return m.changeRate(2) }, "+", "="),
	bind("help", (*model).openHelp, "?"),
	bind("quit; asks while trials run", (*model).quit, "q"),
	bind("close; take back, never quit", func(m *model) tea.Cmd { return nil }, "esc"),
}

// actions are the bindings in force, the nearest first.
func (m *model) actions() []action {
	if m.question != nil {
		return slices.Concat(questionKeys, everywhere)
	}
	if m.over == nil && m.s != nil && m.snap.Phase == engine.Broken {
		return slices.Concat(m.brokenKeys(), everywhere)
	}
	list := m.top().keys(m)
	if m.over == nil && m.screen != view(m.chooser) {
		list = slices.Concat(list, common)
	}
	return slices.Concat(list, everywhere)
}

// brokenKeys are what can be done about a system that could not be opened.
func (m *model) brokenKeys() []action {
	list := []action{bind("help", (*model).openHelp, "?"), bind("quit", (*model).quit, "q"), bind("glyphs", (*model).nextGlyphs, "u")}
	if m.chooser != nil {
		list = append([]action{bind("samples", (*model).back, "enter", "esc")}, list...)
	}
	return list
}

// onKey takes one message of the keyboard: several runes of one read are
// several keys, pasted text counts only where text is typed.
func (m *model) onKey(msg tea.KeyMsg) tea.Cmd {
	if msg.Paste {
		return m.pasted(msg.Runes)
	}
	if msg.Alt {
		if msg.Type == tea.KeyRunes && len(msg.Runes) == 1 && (msg.Runes[0] == '[' || msg.Runes[0] == 'O') {
			return m.waitEscape(string(msg.Runes[0]))
		}
		return nil
	}
	if msg.Type == tea.KeyEsc {
		return tea.Batch(m.closeEscape(), m.waitEscape(""))
	}
	if msg.Type != tea.KeyRunes {
		return tea.Batch(m.closeEscape(), m.press(msg.String()))
	}
	var all []tea.Cmd
	for _, r := range msg.Runes {
		all = append(all, m.rune(r))
	}
	return tea.Batch(all...)
}

// rune takes one printed character.
func (m *model) rune(r rune) tea.Cmd {
	if belongs, name := m.esc.feed(r); belongs {
		if name == "" {
			return nil
		}
		return m.press(name)
	}
	return tea.Batch(m.closeEscape(), m.press(string(r)))
}

// waitEscape waits a moment for the rest of a sequence.
func (m *model) waitEscape(rest string) tea.Cmd {
	id := m.esc.begin(rest)
	return tea.Tick(patience, func(time.Time) tea.Msg { return escaped{id} })
}

// onEscaped acts on an escape key that stayed alone.
func (m *model) onEscaped(e escaped) tea.Cmd {
	if e.id != m.esc.id {
		return nil
	}
	return m.closeEscape()
}

// closeEscape ends a waiting escape, which acts if it was the key alone.
func (m *model) closeEscape() tea.Cmd {
	if m.esc.end() {
		return m.press("esc")
	}
	return nil
}

// press does what a key is bound to.
func (m *model) press(name string) tea.Cmd {
	m.stale, m.message = true, ""
	if p := m.top().entry(); p != nil && m.question == nil {
		if p.press(name) {
			return nil
		}
		if r := []rune(name); len(r) == 1 {
			p.typed(r[0])
			return nil
		}
	}
	for _, a := range m.actions() {
		if slices.Contains(a.Keys(), name) {
			return a.do(m, name)
		}
	}
	return nil
}

// pasted takes pasted text into the line being typed, if there is one.
func (m *model) pasted(text []rune) tea.Cmd {
	if p := m.top().entry(); p != nil && m.question == nil {
		m.stale = true
		for _, r := range text {
			p.typed(r)
		}
	}
	return nil
}
