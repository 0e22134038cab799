package report

import (
	"testing"

	"gonum.org/v1/plot/vg"
)

// Curves that end at one point, or in a corner, have tags that do not overlap
// and that stay on the picture.
func TestTagsDoNotOverlap(t *testing.T) {
	for _, at := range []vg.Point{{X: 150, Y: 100}, {X: 299, Y: 1}, {X: 2, Y: 199}} {
		s := tagSpots{within: vg.Rectangle{Max: vg.Point{X: 300, Y: 200}}}
		var seen []vg.Point
		for i := range 20 {
			q := s.place(at)
			if q.X-tagWide/2 < 0 || q.X+tagWide/2 > 300 || q.Y-tagHigh/2 < 0 || q.Y+tagHigh/2 > 200 {
				t.Errorf("tag %d of %v lies at %v", i, at, q)
			}
			for _, p := range seen {
				if abs(p.X-q.X) < 0.98*tagWide && abs(p.Y-q.Y) < 0.98*tagHigh {
					t.Errorf("tags at %v and %v overlap", p, q)
				}
			}
			seen = append(seen, q)
		}
	}
	s := tagSpots{within: vg.Rectangle{Max: vg.Point{X: 300, Y: 200}}}
	if at := (vg.Point{X: 150, Y: 100}); s.place(at) != at {
		t.Error("a tag alone is moved")
	}
}
