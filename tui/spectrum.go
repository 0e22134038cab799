package tui

import (
	"fmt"
	"slices"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// spectrumView is the screen of what is known of the eigenvalues: of A, and of
// the matrix that the picked trial runs on.
type spectrumView struct {
	first, lines int
	ofA          bool // the picture is of A though the picked trial has one
}

func (v *spectrumView) name() string   { return "spectrum" }
func (v *spectrumView) entry() *prompt { return nil }

// keys are the bindings of the screen.
func (v *spectrumView) keys(m *model) []action {
	list := []action{
		bindKey("pick; a trial by its number", m.trials.pickDigit, "1", "2", "3", "4", "5", "6", "7", "8", "9", "0").named("1-9"),
		bind("A or trial; whose picture", func(m *model) tea.Cmd { v.ofA = !v.ofA; v.first = 0; return nil }, "o"),
		bind("next trial", func(m *model) tea.Cmd { m.trials.move(m, 1); return nil }, "right", "l"),
		bind("trial before", func(m *model) tea.Cmd { m.trials.move(m, -1); return nil }, "left", "h"),
		bind("info; all of the picked trial", (*model).openInfo, "i"),
	}
	return append(list, moves(func(m *model, step int) { v.first = max(min(v.first+step, v.lines-1), 0) })...)
}

// draw draws the conditions, the picture, and what the picked trial found.
func (v *spectrumView) draw(m *model, w, h int) []string {
	f := m.snap.Facts
	if f == nil {
		return m.noTrials(w, h)
	}
	lines := m.conditionLines(f, w)
	tall := min(max(h-len(lines)-7, 5), 16)
	lines = append(lines, v.picture(m, w, tall)...)
	lines = append(lines, m.spectralWords(w)...)
	lines = append(lines, m.normalityLines(f, w)...)
	v.lines = len(lines)
	v.first = max(min(v.first, len(lines)-h), 0)
	out := slices.Clone(some(lines, v.first, h))
	if v.first+h < len(lines) && len(out) > 0 {
		out[len(out)-1] = m.on.paint(faint, fmt.Sprintf("  %d more lines: down", len(lines)-v.first-h+1))
	}
	return out
}

// conditionLines is the table of the conditions of A and of what could be made
// of it.
func (m *model) conditionLines(f *inspect.Facts, w int) []string {
	if f.Study == nil {
		text := "the spectrum of A was not looked at"
		if !f.Complete {
			text = "the spectrum of A is being looked at"
		}
		return []string{m.on.paint(faint, text)}
	}
	lines := []string{m.on.paint(faint, clip(left(valuesWord(f), 25)+right("smallest", 10)+right("largest", 10)+right("condition", 11)+"  how known", w))}
	s := f.Study
	for _, x := range []*inspect.Spectrum{s.Raw, s.Equilibrated, s.Jacobi, s.Rest} {
		if x != nil {
			lines = append(lines, clip(m.conditionRow(x, f), w))
		}
	}
	if len(lines) == 1 {
		lines = append(lines, "  not known: it did not fit the budget of work")
	}
	if finite(s.Digits) && s.Raw != nil {
		lines = append(lines, clip(fmt.Sprintf("about %.0f correct digits of x to expect, from the condition after equilibration", max(s.Digits, 0)), w))
	}
	return lines
}

// valuesWord names the values whose ends are known: of an A that is not
// symmetric the singular ones.
func valuesWord(f *inspect.Facts) string {
	if f.Symmetric.Answer == inspect.Yes {
		return "eigenvalues"
	}
	return "singular values"
}

// doubted marks a value that is not settled.
func doubted(settled bool) string {
	if settled {
		return ""
	}
	return "?"
}

// conditionRow is one operator of the table.
func (m *model) conditionRow(x *inspect.Spectrum, f *inspect.Facts) string {
	how := fmt.Sprintf("%s, %s", x.Certainty, x.How)
	if x.Norm == "1" {
		how += ", 1-norm"
	}
	if x.Exact {
		how += ", all"
	}
	if x.Negative > 0 {
		how += fmt.Sprintf(", %d < 0", x.Negative)
	}
	low, rounded := f.LowEnd(*x)
	lowSettled, highSettled := x.Settled()
	return left(m.signs.clean(x.Of), 25) + right(sci(low)+doubted(lowSettled || rounded), 10) + right(sci(x.Largest)+doubted(highSettled), 10) + right(sci(x.Condition), 11) + "  " + m.signs.clean(how)
}

// picture is the picture of the picked trial's Ritz values, or of A's
// eigenvalues.
func (v *spectrumView) picture(m *model, w, h int) []string {
	t := m.trial(m.trials.picked)
	if t != nil && !v.ofA {
		if len(t.History.Locks) > 0 {
			return m.lockPicture(t.ID, &t.History, w, h)
		}
		if len(t.History.Harmonic) > 0 {
			title := fmt.Sprintf("harmonic Ritz values of trial %s %s in the plane, last cycle", trace.Tag(t.ID), m.signs.clean(t.History.Pairing))
			return append([]string{m.on.paint(faint, clip(title, w))}, planePicture(t.History.Harmonic, w, h, m.signs)...)
		}
	}
	return m.ofAPicture(w, h)
}

// ofAPicture is the picture of A's eigenvalues.
func (m *model) ofAPicture(w, h int) []string {
	s := m.snap.Facts.Study
	if s == nil {
		return nil
	}
	titled := func(title string, lines []string) []string {
		return append([]string{m.on.paint(faint, clip(title, w))}, lines...)
	}
	switch {
	case s.Raw != nil && len(s.Raw.Values) > 0 && !allReal(s.Raw.Values):
		return titled("all eigenvalues of A in the plane", planePicture(s.Raw.Values, w, h, m.signs))
	case s.Raw != nil && len(s.Raw.Values) > 0:
		return titled("all eigenvalues of A", densityPicture(single(s.Raw.Values), w, h, m.signs))
	case len(s.Density) > 0:
		title := "density of the eigenvalues of A, estimated"
		if sd := largestSd(s.Density); sd > 0 {
			title += fmt.Sprintf("; a bin is known to +-%.0f or better", sd)
		}
		return titled(title, densityPicture(binned(s.Density), w, h, m.signs))
	case s.Raw != nil && len(s.Raw.Low)+len(s.Raw.High) > 0:
		return titled("outermost "+valuesWord(m.snap.Facts)+" of A", densityPicture(outermost(s.Raw), w, h, m.signs))
	}
	return nil
}

// spectralWords is what the picked trial says about its matrix.
func (m *model) spectralWords(w int) []string {
	t := m.trial(m.trials.picked)
	if t == nil {
		return nil
	}
	h := &t.History
	lines := []string{m.on.paint(faint, clip(fmt.Sprintf("trial %s %s", trace.Tag(t.ID), m.signs.clean(h.Pairing)), w))}
	lines = append(lines, hanging(m.signs.clean(m.conditionWords(h)), w)...)
	lines = append(lines, tied(lockWords(h), w)...)
	for _, text := range append([]string{energyWords(h), deepWords(h)}, withoutWords(h)...) {
		lines = append(lines, hanging(m.signs.clean(text), w)...)
	}
	return lines
}

// deepWords tells of a delay by lost orthogonality.
func deepWords(h *trace.History) string {
	if h.Delay <= 0 {
		return ""
	}
	return fmt.Sprintf("about %d its lost to rounding (lost orthogonality), estimated", h.Delay)
}

// mostFree is how many free directions are shown.
const mostFree = 8

// normalityLines tells how far the eigenvalues of a nonsymmetric A can be
// trusted, and which directions are nearly free.
func (m *model) normalityLines(f *inspect.Facts, w int) []string {
	if f.Study == nil {
		return nil
	}
	var texts []string
	if n := f.Study.Normality; n != nil {
		least := "at least "
		if n.Exact {
			least = ""
		}
		text := fmt.Sprintf("departure from normality %s%s of ||A||_F", least, sci(n.Henrici))
		if n.Normal() {
			text = "normal to rounding"
		}
		text += fmt.Sprintf("; field of values: real parts %s .. %s", sci(n.FieldMin), sci(n.FieldMax))
		if n.FieldHoldsZero {
			text += ", zero inside"
		}
		texts = append(texts, text)
	}
	for _, d := range f.Study.Null[:min(mostFree, len(f.Study.Null))] {
		text := fmt.Sprintf("a nearly free direction: ||Av|| is %s of ||A|| ||v|| (next %s), 99 %% of it in %d rows", sci(d.Quotient), sci(d.Next), d.Support)
		texts = append(texts, withRows(text, d.Rows, f))
	}
	var lines []string
	for _, text := range texts {
		for _, l := range wrap(m.signs.clean(text), w) {
			lines = append(lines, clip(l, w))
		}
	}
	return lines
}
