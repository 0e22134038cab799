package load

import (
	"bytes"
	"context"
	"errors"
	"runtime"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

// allocated returns the bytes that f allocates.
func allocated(f func()) uint64 {
	var before, after runtime.MemStats
	runtime.ReadMemStats(&before)
	f()
	runtime.ReadMemStats(&after)
	return after.TotalAlloc - before.TotalAlloc
}

// fuzzRead reads data as a system: no panic, no memory out of proportion to
// the bytes that are there, and either a sound matrix or an error with its
// line. A size is given, and not given.
func fuzzRead(t *testing.T, data []byte) {
	if bytes.HasPrefix(data, []byte{0x1f, 0x8b}) {
		return // how much a compressed file holds is not known from its size
	}
	var s [2]linear.System
	var err [2]error
	for k, size := range []int64{int64(len(data)), -1} {
		used := allocated(func() {
			s[k], err[k] = Read(context.Background(), "fuzz", bytes.NewReader(data), size, nil)
		})
		// Two row pointer arrays of the largest order that is always read, buffers, and the entries.
		if limit := uint64(2*8*emptyOrder + 1<<20 + 200*len(data)); used > limit {
			t.Fatalf("%d bytes allocated for %d bytes of text; %d are allowed", used, len(data), limit)
		}
	}
	if (err[0] == nil) != (err[1] == nil) {
		t.Fatalf("with its size known: %v; unknown: %v", err[0], err[1])
	}
	if err[0] != nil {
		var e *Error
		if !errors.As(err[0], &e) || e.Line < 1 || e.Text == "" {
			t.Fatalf("error %#v", err[0])
		}
		return
	}
	checkCSR(t, s[0].Matrix())
	if d := s[0].Digits; d < 1 || d > 17 {
		t.Fatalf("%d digits", d)
	}
	sameMatrix(t, s[1].Matrix(), s[0].Matrix())
}

func FuzzMatrixMarket(f *testing.F) {
	for _, s := range []string{
		mm + "2 2 3\n1 1 1.5\n2 1 -2\n2 2 0.3333\n",
		mmBanner("coordinate real symmetric") + "3 3 4\n1 1 1\n2 1 2e3\n3 2 3\n3 3 4\n",
		mmBanner("coordinate real symmetric") + "3 3 3\n1 2 1\n% c\n\n3 1 1\n2 1 1\n",
		mmBanner("coordinate integer skew-symmetric") + "2 2 1\n2 1 7\n",
		mmBanner("coordinate pattern general") + "2 2 2\n1 2\n1 2\n",
		mmBanner("array real general") + "2 2\n1\n2\n0\n4\n",
		mmBanner("array real skew-symmetric") + "3 3\n1\n2\n3\n",
		mm + "999999 999999 1000000000000\n1 1 1\n",
		mm + "1048577 1048577 300000\n1 1 1\n",
	} {
		f.Add([]byte(s))
	}
	f.Fuzz(func(t *testing.T, data []byte) {
		fuzzRead(t, data)
		for _, chunk := range []int{1, 7, 40} {
			sameReading(t, data, chunk)
		}
	})
}

func FuzzHarwellBoeing(f *testing.F) {
	i3 := "(26I3)"
	f.Add([]byte(deck([]int{4, 1, 1, 1, 0}, "RSA", 2, 2, 3, [4]string{i3, i3, "(4E20.12)"},
		"  1  3  4", "  1  2  2", "  0.400000000000E+01 -0.100000000000D+01  0.333333333333E+00")))
	f.Add([]byte(deck([]int{3, 1, 1, 1}, "iua", 2, 2, 3, [4]string{i3, i3, i3}, "  1  3  4", "  1  2  2", " 16 -5  9")))
	f.Add([]byte(deck([]int{2, 1, 1, 0}, "psa", 2, 2, 3, [4]string{i3, i3, ""}, "  1  3  4", "  1  2  2")))
	f.Add([]byte(deck([]int{4, 1, 1, 2, 0}, "RUA", 2, 2, 3, [4]string{"(3I1)", "(3I1)", "(1P,2E9.2)"}, "134", "122", "-1.25E+00-3.33E-01", "-7.00E+00")))
	f.Add([]byte(deck([]int{7, 1, 1, 1, 3}, "RSA", 2, 2, 3, [4]string{i3, i3, "(3F5.1)", "(2F5.1)"},
		"FGX                        1             0", "  1  3  4", "  1  2  2", "  4.0 -1.0  3.5", "  1.0 -2.5", "  7.0  8.0", "  7.0  8.0")))
	f.Add([]byte(deck([]int{3, 1, 1, 1}, "rza", 2, 2, 1, [4]string{i3, i3, "(E8.1)"}, "  1  2  2", "  2", " 0.5E+00")))
	f.Fuzz(fuzzRead)
}

func FuzzVector(f *testing.F) {
	f.Add([]byte("1\n2\n3\n"), 3, 0)
	f.Add([]byte("# c\n1 4\n2\t5\n3 6\n"), 3, 2)
	f.Add([]byte(mmBanner("array real general")+"3 2\n1\n2\n3\n4\n5\n6\n"), 3, 2)
	f.Add([]byte(mmBanner("array real general")+"3 0\n"), 3, 0)
	f.Add([]byte(mmBanner("array real general")+"3 9999999\n1\n2\n3\n4\n5\n6\n"), 3, 2)
	f.Fuzz(func(t *testing.T, data []byte, n, col int) {
		if bytes.HasPrefix(data, []byte{0x1f, 0x8b}) || col < 0 || n < 1 {
			return
		}
		var v []float64
		var err error
		used := allocated(func() { v, _, err = readVector("fuzz", bytes.NewReader(data), int64(len(data)), n, col) })
		if limit := uint64(1<<20 + 50*len(data)); used > limit {
			t.Fatalf("%d bytes allocated for %d bytes of text; %d are allowed", used, len(data), limit)
		}
		var e *Error
		if err != nil && (!errors.As(err, &e) || strings.TrimSpace(e.Text) == "" || v != nil) {
			t.Fatalf("%v, error %#v", v, err)
		}
		if err == nil && len(v) != n {
			t.Fatalf("%d numbers; want %d", len(v), n)
		}
	})
}
