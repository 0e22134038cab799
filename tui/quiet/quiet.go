// Package quiet settles the question of the terminal's background before any
// terminal library can ask it. Asking means writing a query and waiting up to
// five seconds for a terminal that may never answer; dwindle uses only colours
// that can be read on both backgrounds, so the answer does not matter.
//
// It must be initialised before bubbletea, whose own initialisation asks. Go
// initialises packages that are ready in the order of their import paths, and
// "dwindle/..." stands before "github.com/...", so importing this package from
// package main is enough; keep its imports to lipgloss alone.
package quiet

import "github.com/charmbracelet/lipgloss"

func init() { lipgloss.SetHasDarkBackground(true) }
