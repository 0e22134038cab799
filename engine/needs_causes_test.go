package engine

import (
	"testing"

	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/linear"
)

// mesh returns the five-point Laplacian on side x side points plus wind times
// the central difference along rows.
func mesh(side int, wind float64) []linear.Entry {
	var e []linear.Entry
	put := func(i, j int, v float64) { e = append(e, linear.Entry{I: i, J: j, V: v}) }
	for r := range side {
		for c := range side {
			i := r*side + c
			put(i, i, 4)
			if c > 0 {
				put(i, i-1, -1-wind)
			}
			if c < side-1 {
				put(i, i+1, -1+wind)
			}
			if r > 0 {
				put(i, i-side, -1)
			}
			if r < side-1 {
				put(i, i+side, -1)
			}
		}
	}
	return e
}

// A row and its column without an entry: the cause is the row, not a zero on
// the diagonal that pivots could go round.
func TestEmptyRowIsNamed(t *testing.T) {
	var e []linear.Entry
	for _, x := range mesh(6, 0) {
		if x.I != 7 && x.J != 7 {
			e = append(e, x)
		}
	}
	v := ended(t, saved(t, "a.mtx", fromEntries(36, e)), Options{Pairs: []string{"cg+jacobi"}, RHS: "ones"})
	mustSay(t, v, "empty-row", diagnose.OnSystem, diagnose.Drag, inspect.Proved, "row 8", "nothing determines its unknown")
	silent(t, v, "zero-diagonal")
	column := dense(t, []float64{2, 1, 0}, []float64{1, 2, 0}, []float64{1, 0, 0})
	mustSay(t, ended(t, column, Options{Pairs: []string{"gmres:30+none"}}), "empty-row", diagnose.OnSystem, diagnose.Drag, inspect.Proved, "1 column", "that of row 3", "nothing determines")
	silent(t, ended(t, saved(t, "b.mtx", fromEntries(36, mesh(6, 0))), Options{Pairs: []string{"cg+jacobi"}}), "empty-row")
}

// Three rows assembled with an error of 1 %: symmetric without them.
func TestRowsThatSpoilSymmetry(t *testing.T) {
	e := mesh(20, 0)
	for k, x := range e {
		if x.I == 50 || x.I == 171 || x.I == 333 {
			if x.I != x.J {
				e[k].V *= 1.01
			}
		}
	}
	opt := Options{Pairs: []string{"gmres:30+none"}, RHS: "ones"}
	v := ended(t, saved(t, "a.mtx", fromEntries(400, e)), opt)
	f := mustSay(t, v, "few-rows-asymmetric", diagnose.OnSystem, diagnose.Drag, inspect.Measured, "3 rows", "51", "172", "334")
	if n := len(f.Evidence[0].Rows); n != 3 {
		t.Errorf("%d rows are named", n)
	}
	silent(t, ended(t, saved(t, "b.mtx", fromEntries(400, mesh(20, 0.3))), opt), "few-rows-asymmetric")
	silent(t, ended(t, saved(t, "c.mtx", fromEntries(400, mesh(20, 0))), opt), "few-rows-asymmetric")
}

// The lower triangle of a nonsymmetric A with its diagonal makes a fair M; its
// transpose a poor one.
func TestTransposedM(t *testing.T) {
	e := mesh(15, 0.9)
	var lower, upper []linear.Entry
	for _, x := range e {
		if x.J <= x.I {
			lower = append(lower, x)
			upper = append(upper, linear.Entry{I: x.J, J: x.I, V: x.V})
		}
	}
	a := saved(t, "a.mtx", fromEntries(225, e))
	right, wrong := "gmres:30+solve:"+saved(t, "l.mtx", fromEntries(225, lower)), "gmres:30+solve:"+saved(t, "u.mtx", fromEntries(225, upper))
	v := ended(t, a, Options{Pairs: []string{right, wrong}, RHS: "ones"})
	good, bad := trialLike(t, v, 0), trialLike(t, v, 1)
	mustSay(t, v, "preconditioner-transposed", bad.Pairing, diagnose.Drag, inspect.Estimated, "seems to be transposed")
	if f, ok := finding(v, "preconditioner-transposed", good.Pairing); ok {
		t.Errorf("the right M is called transposed: %s", f.Claim)
	}
	if good.Iterations >= bad.Iterations {
		t.Errorf("%d iterations with M, %d with its transpose", good.Iterations, bad.Iterations)
	}
}

// −D in place of D: cg makes the same iterates, for the signs cancel.
func TestSignOfM(t *testing.T) {
	minus := make([]float64, 100)
	for i := range minus {
		minus[i] = -0.25
	}
	v := ended(t, saved(t, "a.mtx", fromEntries(100, mesh(10, 0))), Options{Pairs: []string{"cg+given:" + diagonalFile(t, minus...)}, RHS: "ones"})
	f := mustSay(t, v, "preconditioner-not-spd", "", weightOf(only(t, v)), inspect.Measured, "wrong sign")
	if f.Advice != "change the sign of M" {
		t.Errorf("advice: %s", f.Advice)
	}
}

// Central differences of a strong wind: of ‖A‖_F² a point inside keeps 16 on
// the diagonal, 4 of diffusion and 2·wind² of convection.
func TestNearlySkew(t *testing.T) {
	v := ended(t, saved(t, "a.mtx", fromEntries(400, mesh(20, 60))), Options{Pairs: []string{"gmres:30+none"}, RHS: "ones", Iterations: 200})
	f := mustSay(t, v, "nearly-skew", diagnose.OnSystem, diagnose.Note, inspect.Measured, "skew-symmetric")
	a := fromEntries(400, mesh(20, 60))
	at, skew, all := a.Transpose(), 0.0, 0.0
	for i := range 400 {
		for j := range 400 {
			d := (a.At(i, j) - at.At(i, j)) / 2
			skew, all = skew+d*d, all+a.At(i, j)*a.At(i, j)
		}
	}
	within(t, "the square of the skew share", f.Evidence[0].Value*f.Evidence[0].Value, skew/all, 1e-12)
	silent(t, ended(t, saved(t, "b.mtx", fromEntries(400, mesh(20, 1))), Options{Pairs: []string{"gmres:30+none"}, RHS: "ones"}), "nearly-skew")
}

// b = 0 comes before all else.
func TestZeroRHSComesFirst(t *testing.T) {
	v := ended(t, saved(t, "a.mtx", fromEntries(400, mesh(20, 0))), Options{Pairs: []string{"cg+none"}, RHS: vector(t, make([]float64, 400)...)})
	if len(v.Findings) == 0 || v.Findings[0].Rule != "zero-rhs" {
		t.Errorf("first: %v", rules(v))
	}
}
