// Package tui is the live interface: it draws snapshots of a session and
// sends commands to it. It never computes anything about a solve.
//
// The map, from the outside in:
//
//	run.go       Config and Run: program, output gate, signals, endings
//	gate.go      the output gate: a slow terminal never blocks the keys
//	model.go     the model; update.go its messages; session.go what it asks
//	keys.go      bindings as data; the help screen is derived from them
//	esc.go       escape sequences that a slow link tore apart
//	prompt.go    one line of text input
//
//	frame.go     screen = header + body + bottom lines, cut to size
//	chooser.go, trials.go, system.go, spectrum.go, findings.go   the screens
//	help.go, addlist.go, form.go, infoview.go, tries.go, ask.go  what lies over them
//	columns.go, fold.go, detail.go, trialwords.go, choice.go, bottom.go, header.go   parts of them
//	spectrumdraw.go, ruler.go   pictures of eigenvalues
//
//	chart.go     composes the chart from the pieces below
//	reduce.go    history → one value per column
//	axis.go      ranges that only grow, even decades, ticks
//	canvas.go    a grid of coloured cells
//	braille.go, strokes.go, digits.go                 three ways to draw a curve
//	chartmarks.go   where common rules would have stopped, bounds of the error
//	tags.go      digits on the curves, their heads and marks
//
//	text.go, numbers.go, style.go, glyphs.go          clean, fixed, coloured text
//
// The interface pulls: a tick asks for a snapshot; nothing is sent to the
// interface per iteration, and a session never waits for the screen.
package tui
