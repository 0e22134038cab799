package inspect

import (
	"math"
	"slices"
)

// A diagonal is a penalty where it exceeds the sum of the row's couplings, and
// the median of all diagonals, penaltyTimes; and no more than one row in
// penaltyShare is of that kind.
const (
	penaltyTimes = 100
	penaltyShare = 10
)

// lines lists the rows that constrain single unknowns: singletons, rows of the
// identity whose columns are not, and penalties on the diagonal.
func (e *exam) lines() []LineRows {
	d := make([]float64, e.f.N)
	e.a.Diagonal(d)
	sizes := make([]float64, e.f.N)
	for i, v := range d {
		sizes[i] = math.Abs(v)
	}
	usual := median(sizes)
	kinds, penalised := map[string]*LineRows{}, map[int]bool{}
	values := map[string][]float64{}
	var others []float64
	for i, v := range d {
		kind := e.kind(i, d[i], usual)
		if kind == "" {
			if v != 0 {
				others = append(others, math.Abs(v))
			}
			continue
		}
		if kinds[kind] == nil {
			kinds[kind] = &LineRows{Kind: kind}
		}
		l := kinds[kind]
		l.Count++
		l.Rows = first16(l.Rows, i)
		if kind == "penalty" {
			penalised[i] = true
		}
		values[kind] = append(values[kind], v)
	}
	var out []LineRows
	typical := median(others)
	for _, kind := range []string{"singleton", "row-replaced", "penalty"} {
		l := kinds[kind]
		if l == nil || kind == "penalty" && penaltyShare*l.Count > e.f.N {
			continue
		}
		slices.Sort(values[kind])
		if kind == "penalty" {
			e.penalised = penalised
		}
		l.Value, l.Other = values[kind][len(values[kind])/2], typical
		out = append(out, *l)
	}
	return out
}

// kind of constraint of row i with diagonal d; "" for none.
func (e *exam) kind(i int, d, usual float64) string {
	cols, vals := e.a.Row(i)
	sum := 0.0
	for k, j := range cols {
		if int(j) != i && vals[k] != 0 {
			sum += math.Abs(vals[k])
		}
	}
	switch {
	case sum == 0 && d != 0 && e.replaced != nil && e.replaced[i]:
		return "row-replaced"
	case sum == 0 && d != 0:
		return "singleton"
	case sum > 0 && math.Abs(d) >= penaltyTimes*max(sum, usual):
		return "penalty"
	}
	return ""
}
