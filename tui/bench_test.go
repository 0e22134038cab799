package tui

import "testing"

// One frame of eight trials with 2000 records each: what a tick costs.
func BenchmarkFrame(b *testing.B) {
	f := newFake(8, still(12.3))
	m := screenOf(fixed{f, f.Snapshot()}, 120, 40, "dot")
	m.on = true
	for b.Loop() {
		m.looked = false
		m.look()
		m.View()
	}
}
