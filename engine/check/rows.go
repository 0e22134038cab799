package check

import (
	"math"
	"strconv"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// componentwise finds the componentwise backward error, its rows, and those
// that are unsolved (linear.Unsolved).
func (w *work) componentwise() {
	out := w.out
	u := linear.NewUnsolved(w.a, w.q.X, math.Sqrt(w.q.Tol))
	worst := trace.RowShare{}
	for i, r := range w.r {
		e, unsolved, _ := u.Row(i, r, w.q.System.B[i])
		out.Componentwise = math.Max(out.Componentwise, e)
		if unsolved {
			out.Unsolved++
			if e > worst.Share {
				worst = trace.RowShare{Row: i, Share: e}
			}
		}
		if e > 0 {
			out.Worst = trace.KeepLargest(out.Worst, trace.RowShare{Row: i, Share: e})
		}
	}
	w.unsolved = worst
}

// fields holds the residual against b field by field, where fields are known.
func (w *work) fields() {
	s := w.q.System
	if s.FieldOf == nil {
		return
	}
	of := func(v []float64, f int32) []float64 {
		part := make([]float64, 0, len(v)/len(s.Fields)+1)
		for i, x := range v {
			if s.FieldOf[i] == f {
				part = append(part, x)
			}
		}
		return part
	}
	for f, name := range s.Fields {
		r, b := of(w.r, int32(f)), linear.Norm2(of(s.B, int32(f)))
		if b == 0 {
			b = linear.Norm2(s.B)
		}
		g := trace.Field{Name: name, Rows: len(r), Residual: over(linear.Norm2(r), b)}
		for i, size := range of(w.size, int32(f)) {
			if r[i] != 0 {
				g.Componentwise = math.Max(g.Componentwise, math.Min(math.Abs(r[i])/size, 1))
			}
		}
		if w.q.FieldTol != nil {
			g.Tol = w.q.FieldTol[f]
		}
		w.out.Fields = append(w.out.Fields, g)
	}
}

// printing finds the digits that x is written with and what they leave open:
// half a unit of the last one of each x_j moves b−Ax by at most δ|A||x|.
func (w *work) printing() {
	for _, x := range w.q.X {
		w.out.Digits = max(w.out.Digits, digits(x))
		if w.out.Digits >= 16 {
			w.out.Digits = 17 // as good as all of a double
			return
		}
	}
	delta := 0.5 * math.Pow(10, float64(1-w.out.Digits))
	open := make([]float64, len(w.size))
	for i, s := range w.size {
		open[i] = delta * (s - math.Abs(w.q.System.B[i]))
	}
	w.out.Printing = over(linear.Norm2(open), linear.Norm2(w.q.System.B))
}

// digits returns how many significant digits the shortest text has that reads
// back to x.
func digits(x float64) int {
	text := strconv.FormatFloat(math.Abs(x), 'e', -1, 64)
	n := 0
	for _, c := range text {
		if c == 'e' {
			break
		}
		if c != '.' {
			n++
		}
	}
	return n
}
