package prepare

import (
	"context"
	"math"
	"testing"

	"dwindle/engine/linear"
)

// A walk on a line whose rows sum to zero and whose columns do not: yᵀA = 0 for
// the stationary shares 1, 2, 4, … (closed form). Through every preparation that
// moves or scales rows y stays one that the prepared matrix maps to zero from
// the left, and project takes it out of b there.
func TestLeftNullVectorsThroughPreparations(t *testing.T) {
	const n = 7
	var e []linear.Entry
	y := make([]float64, n)
	for i := range n - 1 {
		e = append(e, linear.Entry{I: i, J: i, V: 2}, linear.Entry{I: i, J: i + 1, V: -2},
			linear.Entry{I: i + 1, J: i + 1, V: 1}, linear.Entry{I: i + 1, J: i, V: -1})
	}
	for i := range y {
		y[i] = float64(int(1) << i)
	}
	s := linear.System{A: linear.FromEntries(n, n, e), B: []float64{3, 0, 0, 1, 0, 0, 1}, LeftNull: [][]float64{y}}
	for _, name := range []string{"scale", "match", "rcm", "amd", "nd", "colour", "project"} {
		entry, ok := Lookup(name)
		if !ok {
			t.Fatalf("no preparation %s", name)
		}
		p, back, err := entry.Apply(context.Background(), s, linear.Values{})
		if err != nil {
			t.Fatalf("%s: %v", name, err)
		}
		p.Null, p.LeftNull = nil, CarryLeft(s.LeftNull, back)
		image := make([]float64, n)
		p.Matrix().ApplyT(image, p.LeftNull[0])
		if linear.NormInf(image) > 1e-13*linear.NormInf(p.LeftNull[0]) {
			t.Errorf("%s: A'y = %g", name, image)
		}
		q, _, err := projectEntry.Apply(context.Background(), p, linear.Values{})
		if err != nil {
			t.Errorf("project after %s: %v", name, err)
			continue
		}
		if along := linear.Dot(q.B, p.LeftNull[0]) / linear.Norm2(p.LeftNull[0]); math.Abs(along) > 1e-14 {
			t.Errorf("project after %s leaves %g along y", name, along)
		}
	}
}
