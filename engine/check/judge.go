package check

import (
	"fmt"
	"math"
	"strings"

	"dwindle/engine/linear"
)

// ruleOf is the definition behind each stopping rule.
var ruleOf = map[string]string{"rhs": "rhs", "initial": "initial", "backward": "backward", "absolute": "absolute"}

// Definition returns the definition of that name, or false.
func (a *Answer) Definition(name string) (Definition, bool) {
	for _, d := range a.Definitions {
		if d.Name == name {
			return d, true
		}
	}
	return Definition{}, false
}

// judge decides whether the rule and the fields' own tolerances hold.
func (w *work) judge() {
	out, tol := w.out, w.q.Tol
	d, ok := out.Definition(ruleOf[w.q.Rule])
	if !ok { // without x₀ the first residual is b
		d, ok = out.Definition("rhs")
	}
	if !ok || !finite(out.Residual.Two) {
		out.Verdict = "not solved: b-Ax is not a finite number"
		return
	}
	if !(d.Value <= tol) {
		out.Verdict = fmt.Sprintf("not solved: %s = %s, the rule asks for %.3g", d.Formula, num(d.Value), tol)
		return
	}
	for _, f := range out.Fields {
		if f.Tol > 0 && !(f.Residual <= f.Tol) {
			out.Verdict = fmt.Sprintf("not solved: field %s stands at %s, its own tolerance is %.3g; the rule itself holds with %s = %s",
				f.Name, num(f.Residual), f.Tol, d.Formula, num(d.Value))
			return
		}
	}
	out.Solved = true
	out.Verdict = fmt.Sprintf("solved: %s = %s, the rule asks for %.3g", d.Formula, num(d.Value), tol)
	if out.Componentwise > math.Sqrt(tol) {
		out.Verdict += fmt.Sprintf("; but %s unsolved, worst %s with %s of |A||x|+|b|", many(out.Unsolved, "row is", "rows are"),
			out.Names.Row(out.Worst[0].Row), num(out.Worst[0].Share))
	}
}

// claim says what a printed number may have been, in one sentence.
func (w *work) claim(m *Match) string {
	said := m.Said.Text
	if len(m.Fitting) == 0 {
		text := "none of the common definitions gives " + said
		if m.Nearest != nil {
			d, size := m.Nearest.Definition, m.Said.size()
			text += fmt.Sprintf("; the nearest is %s = %s, %s times it", d.Formula, num(d.Value), num(d.Value/size))
		}
		if out := w.out; out.Digits >= 3 && out.Digits <= 15 {
			return text + fmt.Sprintf(": x is written with %d digits, and the others change every measure", out.Digits)
		}
		return text + ": it may be a recurrence that has parted from b-Ax, a norm with a preconditioner other than diag A, or of another b or x"
	}
	var words []string
	onlyMinimal := true
	for _, f := range m.Fitting {
		text := f.Definition.Formula
		if f.First > 0 {
			text += fmt.Sprintf(" with the norm of A that %s has after %s (its residual there is that of x, too)",
				w.out.Running.Method, steps(f.First, f.Last))
		}
		words = append(words, text)
		onlyMinimal = onlyMinimal && f.Definition.Kind == Minimal
	}
	text := said + " is " + strings.Join(words[:min(len(words), mostFits)], ", or ")
	if more := len(words) - mostFits; more > 0 {
		text += fmt.Sprintf(", or %d more of the measures below", more)
	}
	if rhs, ok := w.out.Definition("rhs"); ok && onlyMinimal && rhs.Value > 10*m.Said.size() {
		text += fmt.Sprintf(": a measure that does not look at b; ||r||2/||b||2 is %s", num(rhs.Value))
	}
	return text
}

// mostFits is how many definitions a claim names.
const mostFits = 4

func finite(x float64) bool { return !math.IsNaN(x) && !math.IsInf(x, 0) }

func steps(first, last int) string {
	if first == last {
		return fmt.Sprintf("%d steps", first)
	}
	return fmt.Sprintf("%d to %d steps", first, last)
}

// num prints a measure in three digits.
func num(x float64) string { return fmt.Sprintf("%.3g", x) }

func many(n int, one, more string) string {
	if n == 1 {
		return "1 " + one
	}
	return fmt.Sprintf("%d %s", n, more)
}

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

// leastSquares says that no residual can be smaller.
func (w *work) leastSquares() {
	normal, ok := w.out.Definition("normal")
	rhs, _ := w.out.Definition("rhs")
	if ok && normal.Value <= w.q.Tol && rhs.Value > 100*w.q.Tol {
		w.hint("A'r = 0 to %s: x is a least-squares solution, and b is out of A's range, or nearly so", num(normal.Value))
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

// atBest says what the residual means for x, and what can be reached at all.
func (w *work) atBest() {
	if r := w.out.Residual; r.Two <= r.Plain && r.Two > 0 {
		w.hint("the residual is at the rounding level of double precision (%s of ||b||): no method gets far below it",
			num(over(r.Plain, linear.Norm2(w.q.System.B))))
	}
	f := w.out.Factor
	if k := w.out.Running.Condition; f == nil && w.tooLarge && k > 1 {
		w.hint("the condition of A is at least %s by its Ritz values: the relative error of x can be so many times ||r||2/||b||2", num(k))
	}
	if f == nil || !f.Sure || f.ErrorInf == 0 {
		return
	}
	text := fmt.Sprintf("x is off by %s of its largest entry: about %s, of about %.0f that a stable solver can be expected to give",
		num(f.ErrorInf), many(int(correct(f.ErrorInf)), "correct digit", "correct digits"), math.Floor(f.Digits))
	if math.Floor(f.Written) < math.Floor(f.Digits) {
		text += fmt.Sprintf("; the %d digits the matrix is written with determine x to about %.0f", w.q.System.Digits, math.Floor(f.Written))
	}
	w.hint("%s", text)
}
