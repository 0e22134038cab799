package check

import (
	"fmt"
	"math"
	"strings"

	"dwindle/engine/linear"
)

// hints say what else the numbers tell.
func (w *work) hints() {
	w.unseen()
	w.wrongSystem()
	w.leastSquares()
	w.fewDigits()
	w.atBest()
}

func (w *work) hint(format string, args ...any) {
	w.out.Hints = append(w.out.Hints, fmt.Sprintf(format, args...))
}

// unseen names stopping rules that hold although the residual is far off.
func (w *work) unseen() {
	rhs, _ := w.out.Definition("rhs")
	if w.out.Solved || !(rhs.Value > 10*w.q.Tol) {
		return
	}
	var held []string
	for _, d := range w.out.Definitions {
		switch {
		case !d.Holds || d.Name == "running-start":
		case d.From > 0:
			held = append(held, fmt.Sprintf("%s (from step %d on)", d.Formula, d.From))
		default:
			held = append(held, d.Formula)
		}
	}
	if len(held) > 0 {
		text := strings.Join(held[:min(len(held), mostFits)], " or by ")
		if more := len(held) - mostFits; more > 0 {
			text += fmt.Sprintf(" or by %d more of the measures below", more)
		}
		w.hint("a code that stops by %s would have stopped here, with ||r||2/||b||2 at %s", text, num(rhs.Value))
	}
}

// Residuals this small, relative to b, say that another reading of x or A is
// the right one.
const fitsWell = 1e-3

// wrongSystem tries whether a multiple of x, or x with Aᵀ, solves the system.
func (w *work) wrongSystem() {
	b := w.q.System.B
	b2 := linear.Norm2(b)
	rhs, _ := w.out.Definition("rhs")
	if w.out.Solved || !(rhs.Value > 10*w.q.Tol) || b2 == 0 {
		return
	}
	limit := math.Min(fitsWell, 0.1*rhs.Value)
	y := make([]float64, len(b))
	w.a.Apply(y, w.q.X)
	factor := over(linear.Dot(y, b), linear.Dot(y, y))
	if r := w.distance(y, factor); r <= limit {
		w.hint("%s x solves the system to %s: x, A or b was scaled on the way", num(factor), num(r))
	}
	if w.symmetric {
		return
	}
	w.at.Apply(y, w.q.X)
	if r := w.distance(y, 1); r <= limit {
		w.hint("x solves A'x = b to %s: A was transposed on the way", num(r))
	}
}

// distance returns ‖b − f y‖₂/‖b‖₂; y is overwritten only in a copy.
func (w *work) distance(y []float64, f float64) float64 {
	d := make([]float64, len(y))
	linear.Lin(d, 1, w.q.System.B, -f, y)
	return over(linear.Norm2(d), linear.Norm2(w.q.System.B))
}

// toZero is Aᵀr over ‖A‖‖r‖ that is zero to rounding. Above it a smooth r, or one
// stiff entry of A, may make it small where the residual can still come down.
const toZero = 1e-14

// leastSquares says what a small Aᵀr beside a large r means: no residual can
// be smaller, or A is ill-conditioned.
func (w *work) leastSquares() {
	normal, ok := w.out.Definition("normal")
	rhs, _ := w.out.Definition("rhs")
	if !ok || !(normal.Value <= w.q.Tol) || !(rhs.Value > 100*w.q.Tol) {
		return
	}
	switch {
	case w.out.Factor != nil:
		w.hint("%s = %s looks like a least-squares solution and is none: A is regular, only ill-conditioned, and the residual can come down", normal.Formula, num(normal.Value))
	case w.tooLarge || normal.Value > toZero:
		w.hint("%s = %s: either b is out of A's range and x near a least-squares solution, or A is ill-conditioned and the residual can come down", normal.Formula, num(normal.Value))
	default:
		w.hint("%s = %s: x is a least-squares solution; A is singular, to rounding at least, and b is out of its range", normal.Formula, num(normal.Value))
	}
}

// fewDigits says that the digits x is written with can explain the residual.
func (w *work) fewDigits() {
	out := w.out
	if out.Digits < 3 || out.Digits > 15 {
		return
	}
	rhs, _ := out.Definition("rhs")
	if !out.Solved && rhs.Value <= out.Printing {
		w.hint("x is written with %d digits, which leaves ||r||2/||b||2 open by %s: write it with 17 digits and check again",
			out.Digits, num(out.Printing))
	}
}

// atLevel is the part of what rounding could make of a residual at most from
// which the residual passes as that: the bound is seldom reached, yet a residual
// far below it shows that it says nothing here.
const atLevel = 0.01

// atBest says what the residual means for x, and what can be reached at all.
func (w *work) atBest() {
	if r := w.out.Residual; r.Two <= r.Plain && r.Two >= atLevel*r.Plain && r.Two > 0 {
		w.hint("the residual is within the rounding of double precision (up to %s of ||b||): no method is sure to get below it",
			num(over(r.Plain, linear.Norm2(w.q.System.B))))
	}
	f := w.out.Factor
	if w.out.NoFactor != "" && w.out.Solved && !w.tooLarge {
		w.hint("x is one of many: A is singular, to rounding at least, and what it maps to zero may be added to x without being seen in the residual")
	}
	if k := w.out.Running.Condition; f == nil && w.tooLarge && k > 1 {
		w.hint("the condition of A is at least %s by its Ritz values: the relative error of x can be so many times ||r||2/||b||2", num(k))
	}
	if f == nil || !f.Sure || f.ErrorInf == 0 {
		return
	}
	text := fmt.Sprintf("x is off by %s of its largest entry, against a solution refined in twice the precision: about %s, %s",
		num(f.ErrorInf), many(int(correct(f.ErrorInf)), "correct digit", "correct digits"), f.expected())
	if math.Floor(f.Written) < math.Floor(f.Digits) {
		text += fmt.Sprintf("; the %d digits the matrix is written with determine x, at worst, to %s", w.q.System.Digits,
			many(int(f.Written), "digit", "digits"))
	}
	w.hint("%s", text)
}

// expected sets the correct digits of x beside those to expect.
func (f *Factor) expected() string {
	if math.Floor(correct(f.ErrorInf)) >= math.Floor(f.Digits) {
		return "as many as a stable solver can be expected to give"
	}
	return fmt.Sprintf("of about %.0f that a stable solver can be expected to give", math.Floor(f.Digits))
}
