package check

import (
	"math"

	"dwindle/engine/linear"
)

// Kind groups the definitions.
type Kind string

// The kinds of measure.
const (
	Absolute Kind = "residual"          // sizes of r = b−Ax
	Relative Kind = "relative residual" // held against b or r₀
	Scaled   Kind = "scaled by diag A"  // D = diag A stands for a preconditioner
	Backward Kind = "backward error"    // the smallest change of A and b that makes x exact
	Minimal  Kind = "relative to Ax"    // what minimal residual codes test: b is not looked at
	Normal   Kind = "normal equations"
	Error    Kind = "error of x"
)

// Definition is one common measure of how good a solution is.
type Definition struct {
	Name    string // stable, such as "rhs"
	Kind    Kind
	Formula string // ASCII: r = b − A x, r0 = b − A x0, D = diag A, F: Frobenius
	Value   float64
	Stops   bool // codes stop by it
	Holds   bool // it stops here at the tolerance asked for
	// From is the number of steps from which a running measure holds; 0 where
	// the measure is no running one or never holds. Value is then that after
	// the last step looked at.
	From int

	after func(k int) float64 // of a running measure, after k steps
}

// define lists every measure. Those that cannot be formed (no x₀, a diagonal
// that is not positive, no factorisation) are left out.
func (w *work) define() {
	w.sizes()
	w.againstStart()
	w.byDiagonal()
	w.backward()
	w.runningMeasures()
	w.normalEquations()
	w.errors()
}

func (w *work) add(name string, kind Kind, stops bool, formula string, value float64) {
	if math.IsNaN(value) {
		return
	}
	w.out.Definitions = append(w.out.Definitions, Definition{Name: name, Kind: kind, Formula: formula, Value: value,
		Stops: stops, Holds: stops && value <= w.q.Tol})
}

// sizes are the plain norms and those relative to b.
func (w *work) sizes() {
	r, b, n := w.out.Residual, w.q.System.B, float64(w.a.NRows)
	b1, b2, bInf := norm1(b), linear.Norm2(b), linear.NormInf(b)
	w.add("rhs", Relative, true, "||r||2/||b||2", over(r.Two, b2))
	w.add("rhs-1", Relative, true, "||r||1/||b||1", over(r.One, b1))
	w.add("rhs-inf", Relative, true, "||r||inf/||b||inf", over(r.Inf, bInf))
	w.add("rhs-squared", Relative, false, "(||r||2/||b||2)^2", over(r.Two, b2)*over(r.Two, b2))
	w.add("absolute", Absolute, true, "||r||2", r.Two)
	w.add("absolute-1", Absolute, false, "||r||1", r.One)
	w.add("absolute-inf", Absolute, true, "||r||inf", r.Inf)
	w.add("squared", Absolute, false, "||r||2^2", r.Two*r.Two)
	w.add("rms", Absolute, false, "||r||2/sqrt(n)", r.Two/math.Sqrt(n))
	w.add("mean-squared", Absolute, false, "||r||2^2/n", r.Two*r.Two/n)
	w.add("mean", Absolute, false, "||r||1/n", r.One/n)
}

// againstStart are those relative to r₀, where an x₀ was given.
func (w *work) againstStart() {
	if w.q.System.Guess == nil {
		return
	}
	r := w.out.Residual
	two := over(r.Two, linear.Norm2(w.r0))
	w.add("initial", Relative, true, "||r||2/||r0||2", two)
	w.add("initial-1", Relative, false, "||r||1/||r0||1", over(r.One, norm1(w.r0)))
	w.add("initial-inf", Relative, false, "||r||inf/||r0||inf", over(r.Inf, linear.NormInf(w.r0)))
	w.add("initial-squared", Relative, false, "(||r||2/||r0||2)^2", two*two)
}

// byDiagonal are the measures that a code with M = diag A has.
func (w *work) byDiagonal() {
	n := w.a.NRows
	d := make([]float64, n)
	w.a.Diagonal(d)
	positive := true
	for _, v := range d {
		if v == 0 {
			return
		}
		positive = positive && v > 0
	}
	left := func(v []float64) float64 {
		z := make([]float64, n)
		for i := range z {
			z[i] = v[i] / d[i]
		}
		return linear.Norm2(z)
	}
	energy := func(v []float64) float64 {
		z := make([]float64, n)
		for i := range z {
			z[i] = v[i] / math.Sqrt(d[i])
		}
		return linear.Norm2(z)
	}
	r, b := left(w.r), left(w.q.System.B)
	w.add("jacobi-left", Scaled, true, "||inv(D)r||2/||inv(D)b||2", over(r, b))
	w.add("jacobi-left-rhs", Scaled, true, "||inv(D)r||2/||b||2", over(r, linear.Norm2(w.q.System.B)))
	w.add("jacobi-left-absolute", Scaled, false, "||inv(D)r||2", r)
	if w.q.System.Guess != nil {
		w.add("jacobi-left-initial", Scaled, true, "||inv(D)r||2/||inv(D)r0||2", over(r, left(w.r0)))
	}
	if !positive {
		return
	}
	r, b = energy(w.r), energy(w.q.System.B)
	w.add("jacobi", Scaled, true, "sqrt(r'inv(D)r / b'inv(D)b)", over(r, b))
	w.add("jacobi-squared", Scaled, false, "r'inv(D)r / b'inv(D)b", over(r, b)*over(r, b))
	w.add("jacobi-absolute", Scaled, false, "sqrt(r'inv(D)r)", r)
	w.add("jacobi-absolute-squared", Scaled, false, "r'inv(D)r", r*r)
	if w.q.System.Guess != nil {
		w.add("jacobi-initial", Scaled, true, "sqrt(r'inv(D)r / r0'inv(D)r0)", over(r, energy(w.r0)))
	}
}

// normalEquations hold Aᵀr against its bound; least-squares codes stop by it.
func (w *work) normalEquations() {
	z, r := make([]float64, w.a.NRows), w.out.Residual.Two
	w.at.Apply(z, w.r)
	size := linear.Norm2(z)
	w.add("normal", Normal, true, "||A'r||2/(||A||F ||r||2)", over(size, w.out.Norms.Fro*r))
	w.add("normal-2", Normal, true, "||A'r||2/(||A||2 ||r||2)", over(size, w.out.Norms.Two*r))
	w.add("normal-absolute", Normal, false, "||A'r||2", size)
	w.at.Apply(z, w.q.System.B)
	w.add("normal-rhs", Normal, true, "||A'r||2/||A'b||2", over(size, linear.Norm2(z)))
}

// errors are those of x itself, where a factorisation or the made solution
// tells them.
func (w *work) errors() {
	if f := w.out.Factor; f != nil && f.Sure {
		w.add("error", Error, false, "||x*-x||2/||x*||2", f.Error2)
		w.add("error-inf", Error, false, "||x*-x||inf/||x*||inf", f.ErrorInf)
		w.add("energy", Error, true, "||x*-x||A/||x*||A", f.Energy)
	}
	if exact := w.q.System.Exact; exact != nil {
		e := make([]float64, len(exact))
		linear.Lin(e, 1, exact, -1, w.q.X)
		w.add("made-error", Error, false, "||x-xmade||2/||xmade||2", over(linear.Norm2(e), linear.Norm2(exact)))
	}
}
