package report

import (
	"math"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// cloud is a set of points of the complex plane.
type cloud struct {
	label  string
	values []complex128
	role   uint8
}

// clouds lists what is known of eigenvalues off the real axis: those of A
// where all are known, and the harmonic Ritz values of the trials; those that
// lie on the axis are among the strips.
func clouds(d Document) []cloud {
	var out []cloud
	if d.Facts != nil && d.Facts.Study != nil && d.Facts.Study.Raw != nil {
		if v := d.Facts.Study.Raw.Values; offAxis(v) {
			out = append(out, cloud{"eigenvalues of A", v, inkText})
		}
	}
	for i, t := range d.Trials {
		if offAxis(t.Harmonic) {
			out = append(out, cloud{string(digit(i)) + " harmonic Ritz values of " + plain(t.Pairing), t.Harmonic, curveInk(i)})
		}
	}
	return out
}

func offAxis(values []complex128) bool {
	for _, z := range values {
		if imag(z) != 0 {
			return true
		}
	}
	return false
}

// planePicture draws the clouds in the complex plane.
func planePicture(d Document, w, h vg.Length) (picture, bool) {
	list := clouds(d)
	box := [4]float64{math.Inf(1), math.Inf(-1), math.Inf(1), math.Inf(-1)}
	for _, cl := range list {
		for _, z := range cl.values {
			if finite(real(z)) && finite(imag(z)) {
				box = [4]float64{min(box[0], real(z)), max(box[1], real(z)), min(box[2], imag(z)), max(box[3], imag(z))}
			}
		}
	}
	if box[0] > box[1] {
		return picture{}, false
	}
	pad := 0.06 * max(box[1]-box[0], box[3]-box[2], 1e-300)
	box[0], box[1], box[2], box[3] = min(box[0], 0)-pad, max(box[1], 0)+pad, min(box[2], 0)-pad, max(box[3], 0)+pad
	return picture{w, h, func(c draw.Canvas) {
		p := newFrame(roundTicks(box[0], box[1], 5), roundTicks(box[2], box[3], 5))
		p.X.Min, p.X.Max, p.Y.Min, p.Y.Max = box[0], box[1], box[2], box[3]
		p.Add(painter(func(c draw.Canvas, p *plot.Plot) {
			origin := place(c, p, point{})
			axes := stroke(solid(inkFaint), 0.8, nil)
			c.StrokeLine2(axes, origin.X, c.Min.Y, origin.X, c.Max.Y)
			c.StrokeLine2(axes, c.Min.X, origin.Y, c.Max.X, origin.Y)
			for _, cl := range list {
				cl.draw(c, p)
			}
		}))
		p.Draw(room(c))
	}}, true
}

// draw paints the points, those that fall on one place once.
func (cl cloud) draw(c draw.Canvas, p *plot.Plot) {
	seen := map[[2]int]bool{}
	for _, z := range cl.values {
		if !finite(real(z)) || !finite(imag(z)) {
			continue
		}
		at := place(c, p, point{real(z), imag(z)})
		key := [2]int{int(at.X * 2), int(at.Y * 2)}
		if seen[key] {
			continue
		}
		seen[key] = true
		if cl.role == inkText {
			dot(c, at, 1.3, ink{cl.role, 190})
		} else {
			ring(c, at, 2.6, cl.role)
		}
	}
}
