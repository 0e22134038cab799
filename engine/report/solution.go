package report

import (
	"bufio"
	"errors"
	"fmt"
	"io"
	"strconv"
)

// ErrNoSolution says that no trial left an iterate to write.
var ErrNoSolution = errors.New("there is no solution to write: no trial has begun")

// Solution writes the solution as a Matrix Market array of n rows and one
// column, 17 significant digits each, in the row order of the system.
func Solution(w io.Writer, d Document) error {
	if d.Solution == nil {
		return ErrNoSolution
	}
	b := bufio.NewWriter(w)
	fmt.Fprintf(b, "%%%%MatrixMarket matrix array real general\n%% solution of %s, dwindle %s\n%d 1\n",
		clip(plain(d.System.Name), 200), clip(plain(d.Version), 100), len(d.Solution))
	var line []byte
	for _, x := range d.Solution {
		line = append(strconv.AppendFloat(line[:0], x, 'e', 16, 64), '\n')
		b.Write(line) // the writer keeps its first error
	}
	return b.Flush()
}
