package load

import (
	"bytes"
	"context"
	"math"
	"math/rand/v2"
	"testing"

	"dwindle/engine/linear"
)

// What linear writes reads back bit for bit, with 17 digits.
func TestWrittenReadsBack(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for _, symmetric := range []bool{false, true} {
		var entries []linear.Entry
		for range 200 {
			i, j, v := r.IntN(50), r.IntN(50), math.Ldexp(r.NormFloat64(), r.IntN(200)-100)
			entries = append(entries, linear.Entry{I: i, J: j, V: v})
			if symmetric && i != j {
				entries = append(entries, linear.Entry{I: j, J: i, V: v})
			}
		}
		a := linear.FromEntries(50, 50, entries)
		var b bytes.Buffer
		if err := linear.WriteMatrixMarket(&b, a, symmetric, []string{"random"}); err != nil {
			t.Fatal(err)
		}
		s, err := Read(context.Background(), "a.mtx", &b, int64(b.Len()), nil)
		if err != nil {
			t.Fatal(err)
		}
		sameMatrix(t, s.Matrix(), a)
		if s.Digits != 17 || s.Source.Symmetric != symmetric {
			t.Errorf("digits %d, symmetric %v", s.Digits, s.Source.Symmetric)
		}
	}
	v := []float64{1, 0.1, -1e-300, math.MaxFloat64, math.SmallestNonzeroFloat64, 1.0 / 3}
	var b bytes.Buffer
	if err := linear.WriteVector(&b, v, nil); err != nil {
		t.Fatal(err)
	}
	got, _, err := VectorFile(put(t, "v.mtx", b.String()), len(v))
	if err != nil {
		t.Fatal(err)
	}
	for i := range v {
		if got[i] != v[i] {
			t.Errorf("entry %d: %v; want %v", i, got[i], v[i])
		}
	}
}
