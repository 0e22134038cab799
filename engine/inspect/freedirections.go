package inspect

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/spectrum"
)

// A direction is nearly free where A equilibrated maps it to freeLimit of its
// norm or less, and stands apart where the next one is mapped to isolated times
// as much.
const (
	freeLimit  = 1e-8
	isolated   = 100
	mostFree   = 8
	freeSteps  = 14
	tinyDivide = 1e-300
)

// freeDirections finds the directions that A equilibrated nearly maps to zero:
// first the rigid motions of the coordinates, where they are known, then, with
// the factorisation, those that the inverse stretches most.
func (e *exam) freeDirections() error {
	if e.scaled == nil || e.noneFree() {
		return nil
	}
	norm := e.scaledNorm()
	quotients := e.rigidMotions(norm)
	rigid := len(quotients)
	e.fixed = rigid
	e.searchZero(norm, &quotients)
	sure := len(quotients)
	next, err := e.searchFree(norm, &quotients)
	if err != nil {
		return err
	}
	for !finite(next) && sure < len(quotients) && quotients[sure] <= ZeroLimit {
		sure++ // the search was cut before the first that is not
	}
	k := apart(append(quotients, next), sure)
	zero := e.fixed // those beyond are free, but not to rounding: one is not mixed with the other
	for zero < k && quotients[zero] <= ZeroLimit {
		zero++
	}
	e.free = append(localise(e.free[:zero], e.fixed), localise(e.free[zero:k], 0)...)
	for j, v := range e.free {
		d := e.direction(v, e.col, e.quotient(v, norm))
		d.Next = next
		if k < len(quotients) {
			d.Next = quotients[k]
		}
		if j < rigid {
			d.Rigid = e.rigidKind(v)
		}
		if e.symmetric {
			d.Load = e.load(d.Vector)
		}
		d.Tied = e.tie(d)
		e.out.Null = append(e.out.Null, d)
	}
	e.measureReach(finite(next))
	if !e.symmetric {
		e.out.Nullity = len(e.freeToRounding())
		e.out.More = e.out.Nullity > 0 && !finite(e.out.Null[0].Next)
	}
	return e.leftDirections(norm)
}

// noneFree says that the spectrum of a definite A equilibrated has shown its
// smallest eigenvalue already, and that no direction is nearly free.
func (e *exam) noneFree() bool {
	x := e.out.Equilibrated
	return x != nil && e.f.PositiveDefinite.Answer == Yes && x.Certainty == Measured && x.Condition*freeLimit < 0.5
}

// scaledNorm is ‖B‖₂ as far as it is known, else its largest row sum.
func (e *exam) scaledNorm() float64 {
	if x := e.out.Equilibrated; x != nil && finite(x.Largest) {
		if finite(x.Smallest) { // of a symmetric A the other end may lie further out
			return max(math.Abs(x.Largest), math.Abs(x.Smallest))
		}
		return math.Abs(x.Largest)
	}
	norm := 0.0
	for i := range e.f.N {
		_, vals := e.scaled.Row(i)
		sum := 0.0
		for _, v := range vals {
			sum += math.Abs(v)
		}
		norm = max(norm, sum)
	}
	return norm
}

// quotient is ‖Bv‖ relative to ‖B‖, for a unit v.
func (e *exam) quotient(v []float64, norm float64) float64 {
	w := make([]float64, len(v))
	e.scaled.Apply(w, v)
	return linear.Norm2(w) / norm
}

