package report

import (
	"strings"
	"unicode"
)

// tame keeps a text as it is but for control characters, which a terminal
// might obey: they become "?".
func tame(s string) string {
	return strings.Map(func(r rune) rune {
		if unicode.IsControl(r) {
			return '?'
		}
		return r
	}, s)
}

// tameAll is tame for a list, never nil.
func tameAll(list []string) []string {
	out := make([]string, len(list))
	for i, s := range list {
		out[i] = tame(s)
	}
	return out
}

// optional is nil for an empty text.
func optional(s string) *string {
	if s == "" {
		return nil
	}
	s = tame(s)
	return &s
}

// fromOne counts rows from 1, never nil.
func fromOne(rows []int) []int {
	out := make([]int, len(rows))
	for i, r := range rows {
		out[i] = r + 1
	}
	return out
}
