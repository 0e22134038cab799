package inspect

import (
	"math"
	"slices"

	"dwindle/engine/linear"
)

// printing is what the printing of two equal numbers may leave between them
// beyond their digits.
const printing = 16 * 0x1p-53

// transpose makes the transpose where A needs one and fills in what it tells:
// symmetry and the columns.
func (l *look) transpose() error {
	l.at = l.a
	exact := l.a.ExactlySymmetric()
	if !exact {
		l.at = l.a.Transpose()
	}
	if err := l.columns(); err != nil {
		return err
	}
	if exact {
		l.f.Symmetric = fact(Yes, Proved, 0, nil, "a_ij = a_ji for every entry")
		l.f.PatternSymmetric = fact(Yes, Proved, math.NaN(), nil, "every nonzero has its mirror image")
		l.slack = l.delta
		return nil
	}
	return l.symmetry()
}

// columns ranges over the columns.
func (l *look) columns() error {
	f := &l.f
	var norm gather
	for j := range f.N {
		if err := l.every(j); err != nil {
			return err
		}
		_, vals := l.at.Row(j)
		sum, largest := 0.0, 0.0
		for _, v := range vals {
			v = math.Abs(v)
			sum += v
			largest = max(largest, v)
		}
		f.NormOne = max(f.NormOne, sum)
		if largest > 0 {
			norm.add(j, largest)
		}
	}
	f.ColNorm = norm.Range
	return nil
}

// mirror collects how A differs from its transpose.
type mirror struct {
	same     *linear.Mirror
	pattern  int       // nonzeros without a mirror image
	lone     top       // their rows
	rounding bool      // some pair differs by rounding
	digits   bool      // some pair differs by what the digits leave open
	broken   bool      // some pair differs by more
	relative float64   // largest |a_ij−a_ji|/max(|a_ij|,|a_ji|) of pairs within the digits
	rounded  []float64 // by row, Σ_j |a_ij−a_ji|/min(√|a_ii a_jj|, |a_ii|) of pairs that differ by rounding
	worst    float64   // largest |a_ij−a_ji|/√|a_ii a_jj|
	places   top       // rows of the worst pairs
	i, j     int       // the worst pair
	square   float64   // Σ ((a_ij−a_ji)/‖A‖∞)²
}

// symmetry compares A with its transpose, row by row.
func (l *look) symmetry() error {
	m := mirror{same: linear.NewMirror(l.a), rounded: make([]float64, l.f.N)}
	d := make([]float64, l.f.N)
	l.a.Diagonal(d)
	for i := range d {
		if err := l.every(i); err != nil {
			return err
		}
		l.mirrorRow(&m, d, i)
	}
	f := &l.f
	if m.square > 0 {
		f.Asymmetry = math.Sqrt(m.square) / (f.NormFro / f.NormInf)
	}
	l.slack = l.delta + 2*m.relative + 4*slices.Max(m.rounded)
	if m.pattern == 0 {
		f.PatternSymmetric = fact(Yes, Proved, math.NaN(), nil, "every nonzero has its mirror image")
	} else {
		f.PatternSymmetric = fact(No, Proved, float64(m.pattern), m.lone.list(), "%s without a mirror image",
			count(m.pattern, "nonzero", "nonzeros"))
	}
	f.Symmetric = l.symmetric(&m)
	return nil
}

// mirrorRow merges row i of A with row i of Aᵀ and compares the pairs right
// of the diagonal.
func (l *look) mirrorRow(m *mirror, d []float64, i int) {
	lone, worst := m.pattern, 0.0
	linear.Pairs(l.a, l.at, i, func(j int, v, w float64) {
		if j > i && v != w {
			worst = max(worst, l.compare(m, d, i, j, v, w))
		}
	})
	if m.pattern > lone {
		m.lone.add(i, 0)
	}
	if worst > 0 {
		m.places.add(i, worst)
	}
}

// compare judges the pair v = a_ij, w = a_ji, which differ, and returns
// |v−w|/√|a_ii a_jj|.
func (l *look) compare(m *mirror, d []float64, i, j int, v, w float64) float64 {
	diff, size := math.Abs(v-w), max(math.Abs(v), math.Abs(w))
	if v == 0 || w == 0 {
		m.pattern++
	}
	di, dj := math.Abs(d[i]), math.Abs(d[j])
	scale := math.Sqrt(di) * math.Sqrt(dj)
	switch {
	case m.same.Same(i, j, v, w):
		m.rounding = true
		if scale > 0 {
			m.rounded[i] += diff / min(scale, di)
			m.rounded[j] += diff / min(scale, dj)
		}
	case diff <= l.delta*(math.Abs(v)+math.Abs(w))+printing*size:
		m.digits = true
		m.relative = max(m.relative, diff/size)
	default:
		m.broken = true
	}
	if scale == 0 {
		scale = size
	}
	r := diff / scale
	if r > m.worst {
		m.worst, m.i, m.j = r, i, j
	}
	x := (v - w) / l.f.NormInf
	m.square += 2 * x * x
	return r
}

// symmetric states the result.
func (l *look) symmetric(m *mirror) Fact {
	switch {
	case m.broken:
		rows := m.rows()
		return fact(No, Proved, m.worst, rows, "a_ij and a_ji differ by up to %.2g of sqrt|a_ii a_jj|, most at (%d,%d)", m.worst, m.i+1, m.j+1)
	case m.digits:
		return fact(Yes, Measured, m.worst, m.rows(), "a_ij and a_ji agree within the %d digits of the file, not exactly", l.s.Digits)
	case m.rounding:
		return fact(Yes, Measured, m.worst, m.rows(), "a_ij and a_ji agree to rounding: they differ by up to %.2g of sqrt|a_ii a_jj|", m.worst)
	}
	return fact(Yes, Proved, 0, nil, "a_ij = a_ji for every entry, explicit zeros aside")
}

// rows lists the two rows of the worst pair, then those of other bad pairs.
func (m *mirror) rows() []int {
	rows := []int{m.i, m.j}
	for _, r := range m.places.rows {
		if r != m.i && r != m.j {
			rows = first16(rows, r)
		}
	}
	return rows
}
