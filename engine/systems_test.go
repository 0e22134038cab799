package engine

import (
	"fmt"
	"io"
	"math"

	"dwindle/engine/linear"
)

// writeRounded writes a symmetric matrix as Matrix Market with so many
// significant digits.
func writeRounded(w io.Writer, a *linear.CSR, digits int) error {
	lower := 0
	for i := 0; i < a.NRows; i++ {
		cols, _ := a.Row(i)
		for _, c := range cols {
			if int(c) <= i {
				lower++
			}
		}
	}
	if _, err := fmt.Fprintf(w, "%%%%MatrixMarket matrix coordinate real symmetric\n%d %d %d\n", a.NRows, a.NCols, lower); err != nil {
		return err
	}
	for i := 0; i < a.NRows; i++ {
		cols, vals := a.Row(i)
		for k, c := range cols {
			if int(c) <= i {
				if _, err := fmt.Fprintf(w, "%d %d %.*e\n", i+1, c+1, digits-1, vals[k]); err != nil {
					return err
				}
			}
		}
	}
	return nil
}

// cantilever is a beam of m cubic Hermite elements of uneven length, clamped
// at one end (the element matrix is in every book on structures).
func cantilever(m int) *linear.CSR {
	var e []linear.Entry
	for k := 0; k < m; k++ {
		l := 1 + 0.3*math.Sin(float64(2*k)) // uneven
		a, b, c, d := 12/(l*l*l), 6/(l*l), 4/l, 2/l
		ke := [4][4]float64{{a, b, -a, b}, {b, c, -b, d}, {-a, -b, a, -b}, {b, d, -b, c}}
		for i := range ke {
			for j := range ke {
				if p, q := 2*(k-1)+i, 2*(k-1)+j; p >= 0 && q >= 0 {
					e = append(e, linear.Entry{I: p, J: q, V: ke[i][j]})
				}
			}
		}
	}
	return linear.FromEntries(2*m, 2*m, e)
}
