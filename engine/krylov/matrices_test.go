package krylov_test

import (
	"context"
	"math"
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
	"dwindle/engine/precond"
	"dwindle/engine/trace"
)

// line returns tridiag(−1, 2, −1).
func line(n int) *linear.CSR {
	var e []linear.Entry
	for i := 0; i < n; i++ {
		e = append(e, linear.Entry{I: i, J: i, V: 2})
		if i > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1}, linear.Entry{I: i - 1, J: i, V: -1})
		}
	}
	return linear.FromEntries(n, n, e)
}

// plate returns the 5-point operator with stencil 4, −1 on an n x n grid.
func plate(n int) *linear.CSR {
	var e []linear.Entry
	for i := 0; i < n*n; i++ {
		e = append(e, linear.Entry{I: i, J: i, V: 4})
		if i%n > 0 {
			e = append(e, linear.Entry{I: i, J: i - 1, V: -1}, linear.Entry{I: i - 1, J: i, V: -1})
		}
		if i >= n {
			e = append(e, linear.Entry{I: i, J: i - n, V: -1}, linear.Entry{I: i - n, J: i, V: -1})
		}
	}
	return linear.FromEntries(n*n, n*n, e)
}

// diagonal returns diag(d).
func diagonal(d ...float64) *linear.CSR {
	e := make([]linear.Entry, len(d))
	for i, v := range d {
		e[i] = linear.Entry{I: i, J: i, V: v}
	}
	return linear.FromEntries(len(d), len(d), e)
}

// fromRows stores the nonzero entries of a dense matrix.
func fromRows(rows ...[]float64) *linear.CSR {
	var e []linear.Entry
	for i, r := range rows {
		for j, v := range r {
			if v != 0 {
				e = append(e, linear.Entry{I: i, J: j, V: v})
			}
		}
	}
	return linear.FromEntries(len(rows), len(rows[0]), e)
}

func ones(n int) []float64 {
	b := make([]float64, n)
	for i := range b {
		b[i] = 1
	}
	return b
}

// e1 returns the first unit vector.
func e1(n int) []float64 {
	b := make([]float64, n)
	b[0] = 1
	return b
}

// trial is one solver with one preconditioner on a system, without a runner.
type trial struct {
	t     *testing.T
	entry krylov.Entry
	s     krylov.Solver
	a     linear.Operator
	b     []float64
	n     int
	first trace.Reading
	last  trace.Reading
	steps int
	seen  []trace.Event
}

// begun builds the written pairing for A x = b and begins from guess.
func begun(t *testing.T, a linear.Operator, b, guess []float64, pairing string) *trial {
	t.Helper()
	p, err := linear.ParsePairing(pairing)
	if err != nil {
		t.Fatal(err)
	}
	return begunWith(t, a, build(t, a, p.Precond), b, guess, p.Solver)
}

// solverPart reads a solver with its parameters.
func solverPart(t *testing.T, text string) linear.Part {
	t.Helper()
	p, err := linear.ParsePairing(text)
	if err != nil {
		t.Fatal(err)
	}
	return p.Solver
}

// built makes the written preconditioner.
func built(t *testing.T, a linear.Operator, precond string) linear.Applier {
	t.Helper()
	p, err := linear.ParsePairing("cg+" + precond)
	if err != nil {
		t.Fatal(err)
	}
	return build(t, a, p.Precond)
}

func build(t *testing.T, a linear.Operator, part linear.Part) linear.Applier {
	t.Helper()
	pe, ok := precond.Lookup(part.Name)
	if !ok {
		t.Fatalf("no preconditioner %q", part.Name)
	}
	v, err := linear.Resolve(pe.Name, pe.Params, part.Args)
	if err != nil {
		t.Fatal(err)
	}
	m, _, err := pe.Build(context.Background(), linear.System{A: a}, v, nil)
	if err != nil {
		t.Fatal(err)
	}
	return m
}

// begunWith begins the solver with a given preconditioner.
func begunWith(t *testing.T, a linear.Operator, m linear.Applier, b, guess []float64, solver linear.Part) *trial {
	t.Helper()
	e, ok := krylov.Lookup(solver.Name)
	if !ok {
		t.Fatalf("no solver %q", solver.Name)
	}
	v, err := linear.Resolve(e.Name, e.Params, solver.Args)
	if err != nil {
		t.Fatal(err)
	}
	r := &trial{t: t, entry: e, s: e.New(v), a: a, b: b, n: len(b)}
	if r.first, err = r.s.Begin(krylov.Problem{A: a, M: m, B: b, X: guess}); err != nil {
		t.Fatal(err)
	}
	r.last = r.first
	r.keep(r.first)
	return r
}

func (r *trial) keep(rd trace.Reading) { r.seen = append(r.seen, rd.Events...) }

// step makes one step.
func (r *trial) step() trace.Reading {
	r.t.Helper()
	if r.last.Done {
		r.t.Fatalf("a step after the end: %+v, events %+v", r.last, r.seen)
	}
	var err error
	if r.last, err = r.s.Step(); err != nil {
		r.t.Fatal(err)
	}
	r.steps++
	r.keep(r.last)
	return r.last
}

// until steps until the own number is at most tol times the first, the solver
// is done, or limit is reached.
func (r *trial) until(tol float64, limit int) int {
	r.t.Helper()
	for !r.last.Done && r.steps < limit && r.last.Residual > tol*r.first.Residual {
		r.step()
	}
	return r.steps
}

// x returns the iterate.
func (r *trial) x() []float64 {
	x := make([]float64, r.n)
	r.s.Solution(x)
	return x
}

// truth returns ‖b − A x‖₂.
func (r *trial) truth() float64 {
	return linear.Residual(make([]float64, r.n), r.a, r.x(), r.b)
}

// event returns the first event of the kind.
func (r *trial) event(k trace.Kind) (trace.Event, bool) {
	for _, e := range r.seen {
		if e.Kind == k {
			return e, true
		}
	}
	return trace.Event{}, false
}

func near(t *testing.T, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s is %.16g, want %.16g within %g", what, got, want, tol)
	}
}
