package precond

import (
	"context"
	"errors"
	"math"
	"math/rand/v2"
	"runtime"
	"slices"
	"testing"
	"time"

	"dwindle/engine/linear"
)

// plainRow is a row as the rules of ilut have it: dense values by column, and
// which columns were met, in the order in which they were.
type plainRow struct {
	w   []float64
	met []int32
}

func (r *plainRow) subtract(c int32, v float64) {
	if !slices.Contains(r.met, c) {
		r.met = append(r.met, c)
	}
	r.w[c] -= v
}

// plainILUT applies the rules of ilut and ilutp to dense rows, entry by entry
// in the same order of operations: L holds positions, R columns of A.
func plainILUT(a *linear.CSR, tau float64, p int, permtol float64) (l, r [][]linear.Entry, inverse []float64, col []int32) {
	n := a.NRows
	col = make([]int32, n)
	for k := range col {
		col[k] = int32(k)
	}
	for i := range n {
		cols, vals := a.Row(i)
		norm := 0.0
		row := plainRow{w: make([]float64, n)}
		for e, c := range cols {
			norm += vals[e] * vals[e]
			row.w[c] = vals[e]
		}
		row.met = slices.Clone(cols)
		drop := tau * math.Sqrt(norm)
		var low, up []linear.Entry
		for c := range i {
			t := row.w[col[c]]
			if !(math.Abs(t) > drop) {
				continue
			}
			low = append(low, linear.Entry{J: c, V: t * inverse[c]})
			for _, e := range r[c] {
				row.subtract(int32(e.J), t*e.V)
			}
		}
		for _, c := range row.met {
			if slices.Index(col, c) > i && math.Abs(row.w[c]) > drop {
				up = append(up, linear.Entry{J: int(c), V: row.w[c]})
			}
		}
		up = plainLargest(up, p)
		d := row.w[col[i]]
		if permtol > 0 {
			up, d = plainExchange(i, up, d, permtol, col)
		}
		inverse = append(inverse, 1/d)
		for k := range up {
			up[k].V *= inverse[i]
		}
		slices.SortFunc(up, func(x, y linear.Entry) int { return x.J - y.J })
		l, r = append(l, plainLargest(low, p)), append(r, up)
	}
	return l, r, inverse, col
}

// plainExchange swaps the column at position i for that of the largest entry
// where this is larger than the diagonal entry by more than 1/permtol.
func plainExchange(i int, up []linear.Entry, d, permtol float64, col []int32) ([]linear.Entry, float64) {
	best := -1
	for k, e := range up {
		if s := math.Abs(e.V) * permtol; s > math.Abs(d) && (best < 0 || s > math.Abs(up[best].V)*permtol) {
			best = k
		}
	}
	if best < 0 {
		return up, d
	}
	j, v := up[best].J, up[best].V
	up[best] = linear.Entry{J: int(col[i]), V: d}
	if d == 0 {
		up = slices.Delete(up, best, best+1)
	}
	at := slices.Index(col, int32(j))
	col[i], col[at] = col[at], col[i]
	return up, v
}

// plainLargest keeps the p entries of largest size, the first of equals.
func plainLargest(e []linear.Entry, p int) []linear.Entry {
	slices.SortStableFunc(e, func(x, y linear.Entry) int {
		switch {
		case math.Abs(x.V) > math.Abs(y.V):
			return -1
		case math.Abs(x.V) < math.Abs(y.V):
			return 1
		}
		return 0
	})
	return e[:min(p, len(e))]
}

// The factors are those of the plain twin to the last bit, with any number of
// threads; the larger systems are passed on in several batches.
func TestThresholdFactorsToTheLastBit(t *testing.T) {
	defer linear.SetThreads(linear.Threads())
	for _, c := range []struct {
		name    string
		a       *linear.CSR
		tau     float64
		p       int
		permtol float64
		batches int // at least
	}{
		{"plate", plate(60), 1e-3, 12, 0, 2},
		{"plate", plate(20), 1e-4, 7, 0, 0},
		{"plate, most dropped", plate(20), 0.3, 1, 0, 0},
		{"unsymmetric", unsymmetric(600), 0, 60, 0, 1},
		{"unsymmetric, few kept", unsymmetric(300), 0, 5, 0, 0},
		{"nothing kept", unsymmetric(50), 0, 0, 0, 0},
		{"exchanges", scrambled(200), 1e-3, 20, 0.1, 0},
		{"exchanges, all kept", scrambled(500), 0, 500, 1, 1},
		{"no exchanges", plate(15), 1e-3, 6, 0.1, 0},
	} {
		l, r, inverse, col := plainILUT(c.a, c.tau, c.p, c.permtol)
		if n := count(l) + len(l); n < c.batches*batchFull {
			t.Fatalf("%s: %d rows and entries of L do not fill %d batches", c.name, n, c.batches)
		}
		for _, threads := range []int{1, 2, 3} {
			linear.SetThreads(threads)
			w := newILUTWork(c.a, "ilut", c.tau, c.p, c.permtol)
			for i := range c.a.NRows {
				if _, err := w.row(i); err != nil {
					t.Fatalf("%s: %v", c.name, err)
				}
			}
			w.finish()
			if c.permtol > 0 && !slices.Equal(w.col, col) {
				t.Fatalf("%s: other exchanges", c.name)
			}
			sameRows(t, c.name+", L", w.f.lower, l, nil)
			sameRows(t, c.name+", R", w.f.upper, r, w.pos)
			for i, v := range inverse {
				if w.f.inverse[i] != v {
					t.Fatalf("%s: pivot of row %d", c.name, i)
				}
			}
		}
	}
}

