package main

import (
	"errors"
	"fmt"
	"strings"
	"unicode"

	"dwindle/engine"
)

// The exit statuses.
const (
	met         = 0 // the goal was met
	notMet      = 1
	wrongUsage  = 2
	unreadable  = 3 // input
	interrupted = 4 // what was done is printed and saved
	fault       = 5 // internal, or output that could not be written
)

// ending is an error with its exit status; an empty text is not printed.
type ending struct {
	status int
	text   string
}

func (e *ending) Error() string { return e.text }

func usage(format string, args ...any) error {
	return &ending{wrongUsage, fmt.Sprintf(format, args...)}
}

// unwritten says that output could not be written.
func unwritten(what string, err error) error {
	return &ending{fault, fmt.Sprintf("could not write %s: %v", what, err)}
}

// statusOf is the exit status of an error.
func statusOf(err error) int {
	var e *ending
	switch {
	case errors.As(err, &e):
		return e.status
	case engine.IsUsage(err):
		return wrongUsage
	case engine.IsInput(err):
		return unreadable
	}
	return fault
}

// printable keeps a message from steering the terminal: names in it come from
// files and arguments.
func printable(s string) string {
	return strings.Map(func(r rune) rune {
		if r != '\n' && !unicode.IsPrint(r) {
			return '?'
		}
		return r
	}, s)
}
