package check

import (
	"fmt"
	"math"
	"strings"
)

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
	d, ok := out.Definition(w.q.Rule) // definitions are named as the rules are
	if !ok {                          // without x₀ the first residual is b
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
	if out.Unsolved > 0 {
		out.Verdict += fmt.Sprintf("; but %s unsolved, worst %s with %s of |A||x|+|b|", many(out.Unsolved, "row is", "rows are"),
			out.Names.Row(w.unsolved.Row), num(w.unsolved.Share))
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