// searchFree adds the directions that the inverse stretches most, one after
// the other, and returns the quotient of the first that is not nearly free;
// NaN where that is not known. At most mostZero that are mapped to zero are
// held, and mostFree others.
func (e *exam) searchFree(norm float64, quotients *[]float64) (next float64, err error) {
	if next, ok := e.denseFree(norm, quotients); ok || e.solver == nil {
		return next, nil
	}
	sure := len(e.free)
	if mostZero <= sure && sure < e.out.ZeroPivots {
		return math.NaN(), nil // the next is free as well
	}
	for others := 0; others < mostFree; {
		v, err := e.mostStretched()
		if err != nil || v == nil {
			return math.NaN(), err
		}
		q := e.quotient(v, norm)
		if q <= freeLimit && e.shift != 0 {
			v = e.unshifted(v, e.free, e.solver.Solve)
			q = e.quotient(v, norm)
		}
		if e.shift != 0 && !e.symmetric && q > ZeroLimit { // squared, the values may spread over more digits than there are
			w := make([]float64, e.f.N)
			linear.Uniform(w, uint64(len(e.free)+1))
			w = e.unshifted(w, e.free, e.solver.Solve)
			if p := e.quotient(w, norm); p <= ZeroLimit {
				v, q = w, p
			}
		}
		if !(q <= freeLimit) {
			return q, nil
		}
		if q <= ZeroLimit && len(e.free) >= mostZero {
			return math.NaN(), nil
		}
		e.free = append(e.free, v)
		*quotients = append(*quotients, q)
		if q > ZeroLimit {
			others++
		}
	}
	return math.NaN(), nil
}

// mostStretched is the unit vector beside the free ones that the inverse of B
// stretches most; nil where the budget is used up.
func (e *exam) mostStretched() ([]float64, error) {
	n := e.f.N
	apply, low := e.solver.Solve, 1
	if !e.symmetric {
		w := make([]float64, n)
		apply, low = func(dst, x []float64) {
			e.solver.SolveT(w, x)
			e.solver.Solve(dst, w)
		}, 0
	}
	if !e.spend(e.searchWork()) {
		return nil, nil
	}
	out, err := spectrum.Ends(e.ctx, n, apply, spectrum.Wanted{Low: low, High: 1, Tol: 1e-6, Basis: freeSteps + 4,
		Products: freeSteps, Beside: e.free})
	switch {
	case err != nil || len(out.High) == 0:
		return nil, err
	case len(out.Low) > 0 && -out.Low[0].Value > out.High[0].Value:
		return out.Low[0].Vector, nil
	}
	return out.High[0].Vector, nil
}

// searchWork is the work of finding one direction.
func (e *exam) searchWork() float64 { return freeSteps * (2*e.solveWork() + 100*float64(e.f.N)) }

// apart returns how many of the directions stand apart: up to the last at
// which the quotients grow at least isolated-fold, and of those found first, as
// rigid motions or as mapped to zero, all.
func apart(quotients []float64, sure int) int {
	for k := len(quotients) - 1; k > sure; k-- {
		if quotients[k]/max(quotients[k-1], 1e-16) >= isolated {
			return k
		}
	}
	return sure
}

// direction describes one, v of unit length in the equilibrated units; scale
// takes it back to the user's.
func (e *exam) direction(v, scale []float64, quotient float64) NullDirection {
	d := NullDirection{Quotient: quotient, Next: math.NaN(), Load: math.NaN(), Support: support(v)}
	var t top
	for i, x := range v {
		t.add(i, x*x)
	}
	for k, row := range t.rows {
		if t.values[k] < 1e-4 {
			break
		}
		d.Rows, d.Shares = append(d.Rows, row), append(d.Shares, t.values[k])
	}
	d.Vector = make([]float64, len(v))
	for i, x := range v {
		d.Vector[i] = scale[i] * x
	}
	linear.Scale(d.Vector, 1/max(linear.Norm2(d.Vector), tinyDivide), d.Vector)
	d.Level = e.levelOf(d.Vector)
	if e.parts == nil {
		e.parts = linear.FindComponents(e.a)
	}
	if len(d.Rows) > 0 {
		d.Part = int(e.parts.Of[d.Rows[0]])
		d.PartRows = int(e.parts.Size[d.Part])
	}
	return d
}

// load is the part of b along a unit vector; NaN without b.
func (e *exam) load(v []float64) float64 {
	if len(e.s.B) != len(v) || !(e.f.RHSNorm > 0) {
		return math.NaN()
	}
	return math.Abs(linear.Dot(v, e.s.B)) / e.f.RHSNorm
}
