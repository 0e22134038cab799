package precond

import (
	"math"

	"dwindle/engine/linear"
)

// storeParam says how the triangles of an incomplete factorisation are kept.
var storeParam = linear.Param{Name: "store", Kind: linear.Choice, Choices: []string{"double", "single"}, Quiet: true,
	Meaning: "keeps the off-diagonal entries of the factors, which are computed in double precision, in double or rounded to single; sums stay in double"}

// inSingle says whether the parameters ask for single precision.
func inSingle(v linear.Values) bool { return v.Is(storeParam.Name, "single") }

// settleAs is settle in the precision that the parameters ask for. In single
// precision every off-diagonal entry of L and R is rounded once, and sweeps in
// both directions use the same rounded value: M stays one linear operator, and
// symmetric where R = Lᵀ. An entry outside the range of normal single numbers
// is refused with its row, since what it would do to M cannot be foreseen.
func (f *factors) settleAs(v linear.Values, method string) error {
	if !inSingle(v) {
		f.settle()
		return nil
	}
	if err := fits(f.lower, method); err != nil {
		return err
	}
	if !f.self {
		if err := fits(f.upper, method); err != nil {
			return err
		}
	}
	f.count()
	if !byDiagonals[float32](f) {
		f.bothTriangles()
		f.below, f.above = shortened(f.lower), shortened(f.upper)
		f.lower, f.upper = nil, nil
	}
	return nil
}

const (
	leastSingle = 0x1p-126        // the smallest normal single number
	mostSingle  = math.MaxFloat32 // the largest
)

// fits refuses a triangle with an entry that would be infinite, zero or
// subnormal in single precision.
func fits(t *linear.CSR, method string) error {
	for i := range t.NRows {
		_, vals := t.Row(i)
		for _, v := range vals {
			if s := math.Abs(float64(float32(v))); s > mostSingle || s < leastSingle && v != 0 {
				return &Breakdown{Method: method, Row: i, Pivot: v, Why: "an entry of the factors is out of the range of single precision"}
			}
		}
	}
	return nil
}

// shortened keeps the places of a triangle and rounds its values.
func shortened(t *linear.CSR) *triangleRows[float32] {
	s := &triangleRows[float32]{t.Ptr, t.Col, linear.Bulk[float32](len(t.Val))}
	for k, v := range t.Val {
		s.val[k] = float32(v)
	}
	return s
}
