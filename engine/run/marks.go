package run

import (
	"math"

	"dwindle/engine/trace"
)

// energyDelay is the delay, in iterations, of the energy-norm estimate.
const energyDelay = 4

// marks notes where each common stopping rule first held, from readings
// alone. For the conjugate gradient family the preconditioned and energy
// norms follow from α and β: rᵀM⁻¹r falls by the product of the β
// (Hestenes and Stiefel 1952), and ‖e_k‖_A² − ‖e_{k+d}‖_A² is the sum of
// α_j r_jᵀz_j (Strakoš and Tichý 2002).
type marks struct {
	list    []trace.StopMark
	lanczos bool
	rz      float64 // r_kᵀz_k relative to the first
	energy  float64 // Σ α_j r_jᵀz_j so far
	recent  [energyDelay]float64
	steps   int
}

func newMarks(lanczos bool) marks {
	m := marks{lanczos: lanczos, rz: 1}
	for _, rule := range []string{"rhs", "initial", "preconditioned", "backward", "energy"} {
		m.list = append(m.list, trace.StopMark{Rule: rule, Iter: -1, True: math.NaN()})
	}
	return m
}

// numbers are what the rules are judged by at one iteration: own norms.
type numbers struct {
	r, b, r0  float64 // own residual norm, that of b, the first one
	backward  float64 // own estimate of the backward error; NaN before an audit
	precond   bool    // the own norm is the preconditioned one
	normal    bool    // the own norm is that of the normal equations
	alpha     float64
	beta      float64
	firstStep bool // no step yet
}

// see judges one reading and returns whether a rule held for the first time.
func (m *marks) see(iter int, tol float64, v numbers) bool {
	precond, energy := math.NaN(), math.NaN()
	if v.precond {
		precond = over(v.r, v.b)
	}
	if m.lanczos && !v.firstStep {
		e := v.alpha * m.rz
		m.energy += e
		m.recent[m.steps%energyDelay] = e
		m.steps++
		m.rz *= v.beta
		if !v.precond {
			precond = math.Sqrt(m.rz)
		}
		if m.steps > energyDelay && m.energy > 0 {
			sum := 0.0
			for _, q := range m.recent {
				sum += q
			}
			energy = math.Sqrt(sum / m.energy)
		}
	}
	twoB, two0 := over(v.r, v.b), over(v.r, v.r0)
	if v.precond || v.normal {
		twoB, two0 = math.NaN(), math.NaN()
	}
	new := false
	for i, x := range [...]float64{twoB, two0, precond, v.backward, energy} {
		if x <= tol && m.list[i].Iter < 0 {
			m.list[i].Iter = iter
			new = true
		}
	}
	return new
}

// audited fills in the true residual of the marks set at this iteration and
// returns a copy for the history.
func (m *marks) audited(iter int, rel float64) []trace.StopMark {
	for i := range m.list {
		if m.list[i].Iter == iter {
			m.list[i].True = rel
		}
	}
	return append([]trace.StopMark(nil), m.list...)
}
