package tui

import "strings"

// The smallest screens: below the first nothing but one line is drawn, below
// the second the trials screen is a list without a chart.
const (
	minWidth, minHeight     = 30, 6
	chartWidth, chartHeight = 60, 16
)

// compose draws the frame: header, body, bottom lines. No line is wider and
// the frame is never higher than the screen.
func (m *model) compose() string {
	if m.w < minWidth || m.h < minHeight {
		return clip("dwindle needs 30 x 6 cells; trials go on", m.w)
	}
	bottom := m.bottom()
	lines := []string{m.header()}
	body := m.h - 1 - len(bottom)
	lines = append(lines, fit(m.top().draw(m, m.w, body), body)...)
	lines = append(lines, bottom...)
	for i, line := range lines {
		if width(line) > m.w {
			line = clip(line, m.w)
			if m.on {
				line += "\x1b[m"
			}
		}
		lines[i] = strings.TrimRight(line, " ")
	}
	return strings.Join(lines, "\n")
}

// fit makes lines exactly h lines long.
func fit(lines []string, h int) []string {
	out := make([]string, h)
	copy(out, lines)
	return out
}

// scroll moves the first visible of n items so that item at can be seen among
// h.
func scroll(first, at, n, h int) int {
	if at < first {
		first = at
	}
	if at >= first+h {
		first = at - h + 1
	}
	return max(min(first, n-h), 0)
}

// some returns the visible part of lines.
func some(lines []string, first, h int) []string {
	first = max(min(first, len(lines)-h), 0)
	return lines[first:min(first+max(h, 0), len(lines))]
}

// paragraph wraps text to w cells with an indent.
func paragraph(text string, indent, w int) []string {
	lines := wrap(text, w-indent)
	for i := range lines {
		lines[i] = blanks(indent) + lines[i]
	}
	return lines
}
