package direct

import "golang.org/x/sys/cpu"

// vectored says whether the processor has AVX2; tests take it away.
var vectored = cpu.X86.HasAVX2

// strandsAVX2 is strandsPlain in vector registers.
//
//go:noescape
func strandsAVX2(a0, a1, a2, a3, b0, b1 *float64, n int, s *[8]float64)

func strands(a0, a1, a2, a3, b0, b1 []float64, n int, s *[8]float64) {
	if !vectored {
		strandsPlain(a0, a1, a2, a3, b0, b1, n, s)
		return
	}
	strandsAVX2(&a0[0], &a1[0], &a2[0], &a3[0], &b0[0], &b1[0], n, s)
}
