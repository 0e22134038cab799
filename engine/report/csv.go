package report

import (
	"encoding/csv"
	"io"
	"strconv"
)

// historyHeader names the columns of the history, one record a line.
var historyHeader = []string{"pairing", "iteration", "own_seconds", "products", "precond_uses", "residual", "norm", "true_residual"}

// CSV writes the history of all trials: the residual in each method's own
// norm, the true residual where it was measured; an empty cell is unknown.
func CSV(w io.Writer, d Document) error {
	c := csv.NewWriter(w)
	c.Write(historyHeader) // the writer keeps its first error
	for _, t := range d.Trials {
		for _, r := range t.Records {
			c.Write([]string{tame(t.Pairing), strconv.Itoa(int(r.Iter)), exact(r.Clock.Seconds()),
				strconv.Itoa(int(r.MatVecs)), strconv.Itoa(int(r.Solves)), cell(r.Residual), string(t.Norm), cell(r.Audit)})
		}
	}
	c.Flush()
	return c.Error()
}

func cell(x float64) string {
	if !finite(x) {
		return ""
	}
	return exact(x)
}
