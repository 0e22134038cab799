package spectrum

import (
	"math"

	"dwindle/engine/linear"
)

// HenriciBound returns a lower bound of the departure from normality of a
// square matrix, √(1 − Σ|λ|²/‖A‖_F²), without its eigenvalues. By Schur's
// inequality Σ|λ|² ≤ ‖D⁻¹AD‖_F² for every diagonal D; the D that makes this
// least is found by balancing (Osborne, J. ACM 7 (1960) 338–345), in at most
// sweeps sweeps over the entries. at is Aᵀ. It is 0 for a normal matrix.
func HenriciBound(a, at *linear.CSR, sweeps int) float64 {
	total := sumSquares(a.Val)
	if !(total > 0) || total-total != 0 {
		return 0
	}
	d := make([]float64, a.NRows) // log₂ D
	for range sweeps {
		moved := 0.0
		for i := range d {
			moved = max(moved, balance(a, at, d, i))
		}
		if moved < 0.05 {
			break
		}
	}
	return math.Sqrt(max(0, 1-balanced(a, d)/total))
}

// farthest is how far one sweep moves one row, in powers of two: where a row
// has no column to weigh against, D has no least value.
const farthest = 8

// balance moves d_i so that row and column i of D⁻¹AD off the diagonal have
// the same norm, and returns by how much.
func balance(a, at *linear.CSR, d []float64, i int) float64 {
	row, col := offNorm(a, d, i, 1), offNorm(at, d, i, -1)
	if row == 0 && col == 0 {
		return 0
	}
	step := min(max((math.Log2(row)-math.Log2(col))/2, -farthest), farthest)
	if math.Abs(d[i]+step) > 400 {
		return 0
	}
	d[i] += step
	return math.Abs(step)
}

// offNorm is the 2-norm of row i of D⁻ˢ A Dˢ off the diagonal.
func offNorm(a *linear.CSR, d []float64, i int, s float64) float64 {
	cols, vals := a.Row(i)
	sum := 0.0
	for k, j := range cols {
		if int(j) != i {
			v := vals[k] * math.Exp2(s*(d[j]-d[i]))
			sum += v * v
		}
	}
	return math.Sqrt(sum)
}

// balanced is ‖D⁻¹AD‖_F².
func balanced(a *linear.CSR, d []float64) float64 {
	sum := 0.0
	for i := range d {
		cols, vals := a.Row(i)
		for k, j := range cols {
			v := vals[k] * math.Exp2(d[j]-d[i])
			sum += v * v
		}
	}
	return sum
}

func sumSquares(v []float64) float64 {
	sum := 0.0
	for _, x := range v {
		sum += x * x
	}
	return sum
}

// CommutatorBound returns another lower bound of the same number, from
// ‖AAᵀ−AᵀA‖_F: Σ|λ|² ≤ √(‖A‖_F⁴ − ‖AAᵀ−AᵀA‖_F²/2) (Kress, de Vries and
// Wegmann, Linear Algebra Appl. 8 (1974) 109–120).
func CommutatorBound(a, at *linear.CSR) float64 {
	left, right := linear.Multiply(a, at), linear.Multiply(at, a)
	total := sumSquares(a.Val)
	if !(total > 0) {
		return 0
	}
	sum := 0.0
	for i := range left.NRows {
		sum += rowDistance(left, right, i)
	}
	return math.Sqrt(max(0, 1-math.Sqrt(max(0, 1-sum/2/total/total))))
}

// rowDistance is the square of the distance of row i of two matrices.
func rowDistance(a, b *linear.CSR, i int) float64 {
	ac, av := a.Row(i)
	bc, bv := b.Row(i)
	sum := 0.0
	for p, q := 0, 0; p < len(ac) || q < len(bc); {
		d := 0.0
		switch {
		case q == len(bc) || p < len(ac) && ac[p] < bc[q]:
			d, p = av[p], p+1
		case p == len(ac) || bc[q] < ac[p]:
			d, q = bv[q], q+1
		default:
			d, p, q = av[p]-bv[q], p+1, q+1
		}
		sum += d * d
	}
	return sum
}
