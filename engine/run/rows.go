package run

import (
	"errors"

	"dwindle/engine/precond"
	"dwindle/engine/trace"
)

// inFileRows turns the rows of pivots, which the preparations may have moved,
// into those of the file. A matrix of the user's own keeps its rows.
func (t *Trial) inFileRows(pivots []trace.Pivot) {
	if t.method.From != "" {
		return
	}
	for k, p := range pivots {
		if p.Row >= 0 {
			pivots[k].Row = t.fileRow(p.Row)
		}
	}
}

// told is the text of an error of the set-up, its row as its owner names it.
func (t *Trial) told(err error) string {
	var b *precond.Breakdown
	if t.method.From != "" || !errors.As(err, &b) || b.Row < 0 {
		return err.Error()
	}
	return b.In(t.sys.RowNames().Row(t.fileRow(b.Row)))
}
