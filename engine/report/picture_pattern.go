package report

import (
	"math"

	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
)

// patternPicture draws where the entries of A lie, denser parts darker. cells
// are shares between 0 and 1, first row on top.
func patternPicture(cells [][]float64, side vg.Length) (picture, bool) {
	if len(cells) == 0 || len(cells[0]) == 0 {
		return picture{}, false
	}
	most := 0.0
	for _, row := range cells {
		for _, x := range row {
			if finite(x) {
				most = max(most, x)
			}
		}
	}
	if most <= 0 {
		return picture{}, false
	}
	return picture{side, side, func(c draw.Canvas) {
		cell := (side - 2) / vg.Length(max(len(cells), len(cells[0])))
		for i, row := range cells {
			for j := 0; j < len(row); {
				k := shade(row[j], most)
				end := j + 1
				for end < len(row) && shade(row[end], most) == k {
					end++
				}
				if k > 0 {
					x0, x1 := 1+vg.Length(j)*cell, 1+vg.Length(end)*cell
					y0, y1 := side-1-vg.Length(i)*cell, side-1-vg.Length(i+1)*cell
					c.FillPolygon(ink{inkCurves, k}, []vg.Point{{X: x0, Y: y0}, {X: x1, Y: y0}, {X: x1, Y: y1}, {X: x0, Y: y1}})
				}
				j = end
			}
		}
		c.StrokeLines(stroke(solid(inkFaint), 1, nil), append(box(side/2, side/2, side/2-1, side/2-1), vg.Point{X: 1, Y: 1}))
	}}, true
}

// shade is the density of ink for a share, in 8 steps so that even the
// sparsest part is seen.
func shade(x, most float64) uint8 {
	if !(x > 0) || math.IsInf(x, 0) {
		return 0
	}
	return uint8(59 + 28*math.Round(7*math.Sqrt(min(x/most, 1))))
}
