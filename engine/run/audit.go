package run

import (
	"math"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// schedule decides from the readings alone where audits fall: whenever the
// method's own number first meets the target, at each further halving of it
// or 5 % more iterations, and at iterations ⌈1.2^k⌉.
type schedule struct {
	next     int     // the next of ⌈1.2^k⌉
	power    float64 // 1.2^k
	metAt    int     // iteration of the last audit at or below the target; -1 before
	metValue float64
}

func newSchedule() schedule { return schedule{next: 1, power: 1, metAt: -1} }

// due says whether the iteration with this own number (held against the
// tolerance) is audited.
func (s *schedule) due(iter int, own, tol float64) bool {
	due := iter == 0
	for iter >= s.next {
		due = true
		s.power *= 1.2
		s.next = int(math.Ceil(s.power))
	}
	if own <= tol && (s.metAt < 0 || own <= s.metValue/2 || float64(iter) >= 1.05*float64(s.metAt)) {
		s.metAt, s.metValue = iter, own
		due = true
	}
	return due
}

// scratch is the memory audits work in, shared by all trials of a bench: one
// trial moves at a time.
type scratch struct {
	x, r, w, own []float64 // length n each
	low          []float64 // length n; nil before the first trial that keeps x in two doubles
}

func newScratch(n int) *scratch {
	v := linear.Bulk[float64](4 * n)
	return &scratch{x: v[:n:n], r: v[n : 2*n : 2*n], w: v[2*n : 3*n : 3*n], own: v[3*n:]}
}

// audit is what one fresh look at b−Ax found.
type audit struct {
	true2    float64 // ‖b−Ax‖₂
	rounded  float64 // the same of x rounded to one double, where it is kept in two; else NaN
	ownTrue  float64 // the same in the method's own norm
	xInf, x2 float64
	rInf     float64
	normal   float64 // ‖Aᵀr‖₂/(‖A‖_F‖r‖₂); NaN where not asked
	fields   []trace.Field
}

// audit measures b−Ax in the user's own units and ordering. What it uses of
// the preconditioner is not counted.
func (t *Trial) audit(normal bool) audit {
	s, uses := t.scratch, t.m.uses
	defer func() { t.m.uses = uses }()
	t.iterate(s.x)
	var a audit
	a.true2, a.rounded = t.trueResidual(s.r, s.x)
	a.rInf, a.xInf, a.x2 = linear.NormInf(s.r), linear.NormInf(s.x), linear.Norm2(s.x)
	a.fields = t.fieldResiduals()
	a.ownTrue = t.inOwnNorm(a.true2)
	a.normal = math.NaN()
	if normal {
		a.normal = t.normalResidual(a.true2)
	}
	return a
}

// iterate writes the current iterate in the user's units to dst.
func (t *Trial) iterate(dst []float64) {
	if t.back == nil {
		t.solver.Solution(dst)
		return
	}
	t.solver.Solution(t.scratch.w)
	t.back.Solution(dst, t.scratch.w)
}

// inOwnNorm returns the true residual of the prepared system in the norm that
// the method watches.
func (t *Trial) inOwnNorm(true2 float64) float64 {
	s := t.scratch
	if t.hist.TwoDoubles {
		return true2 // the method watches ‖r‖₂, and a reordering does not change it
	}
	r := s.r
	if t.back != nil {
		t.solver.Solution(s.w)
		true2 = linear.Residual(s.own, t.prepared.A, s.w, t.prepared.B)
		r = s.own
	}
	return t.ownNorm(r, true2)
}

// ownNorm returns the size of a residual r of the prepared system in the norm
// that the method watches, where two is ‖r‖₂. r may lie in the scratch, but not
// in w. Nothing is counted.
func (t *Trial) ownNorm(r []float64, two float64) float64 {
	s, plain := t.scratch, t.method.Precond.Name == "none"
	switch t.method.watched() {
	case trace.PrecondNorm:
		t.m.inner.Apply(s.w, r)
		return math.Sqrt(math.Max(0, linear.Dot(r, s.w)))
	case trace.LeftNorm:
		t.m.inner.Apply(s.w, r)
		return linear.Norm2(s.w)
	case trace.NormalEquationNorm:
		at, _ := linear.As[linear.Transposer](t.prepared.A)
		at.ApplyT(s.w, r)
		if plain {
			return linear.Norm2(s.w)
		}
		mt, _ := linear.As[linear.Transposer](t.m.inner)
		mt.ApplyT(s.own, s.w) // r has had its last use
		return linear.Norm2(s.own)
	}
	return two
}

// normalResidual returns ‖Aᵀr‖₂/(‖A‖_F‖r‖₂) for the residual in the scratch.
func (t *Trial) normalResidual(true2 float64) float64 {
	op, ok := linear.As[linear.Transposer](t.sys.A)
	if !ok || true2 == 0 {
		return math.NaN()
	}
	op.ApplyT(t.scratch.w, t.scratch.r)
	return over(linear.Norm2(t.scratch.w), t.sizes.fro*true2)
}

// componentwise returns max |r_i|/(|A||x|+|b|)_i (Oettli and Prager 1964) for
// the residual and iterate in the scratch, and the rows that are unsolved by
// more than limit (linear.Unsolved): how many, how many of them are in small
// units, and the worst. The largest of each field goes into fields.
func (t *Trial) componentwise(limit float64, fields []trace.Field) (worst float64, over, small int, rows []trace.RowShare) {
	m := t.sys.Matrix()
	if m == nil {
		return math.NaN(), 0, 0, nil
	}
	s := t.scratch
	for f := range fields {
		fields[f].Componentwise = 0
	}
	u := linear.NewUnsolved(m, s.x, limit)
	for i, r := range s.r {
		e, unsolved, inSmall := u.Row(i, r, t.sys.B[i])
		worst = math.Max(worst, e)
		if fields != nil {
			f := &fields[t.sys.FieldOf[i]]
			f.Componentwise = math.Max(f.Componentwise, e)
		}
		if unsolved {
			over++
			rows = trace.KeepLargest(rows, trace.RowShare{Row: i, Share: e})
		}
		if inSmall {
			small++
		}
	}
	return worst, over, small, rows
}
