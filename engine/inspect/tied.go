package inspect

import "math"

// Two unknowns are tied where the coupling between them makes up their diagonal
// entries to tiedPart, and is tiedTimes as large as any other of theirs.
const (
	tiedPart  = 0.01
	tiedTimes = 1e4
	tiedShare = 0.9 // of a direction, that the two carry
)

// tie says by how much the coupling of the two unknowns that carry d exceeds
// all their others, where they are tied: the direction is what they do
// together, small beside their tie and not free. 0 where it is no tie: so where
// the coupling has the size of A's others and the pair hangs on little.
func (e *exam) tie(d NullDirection) float64 {
	if len(d.Rows) < 2 || !(d.Shares[0]+d.Shares[1] >= tiedShare) {
		return 0
	}
	p, q := d.Rows[0], d.Rows[1]
	between, others := math.Inf(1), 0.0
	for _, r := range [][2]int{{p, q}, {q, p}} {
		cols, vals := e.a.Row(r[0])
		diag, coupling := 0.0, 0.0
		for k, j := range cols {
			switch int(j) {
			case r[0]:
				diag = vals[k]
			case r[1]:
				coupling = vals[k]
			default:
				others = max(others, math.Abs(vals[k]))
			}
		}
		if !(math.Abs(diag+coupling) <= tiedPart*math.Abs(diag)) || coupling == 0 {
			return 0
		}
		between = min(between, math.Abs(coupling))
	}
	sizes := make([]float64, e.f.N)
	e.a.Diagonal(sizes)
	for i, v := range sizes {
		sizes[i] = math.Abs(v)
	}
	usual := median(sizes)
	if !(others > 0) || !(between >= tiedTimes*others) || !(between/usual > usual/others) {
		return 0
	}
	return between / others
}
