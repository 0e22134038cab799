package report

import (
	"errors"
	"fmt"
	"io"
)

// ErrNoSolution says that no trial left an iterate to write.
var ErrNoSolution = errors.New("there is no solution to write: no trial has begun")

// Solution writes the solution as a Matrix Market array of n rows and one
// column, 17 significant digits each, in the row order of the system.
func Solution(w io.Writer, d Document) error {
	if d.Solution == nil {
		return ErrNoSolution
	}
	return writeArray(w, d.Solution, fmt.Sprintf("solution of %s, dwindle %s", clip(plain(d.System.Name), 200), clip(plain(d.Version), 100)))
}
