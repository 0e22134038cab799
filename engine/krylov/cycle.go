package krylov

// Cycler is the ability of a restarted method to show the Arnoldi relation of
// a cycle, A M⁻¹V_m = V_{m+1}H̄ (left: of M⁻¹A).
type Cycler interface {
	// Cycle returns H̄, (m+1) x m by rows, and m, when the last step made the
	// cycle whole, and nil else.
	Cycle() (hbar []float64, m int)
}

// Cycle shows the Hessenberg matrix of a cycle that has just become whole.
func (s *gmres) Cycle() (hbar []float64, m int) {
	if s.h.k != s.length || s.spent {
		return nil, 0
	}
	return s.h.matrix(), s.length
}

// matrix takes the rotations back: H̄ of the columns so far, by rows.
func (h *hessenberg) matrix() []float64 {
	m := h.k
	out, col := make([]float64, (m+1)*m), make([]float64, m+1)
	for j := range m {
		clear(col)
		copy(col, h.r[j][:j+1])
		for i := j; i >= 0; i-- {
			a, b := col[i], col[i+1]
			col[i], col[i+1] = h.c[i]*a-h.s[i]*b, h.s[i]*a+h.c[i]*b
		}
		for i := range j + 2 {
			out[i*m+j] = col[i]
		}
	}
	return out
}
