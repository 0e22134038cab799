package run

import (
	"strings"
	"testing"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// The pivot that fails is told in the rows and by the labels of the file, also
// where a preparation has moved them: a chain whose row 3 has a zero on its
// diagonal, reordered.
func TestBreakdownNamesTheRowOfTheFile(t *testing.T) {
	const n = 9
	var e []linear.Entry
	labels := make([]string, n)
	for i := range n {
		d := 4.0
		if i == 2 {
			d = -4
		}
		labels[i] = string(rune('a' + i))
		e = append(e, linear.Entry{I: i, J: i, V: d})
		if j := (i + 4) % n; j != i {
			e = append(e, linear.Entry{I: i, J: j, V: -1}, linear.Entry{I: j, J: i, V: -1})
		}
	}
	b := make([]float64, n)
	linear.Uniform(b, 1)
	s := linear.System{A: linear.FromEntries(n, n, e), B: b, Labels: labels}
	bench := NewBench(s, limits(1e-8, 100), 0, nil)
	for _, pairing := range []string{"cg+cholesky", "rcm/cg+cholesky"} {
		m, err := Parse(pairing)
		if err != nil {
			t.Fatal(err)
		}
		bench.Add(m)
	}
	go bench.Run(t.Context())
	bench.WaitEnded(t.Context())
	for _, tr := range bench.Trials() {
		h := tr.History()
		if h.Stop != trace.BrokeDown || !strings.Contains(h.Reason, "row 3 = c") || len(h.Notes.Broke) == 0 || h.Notes.Broke[0].Row != 2 {
			t.Errorf("%s: %s, %s, %+v; want row 3 = c", h.Pairing, h.Stop, h.Reason, h.Notes.Broke)
		}
	}
}
