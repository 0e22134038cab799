package prepare

// distances is a binary heap of rows by distance; equal ones by row, so that
// the order is always the same.
type distances []distance

type distance struct {
	d float64
	i int32
}

func (x distance) less(y distance) bool { return x.d < y.d || x.d == y.d && x.i < y.i }

func (h *distances) push(d float64, i int32) {
	*h = append(*h, distance{d, i})
	a := *h
	for k := len(a) - 1; k > 0; {
		up := (k - 1) / 2
		if !a[k].less(a[up]) {
			return
		}
		a[k], a[up] = a[up], a[k]
		k = up
	}
}

func (h *distances) pop() (float64, int32) {
	a := *h
	first := a[0]
	last := len(a) - 1
	a[0] = a[last]
	a = a[:last]
	*h = a
	for k := 0; ; {
		c := 2*k + 1
		if c >= len(a) {
			break
		}
		if c+1 < len(a) && a[c+1].less(a[c]) {
			c++
		}
		if !a[c].less(a[k]) {
			break
		}
		a[k], a[c] = a[c], a[k]
		k = c
	}
	return first.d, first.i
}
