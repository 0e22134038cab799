package precond

import "math/bits"

// plan finds the chunks of a wave and what they wait for. Rows are counted by
// place: in the order of the sweep.
type plan struct {
	n      int
	back   bool
	cols   func(i int) []int32
	work   int   // rows·3 + entries
	bounds []int // of the chunks, by place
	first  []int // first step of each chunk
	awaits []await
	ptr    []int
	cost   []int // of each step
}

// needs returns the columns that the row at a place needs, and place returns
// where a column stands.
func (p *plan) needs(place int) []int32 { return p.cols(p.place(place)) }

func (p *plan) place(i int) int {
	if p.back {
		return p.n - 1 - i
	}
	return i
}

// gap returns the distance from the row at a place to the nearest row it
// needs; n where it needs none.
func (p *plan) gap(place int, cols []int32) int {
	switch {
	case len(cols) == 0:
		return p.n
	case p.back:
		return place - p.place(int(cols[0]))
	}
	return place - int(cols[len(cols)-1])
}

// cut finds the bounds of the chunks: rows that need none of the 2^k before
// them, for the k that makes chunks short against that distance, yet long
// enough to be worth the wait.
func (p *plan) cut() {
	var count [64]int // rows by the bits of their gap
	for q := 0; q < p.n; q++ {
		cols := p.needs(q)
		p.work += 3 + len(cols)
		count[bits.Len(uint(p.gap(q, cols)))]++
	}
	best, far := 0, 0
	for k := 62; k >= 6; k-- {
		far += count[k+1] // rows with a gap of at least 2^k
		if far < 4 || 4<<min(k, 40) < p.n/far {
			continue
		}
		if mean := max(p.n/far, min(512, 1<<min(k, 40))); best == 0 || mean >= 256 {
			best = k
		}
	}
	p.bounds = append(p.bounds, 0)
	if best > 0 {
		p.bind(1 << min(best, 40))
	}
	p.bounds = append(p.bounds, p.n)
}

func (p *plan) bind(least int) {
	last, short := 0, min(least, 512)
	for q := 1; q < p.n; q++ {
		if q-last >= short && p.gap(q, p.needs(q)) >= least {
			p.bounds = append(p.bounds, q)
			last = q
		}
	}
}

// connect finds what each step waits for; false where that is too much.
func (p *plan) connect() bool {
	chunks := len(p.bounds) - 1
	of := make([]int32, p.n) // chunk of each place
	for c := 0; c < chunks; c++ {
		for q := p.bounds[c]; q < p.bounds[c+1]; q++ {
			of[q] = int32(c)
		}
	}
	met := make([]struct{ by, steps, at int32 }, chunks) // what chunk by awaits, and where that is written
	for c := range met {
		met[c].by = -1
	}
	p.ptr = append(p.ptr, 0)
	for c := 0; c < chunks; c++ {
		p.first = append(p.first, len(p.cost))
		for lo := p.bounds[c]; lo < p.bounds[c+1]; lo += stepRows {
			from, cost := len(p.awaits), 20
			for q := lo; q < min(lo+stepRows, p.bounds[c+1]); q++ {
				cols := p.needs(q)
				cost += 3 + len(cols)
				for _, j := range cols {
					r := p.place(int(j))
					d := of[r]
					steps := int32((r-p.bounds[d])/stepRows + 1)
					m := &met[d]
					if int(d) == c || (m.by == int32(c) && m.steps >= steps) {
						continue
					}
					if m.by == int32(c) && int(m.at) >= from {
						p.awaits[m.at].steps = steps
					} else {
						m.at = int32(len(p.awaits))
						p.awaits = append(p.awaits, await{d, steps})
					}
					m.by, m.steps = int32(c), steps
				}
			}
			p.ptr, p.cost = append(p.ptr, len(p.awaits)), append(p.cost, cost)
			if len(p.awaits) > 1000+p.n/16 {
				return false
			}
		}
	}
	p.first = append(p.first, len(p.cost))
	return true
}

// gain returns how many times faster so many threads are than one, if each
// chunk is taken by the thread that is free first.
func (p *plan) gain(threads int) float64 {
	done, free := make([]int, len(p.cost)), make([]int, threads)
	total, last := 0, 0
	for c := 0; c+1 < len(p.bounds); c++ {
		t := 0
		for k := range free {
			if free[k] < free[t] {
				t = k
			}
		}
		now := free[t] + 50
		for s := p.first[c]; s < p.first[c+1]; s++ {
			for _, a := range p.awaits[p.ptr[s]:p.ptr[s+1]] {
				now = max(now, done[p.first[a.chunk]+int(a.steps)-1]+60)
			}
			now += p.cost[s]
			total += p.cost[s]
			done[s] = now
		}
		free[t], last = now, max(last, now)
	}
	return float64(total) / float64(max(last, 1))
}
