package inspect

import (
	"context"
	"math"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

// A saddle system of two fields: u with the one-dimensional Laplacian times
// 1000, p with no diagonal at all, coupled by one entry a row.
func TestFields(t *testing.T) {
	const half = 12
	var e []linear.Entry
	of, b := make([]int32, 2*half), make([]float64, 2*half)
	for i := range half {
		p := half + i
		of[p], b[i], b[p] = 1, 3, 4
		e = append(e, linear.Entry{I: i, J: i, V: 2000}, linear.Entry{I: i, J: p, V: 1}, linear.Entry{I: p, J: i, V: 1})
		if i > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1000}, linear.Entry{I: i - 1, J: i, V: -1000})
		}
	}
	s := linear.System{A: linear.FromEntries(2*half, 2*half, e), B: b, Digits: 17, Fields: []string{"u", "p"}, FieldOf: of}
	f, err := Inspect(context.Background(), s, nil)
	if err != nil {
		t.Fatal(err)
	}
	if len(f.Fields) != 2 {
		t.Fatalf("%d fields", len(f.Fields))
	}
	u, p := f.Fields[0], f.Fields[1]
	if u.Name != "u" || u.Rows != half || u.DiagPositive != half || u.RowNorm.Min != 2000 || !u.Coupled ||
		u.Block.Answer != Yes || u.Block.Certainty != Proved || math.Abs(u.RHSNorm-3*math.Sqrt(half)) > 1e-12 {
		t.Errorf("u: %+v", u)
	}
	if p.DiagZero != half || p.RowNorm.Max != 1 || p.RowNorm.MaxRow < half || p.Block.Answer != No || p.Block.Certainty != Proved {
		t.Errorf("p: %+v", p)
	}
}

// The block of one field is indefinite although its diagonal is positive: the
// rows of the file that carry the direction are named.
func TestIndefiniteField(t *testing.T) {
	m := linear.FromEntries(4, 4, []linear.Entry{{I: 0, J: 0, V: 1}, {I: 1, J: 1, V: 1}, {I: 1, J: 3, V: 2}, {I: 3, J: 1, V: 2},
		{I: 2, J: 2, V: 1}, {I: 3, J: 3, V: 1}})
	s := linear.System{A: m, B: make([]float64, 4), Digits: 17, Fields: []string{"u", "p"}, FieldOf: []int32{0, 1, 0, 1}}
	f, err := Inspect(context.Background(), s, nil)
	if err != nil {
		t.Fatal(err)
	}
	u, p := f.Fields[0], f.Fields[1]
	if u.Block.Answer != Yes || u.Coupled || p.Block.Answer != No || !strings.Contains(p.Block.Why, "x'Ax/x'x = -1") {
		t.Errorf("u %+v\np %+v", u, p)
	}
	for _, r := range p.Block.Rows {
		if r != 1 && r != 3 {
			t.Errorf("rows %v, want 1 and 3", p.Block.Rows)
		}
	}
}