func count(rows [][]linear.Entry) int {
	n := 0
	for _, r := range rows {
		n += len(r)
	}
	return n
}

// sameRows compares the rows, whose columns are found at pos where it is given.
func sameRows(t *testing.T, name string, got *linear.CSR, want [][]linear.Entry, pos []int32) {
	t.Helper()
	for i, row := range want {
		cols, vals := got.Row(i)
		if len(cols) != len(row) || !slices.IsSorted(cols) {
			t.Fatalf("%s: row %d has columns %v; want %d in order", name, i, cols, len(row))
		}
		for _, e := range row {
			at := int32(e.J)
			if pos != nil {
				at = pos[e.J]
			}
			if k, ok := slices.BinarySearch(cols, at); !ok || math.Float64bits(vals[k]) != math.Float64bits(e.V) {
				t.Fatalf("%s: entry (%d,%d) is not %v", name, i, at, e.V)
			}
		}
	}
}

// Of equal sizes the first stay, in their order.
func TestLargestOfEquals(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for range 500 {
		e := make([]linear.Entry, 1+r.IntN(12))
		var cols []int32
		var vals []float64
		for k := range e {
			e[k] = linear.Entry{J: k, V: float64(r.IntN(5) - 2)}
			cols, vals = append(cols, int32(k)), append(vals, e[k].V)
		}
		p := r.IntN(len(e) + 2)
		_, n := largest(cols, vals, p, nil)
		want := plainLargest(e, p)
		slices.SortFunc(want, func(x, y linear.Entry) int { return x.J - y.J })
		if n != len(want) {
			t.Fatalf("%d kept; want %d", n, len(want))
		}
		for k, e := range want {
			if int(cols[k]) != e.J || vals[k] != e.V {
				t.Fatalf("entry %d is %v at %d; want %v", k, vals[k], cols[k], e)
			}
		}
	}
}

// A build that is cancelled under way leaves nothing running.
func TestThresholdCancelled(t *testing.T) {
	defer linear.SetThreads(linear.Threads())
	linear.SetThreads(2)
	e, v := lookup(t, "ilut:0.001,12")
	before := runtime.NumGoroutine()
	ctx, cancel := context.WithCancel(t.Context())
	defer cancel()
	_, _, err := e.Build(ctx, linear.System{A: plate(150)}, v, func(share float64) {
		if share > 0.5 {
			cancel()
		}
	})
	if !errors.Is(err, context.Canceled) {
		t.Fatalf("error %v", err)
	}
	for wait := time.Now(); runtime.NumGoroutine() > before; time.Sleep(time.Millisecond) {
		if time.Since(wait) > 10*time.Second { // the last one may still be on its way out
			t.Fatalf("%d goroutines, %d before", runtime.NumGoroutine(), before)
		}
	}
}

// places against a plain set.
func TestPlaces(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 8))
	for _, n := range []int{1, 64, 65, 5000, 64*64*64*2 + 1} {
		s := newPlaces(n)
		for range 50 {
			in := map[int32]bool{}
			add := func(from int) {
				if from < n {
					x := int32(from + r.IntN(min(n-from, 1<<r.IntN(20))))
					s.add(x)
					in[x] = true
				}
			}
			for range r.IntN(20) {
				add(0)
			}
			last := int32(-1)
			for x := s.pop(); x >= 0; x = s.pop() {
				for y := range in {
					if y < x {
						t.Fatalf("%d of %d comes before %d", x, n, y)
					}
				}
				if !in[x] || x <= last {
					t.Fatalf("%d of %d is not in the set or comes again", x, n)
				}
				delete(in, x)
				last = x
				for range r.IntN(2) {
					add(int(x) + 1)
				}
			}
			if len(in) > 0 {
				t.Fatalf("%d numbers of %d are left", len(in), n)
			}
		}
	}
}
