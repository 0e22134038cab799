package run

import (
	"dwindle/engine/krylov"
	"dwindle/engine/spectrum"
)

// longestCycle bounds the cycles whose eigenvalues are looked at.
const longestCycle = 120

// seeCycle keeps the harmonic Ritz values of whole cycles at growing counts.
func (t *Trial) seeCycle() {
	s, ok := t.solver.(krylov.Cycler)
	if !ok {
		return
	}
	hbar, m := s.Cycle()
	if hbar == nil {
		return
	}
	t.learned.cycles++
	if t.learned.cycles < t.learned.nextAt || m > longestCycle {
		return
	}
	t.learned.nextAt = t.learned.cycles + max(1, t.learned.cycles/2)
	values := spectrum.NewHarmonic(m).Values(hbar)
	t.mu.Lock()
	t.hist.Harmonic = values
	t.mu.Unlock()
}
