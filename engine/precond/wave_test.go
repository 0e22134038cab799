package precond

import (
	"slices"
	"testing"

	"dwindle/engine/linear"
)

// coloured returns the 5-point operator with the points of one colour of a
// chessboard before those of the other.
func coloured(n int) *linear.CSR {
	place := make([]int, n*n)
	next := 0
	for colour := range 2 {
		for i := range place {
			if (i/n+i%n)%2 == colour {
				place[i] = next
				next++
			}
		}
	}
	var e []linear.Entry
	a := plate(n)
	for i := 0; i < n*n; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			e = append(e, linear.Entry{I: place[i], J: place[c], V: vals[k]})
		}
	}
	return linear.FromEntries(n*n, n*n, e)
}

// box returns the 7-point operator on n x n x n points.
func box(n int) *linear.CSR {
	var e []linear.Entry
	for i := 0; i < n*n*n; i++ {
		e = append(e, linear.Entry{I: i, J: i, V: 6})
		for _, d := range [3]int{1, n, n * n} {
			if i%(d*n) >= d {
				e = append(e, linear.Entry{I: i, J: i - d, V: -1}, linear.Entry{I: i - d, J: i, V: -1})
			}
		}
	}
	return linear.FromEntries(n*n*n, n*n*n, e)
}

// Shared sweeps give the same bits as those of one thread, on grids in two and
// three dimensions, with fill, and coloured; and they are shared there.
func TestWavesGiveSameBits(t *testing.T) {
	defer linear.SetThreads(1)
	matrices := map[string]*linear.CSR{"plate": plate(210), "box": box(30), "coloured": coloured(180)}
	for name, a := range matrices {
		for _, written := range []string{"ic:0", "ilu:0", "ilu:2", "ilut:0.001,12", "ict:0.001,12", "ilutp:0.001,12", "ssor:1.5", "sor:1.5", "gs"} {
			m, _ := made(t, a, written)
			n := a.NRows
			x, one, two := make([]float64, n), make([]float64, n), make([]float64, n)
			linear.Uniform(x, 1)
			linear.SetThreads(1)
			m.Apply(one, x)
			for _, threads := range []int{2, 3} {
				linear.SetThreads(threads)
				for range 3 {
					clear(two)
					m.Apply(two, x)
					if !slices.Equal(one, two) {
						t.Errorf("%s on %s: %d threads give other bits", written, name, threads)
					}
				}
			}
			if f, ok := m.(*factors); ok && (written == "ic:0" || written == "ilu:0") {
				if f.down == nil || f.up == nil {
					t.Errorf("%s on %s: a sweep is not shared", written, name)
				}
			}
			if got := testing.AllocsPerRun(5, func() { m.Apply(two, x) }); got != 0 {
				t.Errorf("%s on %s: a use allocates %g times", written, name, got)
			}
		}
	}
}

// Whatever the plan, each step awaits what its rows need of other chunks, and
// never a later chunk.
func TestWaveAwaitsWhatItNeeds(t *testing.T) {
	for name, a := range map[string]*linear.CSR{"plate": plate(70), "box": box(13), "coloured": coloured(50), "random": unsymmetric(4000)} {
		for _, back := range []bool{false, true} {
			low := a
			if back {
				low = a.Transpose()
			}
			cols := func(i int) []int32 {
				c, _ := low.Row(i)
				at, _ := slices.BinarySearch(c, int32(i))
				if back {
					return c[at+1:]
				}
				return c[:at]
			}
			p := &plan{n: a.NRows, back: back, cols: cols}
			p.cut()
			if !p.connect() {
				continue
			}
			for c := 0; c+1 < len(p.bounds); c++ {
				have := map[int]int{}
				for q := p.bounds[c]; q < p.bounds[c+1]; q++ {
					s := p.first[c] + (q-p.bounds[c])/stepRows
					for _, w := range p.awaits[p.ptr[s]:p.ptr[s+1]] {
						if int(w.chunk) >= c {
							t.Fatalf("%s: chunk %d awaits %d", name, c, w.chunk)
						}
						have[int(w.chunk)] = max(have[int(w.chunk)], int(w.steps))
					}
					for _, j := range p.needs(q) {
						r := p.place(int(j))
						d, _ := slices.BinarySearch(p.bounds, r+1)
						d--
						if d != c && p.bounds[d]+have[d]*stepRows <= r {
							t.Fatalf("%s: place %d needs %d, chunk %d is awaited up to %d steps", name, q, r, d, have[d])
						}
					}
				}
			}
		}
	}
}

// A chain cannot be shared.
func TestChainIsNotShared(t *testing.T) {
	m, _ := made(t, line(40000, -1, 2, -1), "ic:0")
	if f := m.(*factors); f.down != nil || f.up != nil {
		t.Errorf("a chain is shared, gain %g", f.down.speedup)
	}
}
