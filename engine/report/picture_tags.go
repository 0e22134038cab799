package report

import (
	"math"

	"gonum.org/v1/plot/vg"
)

// The room that the tag of a curve takes, in points, and how far it may be
// moved from the end of its curve.
const (
	tagWide, tagHigh = vg.Length(9), vg.Length(11)
	tagRings         = 8
)

// tagSpots keeps where tags of curves stand, so that no two overlap.
type tagSpots struct {
	within vg.Rectangle
	taken  []vg.Point // centres
}

// place returns the free centre nearest to a wanted one, and keeps it; the
// wanted one where nothing near is free.
func (s *tagSpots) place(at vg.Point) vg.Point {
	best, least := at, math.Inf(1)
	for down := -tagRings; down <= tagRings; down++ {
		for right := -tagRings; right <= tagRings; right++ {
			move := vg.Point{X: vg.Length(right) * tagWide, Y: vg.Length(down) * tagHigh}
			q := at.Add(move)
			if far := math.Hypot(float64(move.X), float64(move.Y)); far < least && s.free(q) {
				best, least = q, far
			}
		}
	}
	s.taken = append(s.taken, best)
	return best
}

// free says whether a tag about q lies on the picture and touches no other.
func (s *tagSpots) free(q vg.Point) bool {
	if q.X-tagWide/2 < s.within.Min.X || q.X+tagWide/2 > s.within.Max.X ||
		q.Y-tagHigh/2 < s.within.Min.Y || q.Y+tagHigh/2 > s.within.Max.Y {
		return false
	}
	for _, t := range s.taken {
		if abs(t.X-q.X) < 0.99*tagWide && abs(t.Y-q.Y) < 0.99*tagHigh {
			return false
		}
	}
	return true
}

func abs(x vg.Length) vg.Length { return max(x, -x) }
