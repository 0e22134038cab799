package precond

import (
	"context"
	"fmt"
	"math"

	"dwindle/engine/trace"
)

// decades are the shifts tried in order; halvings is how often the interval
// below the first that works is halved.
var decades = [...]float64{1e-3, 1e-2, 0.1, 1, 10, 100}

const halvings = 4

// shiftable is a factorisation that can be tried with another shift.
type shiftable interface {
	// factor factors A + alpha diag(A). It returns the row of the first pivot
	// that is not positive beyond rounding, or −1.
	factor(ctx context.Context, alpha float64, progress func(float64)) (broke int, err error)
	// pivot returns the pivot of row i of the last factorisation.
	pivot(i int) float64
}

// attempt factors with one shift and says whether that worked.
type attempt func(alpha float64) (bool, error)

// leastShift finds the smallest workable shift α of A + α diag(A), to within
// a factor of 10^(1/16) = 1.16, and leaves w factored with it:
//
//	0; then 1e-3, 1e-2, … until the factorisation exists;
//	then four halvings on the logarithmic scale between that α and the one
//	before it (1e-4 before the first);
//	then the smallest α that worked once more, if it was not the last tried.
//
// That is at most 12 factorisations, and those that fail end early. Attempts
// that broke down are noted in order.
func leastShift(ctx context.Context, w shiftable, name string, notes *trace.BuildNotes, progress func(float64)) error {
	try := func(alpha float64) (bool, error) {
		row, err := w.factor(ctx, alpha, progress)
		if err != nil {
			return false, err
		}
		if row >= 0 {
			notes.Broke = append(notes.Broke, trace.Pivot{Row: row, Value: w.pivot(row), Shift: alpha})
		}
		return row < 0, nil
	}
	if ok, err := try(0); ok || err != nil {
		return err
	}
	low := decades[0] / 10
	for _, alpha := range decades {
		ok, err := try(alpha)
		if err != nil {
			return err
		}
		if ok {
			notes.Shift, err = halve(try, low, alpha)
			return err
		}
		low = alpha
	}
	p := notes.Broke[0]
	return &Breakdown{Method: name, Row: p.Row, Pivot: p.Value,
		Why: fmt.Sprintf("the pivot is not positive, and no shift up to %g of the diagonal repairs it", low)}
}

// halve narrows the shift between low and high, which works, and ends with
// the smallest workable one.
func halve(try attempt, low, high float64) (float64, error) {
	last := true
	for k := 0; k < halvings; k++ {
		middle := math.Sqrt(low * high)
		ok, err := try(middle)
		if err != nil {
			return 0, err
		}
		if ok {
			high = middle
		} else {
			low = middle
		}
		last = ok
	}
	if last {
		return high, nil
	}
	_, err := try(high)
	return high, err
}
