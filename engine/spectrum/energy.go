package spectrum

import "math"

// Energy encloses the energy norm of the error of conjugate gradients,
// ‖x − x_k‖_A, in units of √(r₀ᵀM⁻¹r₀). The slices have an entry for each k
// from 0 to the number of steps less one.
type Energy struct {
	Lower []float64 // Gauss: what the later steps took off the error; never above it
	Upper []float64 // Gauss–Radau; NaN where no μ is known, or μ was too large
	// Trusted is how many entries, from the first, have a Lower that is
	// thought to hold three quarters of the square of the error or more.
	Trusted int
}

// EnergyErrors computes both bounds from the coefficients α_j and β_{j+1} of
// all steps so far, in O(k). Lower is, with ρ_j = r_jᵀM⁻¹r_j,
//
//	‖x−x_k‖_A² ≥ Σ_{j≥k} α_j ρ_j
//
// (Hestenes and Stiefel 1952; Golub and Meurant 1994; in finite precision
// Strakoš and Tichý, ETNA 13, 2002), and Upper, for 0 < mu ≤ λ_min, adds
// γ_K ρ_K after the last step K with
//
//	γ_0 = 1/μ,   γ_{j+1} = (γ_j − α_j)/(μ(γ_j − α_j) + β_{j+1})
//
// (Meurant and Tichý, Numer. Algorithms 62, 2013). A mu that is not positive
// gives no upper bound.
func EnergyErrors(alphas, betas []float64, mu float64) Energy {
	k := steps(alphas, betas)
	e := Energy{Lower: make([]float64, k), Upper: make([]float64, k)}
	if k == 0 {
		return e
	}
	terms, rho := make([]float64, k), 1.0 // α_j ρ_j
	gamma := 1 / mu
	if !(mu > 0) {
		gamma = math.NaN()
	}
	for j := range k {
		terms[j] = alphas[j] * rho
		e.Upper[j] = math.Sqrt(gamma * rho)
		rho *= betas[j]
		if rest := gamma - alphas[j]; rest > 0 {
			gamma = rest / (mu*rest + betas[j])
		} else {
			gamma = math.NaN()
		}
	}
	below, above := 0.0, gamma*rho
	for j := k - 1; j >= 0; j-- {
		below, above = below+terms[j], above+terms[j]
		e.Lower[j] = math.Sqrt(below)
		e.Upper[j] = least(e.Upper[j], math.Sqrt(above))
	}
	e.Trusted = trusted(terms)
	return e
}

// steps is how many coefficients, from the first, are those of a definite A
// and M.
func steps(alphas, betas []float64) int {
	k := min(len(alphas), len(betas))
	for j := range k {
		if !(alphas[j] > 0) || !finite(alphas[j]) {
			return j
		}
		if !(betas[j] > 0) || !finite(betas[j]) {
			if betas[j] == 0 {
				return j + 1
			}
			return j
		}
	}
	return k
}

// least is the smaller of two, where NaN is none.
func least(a, b float64) float64 {
	if b != b || a < b {
		return a
	}
	return b
}

const (
	missing  = 0.25 // part of the squared error that a trusted lower bound may miss
	lookBack = 1e-4 // the share of the squared error at which the past is left out
)

// trusted applies the adaptive choice of the delay d (Meurant, Papež and
// Tichý, Numer. Algorithms 88, 2021, written from memory): the sum of d terms
// holds all but a quarter of the squared error when S·Δ_{k+d} ≤ Σ/4, where Δ
// are the terms and S is the largest ratio of the squared error to its own
// term from step k back to where the error was a hundred times as large. It is
// a heuristic, and a long plateau can deceive it.
func trusted(terms []float64) int {
	n := len(terms)
	tail := make([]float64, n+1)
	for j := n - 1; j >= 0; j-- {
		tail[j] = tail[j+1] + terms[j]
	}
	safe := func(k int) bool {
		s := 1.0
		for j := k; j >= 0 && tail[k] > lookBack*tail[j]; j-- {
			s = math.Max(s, tail[j]/terms[j])
		}
		return s*terms[n-1] <= missing*(tail[k]-terms[n-1])
	}
	low, high := 0, n // the bound is trusted up to some k: find it
	for low < high {
		mid := (low + high) / 2
		if safe(mid) {
			low = mid + 1
		} else {
			high = mid
		}
	}
	return low
}
