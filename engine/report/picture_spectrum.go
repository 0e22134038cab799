package report

import (
	"fmt"
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// strip is one line of the picture of spectra: what is known of one operator.
type strip struct {
	label     string
	low, high float64 // the ends
	ticks     []float64
	role      uint8
}

// strips lists the spectra of the system, then those the trials have shown.
func strips(d Document) []strip {
	var out []strip
	if d.Facts != nil && d.Facts.Study != nil {
		s := d.Facts.Study
		for _, x := range []*inspect.Spectrum{s.Raw, s.Equilibrated, s.Jacobi, s.Rest} {
			if x != nil && finite(x.Smallest) && finite(x.Largest) {
				out = append(out, strip{valuesOf(d.Facts) + " of " + spectrumLabel(*x, d.Facts), x.Smallest, x.Largest, knownValues(*x, d.Facts), inkText})
			}
		}
	}
	for i, t := range d.Trials {
		if s, ok := ritzStrip(i, t); ok {
			out = append(out, s)
		}
		if s, ok := harmonicStrip(i, t); ok {
			out = append(out, s)
		}
	}
	return out
}

// harmonicStrip holds the harmonic Ritz values of an Arnoldi method where all
// are real.
func harmonicStrip(i int, t trace.History) (strip, bool) {
	s := strip{low: math.Inf(1), high: math.Inf(-1), role: curveInk(i)}
	for _, z := range t.Harmonic {
		if x := real(z); finite(x) {
			s.low, s.high, s.ticks = min(s.low, x), max(s.high, x), append(s.ticks, x)
		}
	}
	s.label = fmt.Sprintf("%c %s, harmonic Ritz values: %s to %s", digit(i), plain(t.Pairing), short(s.low), short(s.high))
	return s, len(s.ticks) > 0 && !offAxis(t.Harmonic)
}

func spectrumLabel(x inspect.Spectrum, f *inspect.Facts) string {
	low, _ := f.LowEnd(x)
	s := fmt.Sprintf("%s: %s to %s", plain(x.Of), short(low), short(x.Largest))
	if finite(x.Condition) && x.Condition > 0 {
		s += ", condition " + short(x.Condition)
	}
	if x.Exact {
		return s + ", all values"
	}
	return s + ", " + plain(string(x.Certainty))
}

// knownValues are the eigenvalues that are known of a symmetric operator, the
// singular values of another one.
func knownValues(x inspect.Spectrum, f *inspect.Facts) []float64 {
	if len(x.Values) == 0 || f.Symmetric.Answer != inspect.Yes {
		return append(append([]float64{}, x.Low...), x.High...)
	}
	var out []float64
	for _, z := range x.Values {
		out = append(out, real(z))
	}
	return out
}

// ritzStrip is what the coefficients of a trial say about M⁻¹A.
func ritzStrip(i int, t trace.History) (strip, bool) {
	c := t.Condition
	if c.Of == "" || !finite(c.Smallest) || !finite(c.Largest) || c.Smallest == 0 && c.Largest == 0 {
		return strip{}, false
	}
	s := strip{label: fmt.Sprintf("%c %s, Ritz values of %s: %s to %s", digit(i), plain(t.Pairing), plain(c.Of),
		short(c.Smallest), short(c.Largest)), low: c.Smallest, high: c.Largest, role: curveInk(i)}
	for _, l := range t.Locks {
		s.ticks = append(s.ticks, l.Value)
	}
	if len(t.Locks) > 0 {
		s.label += fmt.Sprintf(", %d locked", len(t.Locks))
	}
	return s, true
}

// The shape of a strip, in points.
const (
	stripHeight = 38
	stripLabel  = 9.5
)

// spectrumPicture draws each operator's spectrum as a bar from end to end,
// with a tick for each value known, all on one axis.
func spectrumPicture(d Document, w vg.Length) (picture, bool) {
	list := strips(d)
	var values []float64
	for _, s := range list {
		values = append(append(values, s.low, s.high), s.ticks...)
	}
	r, ok := newReach(values)
	if !ok {
		return picture{}, false
	}
	h := vg.Length(stripHeight*len(list) + 30)
	return picture{w, h, func(c draw.Canvas) {
		p := newFrame(r.ticks(int(w/60)), nil)
		p.HideY()
		p.X.Min, p.X.Max, p.X.Scale = r.low, r.high, r
		p.Y.Min, p.Y.Max = 0, float64(len(list))
		p.Add(painter(func(c draw.Canvas, p *plot.Plot) {
			for i, s := range list {
				s.draw(c, p, c.Y(p.Y.Norm(float64(len(list)-i))))
			}
		}))
		p.Draw(draw.Crop(c, 14, -14, 2, -2))
	}}, true
}

// draw paints the strip below the height top.
func (s strip) draw(c draw.Canvas, p *plot.Plot, top vg.Length) {
	c.FillText(lettering(stripLabel, s.role, draw.XLeft, draw.YTop), vg.Point{X: c.Min.X, Y: top - 4},
		clip(s.label, int((c.Max.X-c.Min.X)/4.9)))
	const up, down = 19, 33
	x0, x1 := c.X(p.X.Norm(s.low)), c.X(p.X.Norm(s.high))
	c.FillPolygon(ink{s.role, 70}, []vg.Point{{X: x0, Y: top - up}, {X: x1, Y: top - up}, {X: x1, Y: top - down}, {X: x0, Y: top - down}})
	seen := map[int]bool{}
	for _, v := range append([]float64{s.low, s.high}, s.ticks...) {
		x := c.X(p.X.Norm(v))
		if at := int(x * 2); c.ContainsX(x) && !seen[at] {
			seen[at] = true
			c.StrokeLine2(stroke(solid(s.role), 0.8, nil), x, top-up, x, top-down)
		}
	}
}
