package inspect

import (
	"fmt"
	"math"

	"dwindle/engine/linear"
)

// levelTolerance is how far the entries of a direction may differ from one
// number, or from zero, relative to that number.
const levelTolerance = 1e-6

// levelOf says where a direction in the user's units is one number, on two rows
// or more, if it is zero on all others; nil if it is none such.
func (e *exam) levelOf(v []float64) *Level {
	most := 0.0
	for _, x := range v {
		if math.Abs(x) > math.Abs(most) {
			most = x
		}
	}
	l := &Level{First: -1}
	zeros := 0
	for i, x := range v {
		switch {
		case math.Abs(x-most) <= levelTolerance*math.Abs(most):
			if l.First < 0 {
				l.First = i
			}
			l.Last = i
			l.Count++
			if e.a.At(i, i) == 0 {
				zeros++
			}
		case !(math.Abs(x) <= levelTolerance*math.Abs(most)):
			return nil
		}
	}
	if l.Count < 2 {
		return nil
	}
	l.ZeroDiagonal = zeros == l.Count && zeros == e.f.DiagZero+e.f.DiagMissing
	return l
}

// Text tells the rows by the names that their owner gave them, after "constant
// on".
func (l Level) Text(names linear.RowNames) string {
	of := "rows"
	if l.Last-l.First+1 != l.Count {
		of = fmt.Sprintf("%d of rows", l.Count)
	}
	where := fmt.Sprintf("%s %s to %s", of, names.Short(l.First), names.Short(l.Last))
	if l.ZeroDiagonal {
		where += " (those with a zero on the diagonal)"
	}
	return where + ", zero on all others"
}
