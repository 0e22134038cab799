package run

import (
	"math"

	"dwindle/engine/spectrum"
	"dwindle/engine/trace"
)

const (
	errorGrid = 64   // energy errors are told at each of the first iterations,
	errorStep = 1.03 // then at steps of this ratio
	below     = 0.9  // of the smallest settled Ritz value, taken as a lower bound of the spectrum
)

// tellErrors writes the energy errors at growing iterations, as far as they
// are trusted, relative to the first.
func (t *Trial) tellErrors() {
	mu, proved := t.smallest()
	e := spectrum.EnergyErrors(t.hist.Alphas, t.hist.Betas, mu)
	if len(e.Lower) < len(t.hist.Alphas) {
		e.Trusted = 0 // A or M is not definite: there is no such norm
	}
	if e.Trusted == 0 {
		t.mu.Lock()
		t.hist.EnergyErrors = nil
		t.mu.Unlock()
		return
	}
	low0, high0 := e.Lower[0], e.Upper[0]
	if math.IsNaN(high0) {
		high0 = low0
	}
	var out []trace.EnergyError
	for k, next := 0, 0; k < e.Trusted; k++ {
		if k < next {
			continue
		}
		next = max(k+1, int(float64(k)*errorStep))
		if k < errorGrid {
			next = k + 1
		}
		out = append(out, trace.EnergyError{Iter: k, Lower: e.Lower[k] / high0, Upper: e.Upper[k] / low0})
	}
	t.mu.Lock()
	t.hist.EnergyErrors, t.hist.EnergyProved = out, proved
	t.mu.Unlock()
}

// smallest returns a lower bound of the spectrum of M⁻¹A: a proved one of A
// where it is known and there is no M, else an estimate from the smallest Ritz
// value once it has settled, or NaN.
func (t *Trial) smallest() (mu float64, proved bool) {
	if t.limits.Smallest > 0 && t.method.Precond.Name == "none" && t.back == nil {
		return t.limits.Smallest, true
	}
	if c := t.hist.Condition; c.Settled && !c.Negative {
		return below * c.Smallest, false
	}
	return math.NaN(), false
}
