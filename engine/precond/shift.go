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
func leastShift(ctx context.Context, w *icWork, notes *trace.BuildNotes, progress func(float64)) error {
	try := func(alpha float64) (bool, error) {
		row, err := w.factor(ctx, alpha, progress)
		if err != nil {
			return false, err
		}
		if row >= 0 {
			notes.Broke = append(notes.Broke, trace.Pivot{Row: row, Value: w.pivots[row], Shift: alpha})
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
	return &Breakdown{Method: "ic:0", Row: p.Row, Pivot: p.Value,
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
