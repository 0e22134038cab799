package inspect

import (
	"math"
	"slices"
)

// pattern looks at what the entries alone tell: couplings, a repeating block,
// rows that constrain single unknowns, and where A lacks symmetry.
func (e *exam) pattern() error {
	if !e.spend(60 * float64(len(e.a.Val)+e.f.N)) {
		return nil
	}
	e.out.Block = e.block()
	e.out.Lopsided = e.lopsided()
	e.out.Lines = e.lines()
	e.out.Couplings = e.couplings()
	return e.ctx.Err()
}

// couplings tells how the strength of neighbours differs: of rows whose
// couplings all have one sign, opposite to the diagonal, as a scalar law of
// balance gives them. A penalty on the diagonal is no jump of the coefficients.
func (e *exam) couplings() *Couplings {
	c := &Couplings{Jump: 1, Dimension: math.NaN()}
	d := make([]float64, e.f.N)
	e.a.Diagonal(d)
	rows, oneWay := 0, 0
	var ratios []float64
	for i := range e.f.N {
		ratio, neighbour, jump, ok := e.rowCouplings(i, d)
		if !ok {
			continue
		}
		rows++
		if ratio >= farStronger {
			oneWay++
			ratios = append(ratios, ratio)
		}
		if jump > c.Jump {
			c.Jump, c.JumpRows = jump, []int{i, neighbour}
		}
	}
	if c.Scalar = rows > 0 && 10*rows >= 9*(e.f.N-e.f.Singletons); c.Scalar {
		c.OneWay, c.Ratio = float64(oneWay)/float64(rows), median(ratios)
	} else {
		c.Jump, c.JumpRows = 1, nil
	}
	c.Mesh, c.Dimension = e.mesh()
	return c
}

// farStronger is the ratio from which a strong coupling dwarfs a weak one.
const farStronger = 10

// rowCouplings returns how much the weakest of the strong couplings of row i
// exceed the others (1 where they do not differ), and by how much the diagonal
// of a neighbour is smaller. ok is false where the row is not one of balance:
// couplings of both signs, or none, or a diagonal of the same sign.
func (e *exam) rowCouplings(i int, d []float64) (ratio float64, neighbour int, jump float64, ok bool) {
	cols, vals := e.a.Row(i)
	ratio, jump = 1, 1
	strongest, count := 0.0, 0
	for k, j := range cols {
		if int(j) == i || vals[k] == 0 {
			continue
		}
		if vals[k]*d[i] > 0 || d[i] == 0 {
			return 1, 0, 1, false
		}
		count++
		strongest = max(strongest, math.Abs(vals[k]))
		if r := math.Abs(d[i] / d[j]); d[j] != 0 && r > jump && !e.penalised[i] && !e.penalised[int(j)] {
			jump, neighbour = r, int(j)
		}
	}
	if count == 0 {
		return 1, 0, 1, false
	}
	weak, weakest, least := 0, 0.0, math.Inf(1)
	for k, j := range cols {
		v := math.Abs(vals[k])
		switch {
		case int(j) == i || v == 0:
		case farStronger*v <= strongest:
			weak, weakest = weak+1, max(weakest, v)
		default:
			least = min(least, v)
		}
	}
	if strong := count - weak; weak >= 1 && strong >= 1 && strong <= (count+1)/2 {
		ratio = least / weakest
	}
	return ratio, neighbour, jump, true
}

// median of a list, NaN if it is empty; the list is reordered.
func median(v []float64) float64 {
	if len(v) == 0 {
		return math.NaN()
	}
	slices.Sort(v)
	return v[len(v)/2]
}
