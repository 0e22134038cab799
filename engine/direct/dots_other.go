//go:build !amd64

package direct

var vectored = false

func strands(a0, a1, a2, a3, b0, b1 []float64, n int, s *[8]float64) {
	strandsPlain(a0, a1, a2, a3, b0, b1, n, s)
}
