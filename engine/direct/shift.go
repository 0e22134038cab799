package direct

// unit is half the distance from 1 to the next double.
const unit = 0x1p-53

// roundingShift returns c such that a floating-point Cholesky factorisation of
// fl(A − cI) that runs to its end proves A positive definite. d is the
// diagonal of A, within [1,4).
//
// Let Ã = fl(A − cI) and let each entry of the factor take at most k roundings:
// products, their sums over the fronts, the final division or root, no more
// than the widest row of L plus two; adding an exact zero rounds nothing. Then
// R̃ᵀR̃ = Ã + Δ with |Δ_ij| ≤ γ/(1−γ)·√(ã_ii ã_jj), γ = ku/(1−ku) (Higham 2002,
// Theorem 10.3 and its proof, in any order of summation), and Δ vanishes
// outside the stored entries of L and Lᵀ. So ‖Δ‖₂ ≤ γ/(1−γ)·min(Σ ã_ii, 4·(most
// entries of a row of L + Lᵀ)), and λmin(Ã) ≥ −‖Δ‖₂. The subtraction rounds by
// at most 4u in each diagonal entry. Underflow adds less than 10⁻³⁰⁰, which the
// last factor 1.01 covers a thousandfold.
func roundingShift(l *layout, d []float64) float64 {
	trace := 0.0
	for _, v := range d {
		trace += v
	}
	widest, fullest := l.widths()
	ku := float64(widest+2) * unit
	gamma := ku / (1 - ku)
	delta := gamma / (1 - gamma) * min(trace, 4*float64(fullest))
	return 1.01 * (delta + 4*unit)
}

// widths returns the most stored entries of a row of L, and of L + Lᵀ.
func (l *layout) widths() (widest, fullest int) {
	left := make([]int, l.N) // stored entries of each row of L, diagonal included
	for k := range l.up {
		for i, r := range l.rowsOf(k) {
			left[r] += min(i+1, l.width(k))
		}
	}
	for k, h := range l.height {
		for c := range l.width(k) {
			n := left[int(l.start[k])+c]
			widest = max(widest, n)
			fullest = max(fullest, n+h-c-1)
		}
	}
	return widest, fullest
}
