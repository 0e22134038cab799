package report

import "dwindle/engine/trace"

// digit is the one character that draws the curve of the trial at index i.
func digit(i int) byte {
	if tag := trace.Tag(i + 1); len(tag) == 1 {
		return tag[0]
	}
	return '*'
}
