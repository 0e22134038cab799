package spectrum

import "math"

// resolution is the relative width to which an end is narrowed down.
const resolution = 0x1p-40

// maxPasses bounds the passes of one search; 60 are enough to find the end of
// an interval of any two doubles.
const maxPasses = 64

// searchLow returns the smallest eigenvalue, rounded towards the others. The
// last one found is a good start: by interlacing it can only have fallen.
func (t *Tridiagonal) searchLow(negative int, floor float64) float64 {
	inside := t.minDiag + 4*epsilon*math.Abs(t.minDiag)
	if len(t.c) == 1 {
		return t.minDiag
	}
	if t.last.Order > 0 {
		inside = math.Min(inside, t.low)
	}
	if negative > 0 {
		inside = math.Min(inside, 0)
	}
	outside := -t.radius * (1 + 0x1p-40)
	if t.form == fromCG && negative == 0 {
		outside = 0
	}
	return t.search(inside, outside, floor, func(below int) bool { return below > 0 })
}

// searchHigh returns the largest eigenvalue, rounded towards the others.
func (t *Tridiagonal) searchHigh(floor float64) float64 {
	inside := t.maxDiag - 4*epsilon*math.Abs(t.maxDiag)
	k := len(t.c)
	if k == 1 {
		return t.maxDiag
	}
	if t.last.Order > 0 {
		inside = math.Max(inside, t.high)
	}
	return t.search(inside, t.radius*(1+0x1p-40), floor, func(below int) bool { return below < k })
}

// search narrows down the end of the spectrum between inside, beyond which
// lies an eigenvalue, and outside, beyond which lies none, and returns the
// inner bound.
func (t *Tridiagonal) search(inside, outside, floor float64, more func(below int) bool) float64 {
	for pass := 0; pass < maxPasses; pass++ {
		if math.Abs(outside-inside) <= math.Max(resolution*math.Abs(inside), floor) {
			break
		}
		points := between(inside, outside)
		if pass == 0 && inside != 0 {
			points = near(inside, outside)
		}
		for p, below := range t.below(points) {
			if !more(below) {
				outside = points[p]
				break
			}
			inside = points[p]
		}
	}
	return inside
}

// near gives points close to inside, for an end that hardly moved.
func near(inside, outside float64) (p [probes]float64) {
	for i, step := range [probes]float64{resolution, 0x1p-30, 0x1p-20, 0x1p-10} {
		s := step * math.Abs(inside)
		p[i] = inside + math.Copysign(math.Min(s, step*math.Abs(outside-inside)), outside-inside)
	}
	return p
}

// between gives points that split the interval evenly: by ratio where its
// ends differ by more than a factor of 16 but not in sign, else by length.
func between(inside, outside float64) (p [probes]float64) {
	ratio := outside / inside
	for i := range p {
		part := float64(i+1) / (probes + 1)
		switch {
		case outside == 0:
			p[i] = inside * math.Ldexp(1, -2<<(2*i))
		case finite(ratio) && (ratio > 16 || ratio > 0 && ratio < 1./16):
			p[i] = inside * math.Pow(ratio, part)
		default:
			p[i] = inside + part*(outside-inside)
		}
	}
	return p
}
