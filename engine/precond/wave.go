package precond

import "dwindle/engine/linear"

// stepRows is how many rows a thread solves between two looks at the others.
const stepRows = 64

// wave shares a triangular sweep among threads. The rows are cut, in the order
// of the sweep, into chunks that need little of the chunk just before them
// (the lines or planes of a grid). A thread that solves a chunk follows the
// threads that solve earlier ones at the distance the entries ask for. Each
// row is computed as by one thread, so the result is the same bits.
type wave struct {
	n       int
	back    bool // the sweep goes from the last row to the first
	bounds  []int
	first   []int   // first step of each chunk, length len(bounds)
	awaits  []await // what the steps wait for, one step after the other
	ptr     []int   // length steps+1
	rows    func(dst, x []float64, lo, hi int)
	pipe    *linear.Pipeline
	dst, x  []float64 // of the run under way
	speedup float64   // of two threads, as predicted
}

// await is the progress another chunk must have made.
type await struct{ chunk, steps int32 }

// run sweeps on the team and returns true, or does nothing and returns false
// where the sweep is not shared.
func (w *wave) run(dst, x []float64) bool {
	if w == nil || linear.Threads() == 1 {
		return false
	}
	w.dst, w.x = dst, x
	w.pipe.Run()
	w.dst, w.x = nil, nil
	return true
}

// chunk solves one chunk from a step on; false where it is laid down.
func (w *wave) chunk(c, from int) bool {
	lo, end := w.bounds[c]+from*stepRows, w.bounds[c+1]
	for s := w.first[c] + from; lo < end; s++ {
		for _, a := range w.awaits[w.ptr[s]:w.ptr[s+1]] {
			if !w.pipe.Await(int(a.chunk), int(a.steps)) {
				return false
			}
		}
		hi := min(lo+stepRows, end)
		if w.back {
			w.rows(w.dst, w.x, w.n-hi, w.n-lo)
		} else {
			w.rows(w.dst, w.x, lo, hi)
		}
		w.pipe.Reach(c, s-w.first[c]+1)
		lo = hi
	}
	return true
}

// Below so much work (rows·3 + entries), or below so much gain by two threads,
// a sweep is left to one.
const (
	leastWork = 60000
	leastGain = 1.3
)

// newWave plans the sweep of n rows. rows solves rows lo to hi, and cols gives
// the columns of the entries of row i, ascending. It returns nil where sharing
// does not pay.
func newWave(n int, back bool, rows func(dst, x []float64, lo, hi int), cols func(i int) []int32) *wave {
	p := &plan{n: n, back: back, cols: cols}
	p.cut()
	if p.work < leastWork || len(p.bounds) < 3 || !p.connect() {
		return nil
	}
	w := &wave{n: n, back: back, bounds: p.bounds, first: p.first, awaits: p.awaits, ptr: p.ptr, rows: rows}
	if w.speedup = p.gain(2); w.speedup < leastGain {
		return nil
	}
	w.pipe = linear.NewPipeline(len(w.bounds)-1, w.chunk)
	return w
}
