package inspect

import "math"

// What makes a pattern look like a mesh: at least fewestNodes rows, whose
// numbers of neighbours differ little (their standard deviation is at most
// evenDegrees of their mean), and neighbourhoods that grow as a power of the
// radius.
const (
	fewestNodes = 200
	evenDegrees = 0.4
	centres     = 8
)

// mesh says whether the pattern looks like a mesh, and of which dimension: the
// slope of log |ball| over log (radius + 1/2) about a few centres.
func (e *exam) mesh() (bool, float64) {
	if e.f.N-e.f.Singletons < fewestNodes || !e.evenly() {
		return false, math.NaN()
	}
	sum, used := 0.0, 0
	w := newBalls(e)
	for k := range centres {
		if d, ok := w.slope((2*k + 1) * e.f.N / (2 * centres)); ok {
			sum += d
			used++
		}
	}
	if used < centres/2 {
		return false, math.NaN()
	}
	return true, sum / float64(used)
}

// evenly says whether rows have much the same number of neighbours,
// singletons left aside.
func (e *exam) evenly() bool {
	n, sum, squares := 0.0, 0.0, 0.0
	for i := range e.f.N {
		if k := float64(e.a.Ptr[i+1] - e.a.Ptr[i] - 1); k > 0 {
			n, sum, squares = n+1, sum+k, squares+k*k
		}
	}
	mean := sum / n
	return n > 0 && squares/n-mean*mean <= evenDegrees*evenDegrees*mean*mean
}

// balls grows neighbourhoods in the pattern of A.
type balls struct {
	e     *exam
	seen  []int32 // length n: the search that visited a row last
	turn  int32
	queue []int32
}

func newBalls(e *exam) *balls { return &balls{e: e, seen: make([]int32, e.f.N)} }

// grow searches breadth first from centre until limit rows are reached, and
// returns them in order with the number reached within each radius.
func (w *balls) grow(centre, limit int) (rows []int32, within []int) {
	w.turn++
	w.queue = append(w.queue[:0], int32(centre))
	w.seen[centre] = w.turn
	within = []int{1}
	for done := 0; done < len(w.queue) && len(w.queue) < limit; {
		end := len(w.queue)
		for ; done < end; done++ {
			i := int(w.queue[done])
			cols, vals := w.e.a.Row(i)
			for k, j := range cols {
				if vals[k] != 0 && w.seen[j] != w.turn {
					w.seen[j] = w.turn
					w.queue = append(w.queue, j)
				}
			}
		}
		within = append(within, len(w.queue))
	}
	return w.queue, within
}

// slope is the growth exponent of the balls about a centre, up to an eighth of
// the system; false where fewer than four radii fit, or the balls do not grow
// as a power.
func (w *balls) slope(centre int) (float64, bool) {
	_, within := w.grow(centre, w.e.f.N/8)
	last := len(within) - 2 // the last ball may be cut
	if last < 4 {
		return 0, false
	}
	first := max(1, last/3)
	at := func(r int) (x, y float64) { return math.Log(float64(r) + 0.5), math.Log(float64(within[r])) }
	x0, y0 := at(first)
	x1, y1 := at(last)
	xm, ym := at((first + last) / 2)
	d := (y1 - y0) / (x1 - x0)
	bend := math.Abs(ym - y0 - d*(xm-x0))
	return d, d > 0 && bend < 0.25
}
