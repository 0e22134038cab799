package report

import (
	"errors"
	"fmt"
	"io"
)

// NoSolution says why there is no solution to write.
func (d Document) NoSolution() error {
	return errors.New("there is no solution to write: " + d.nothing())
}

// NoVectors says why there are no vectors to write.
func (d Document) NoVectors() error {
	return errors.New("there are no vectors to write: " + d.nothing())
}

// nothing is the reason why a document holds no vector of any kind.
func (d Document) nothing() string {
	if d.Recorded {
		return "the session was recorded without --vectors, which keeps them in its file"
	}
	return "no trial has begun"
}

// Solution writes the solution as a Matrix Market array of n rows and one
// column, 17 significant digits each, in the row order of the system.
func Solution(w io.Writer, d Document) error {
	if d.Solution == nil {
		return d.NoSolution()
	}
	text := fmt.Sprintf("solution of %s, dwindle %s", clip(plain(d.System.Name), 200), clip(plain(d.Version), 100))
	for _, t := range d.Trials {
		if t.TwoDoubles && t.Pairing == d.Choice.Pairing {
			text += fmt.Sprintf("; found in two doubles and rounded here to one, which leaves ||b-Ax||/||b|| = %.3g", t.Rounded)
		}
	}
	return writeArray(w, d.Solution, text)
}
