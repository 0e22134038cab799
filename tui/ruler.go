package tui

import "math"

// ruler maps values to columns: by decades where they are positive and spread
// over more than two, else evenly.
type ruler struct {
	from, to float64
	log      bool
}

func rulerOf(list []float64) (ruler, bool) {
	var r ruler
	any := false
	for _, v := range list {
		if !finite(v) {
			continue
		}
		if !any {
			r.from, r.to, any = v, v, true
		}
		r.from, r.to = math.Min(r.from, v), math.Max(r.to, v)
	}
	r.log = r.from > 0 && r.to > 100*r.from
	if r.log {
		r.from, r.to = math.Pow(10, math.Floor(math.Log10(r.from))), math.Pow(10, math.Ceil(math.Log10(r.to)))
	}
	return r, any
}

// place maps a value to 0..1.
func (r ruler) place(v float64) float64 {
	switch {
	case !(r.to > r.from):
		return 0.5
	case r.log:
		return math.Log(v/r.from) / math.Log(r.to/r.from)
	}
	return (v - r.from) / (r.to - r.from)
}

// base is the axis and its labels, w columns and a margin wide.
func (r ruler) base(w, margin int, g glyphs) []string {
	f := frames[g]
	axis := newCanvas(w+margin, 1)
	labels := newCanvas(w+margin, 1)
	for x := range w {
		axis.set(margin+x, 0, f.base, plain)
	}
	axis.set(margin-1, 0, f.corner, plain)
	free := 0
	for _, v := range r.ticks(w) {
		x := columnOf(r.place(v), w)
		axis.set(margin+x, 0, f.tick, plain)
		text := sci(v)
		if r.log {
			text = power(v)
		}
		at := max(min(margin+x-len(text)/2, w+margin-len(text)), 0)
		if at >= free {
			labels.write(at, 0, text, plain)
			free = at + len(text) + 1
		}
	}
	return []string{axis.line(0, false), labels.line(0, false)}
}

// ticks are the decades, or five even steps.
func (r ruler) ticks(w int) []float64 {
	var out []float64
	if !r.log {
		for i := range 5 {
			v := r.from + float64(i)/4*(r.to-r.from)
			if math.Abs(v) < 1e-9*(r.to-r.from) {
				v = 0
			}
			out = append(out, v)
			if r.to == r.from {
				break
			}
		}
		return out
	}
	a, b := int(math.Round(math.Log10(r.from))), int(math.Round(math.Log10(r.to)))
	step := max(1, (b-a)*8/max(w, 1)+1)
	for k := a; k <= b; k += step {
		out = append(out, math.Pow(10, float64(k)))
	}
	return out
}
