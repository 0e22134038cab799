package krylov_test

import (
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/linear"
)

// The bits do not depend on the number of threads: every solver, with a
// preconditioner and without, and every preconditioner.
func TestThreadsGiveSameBits(t *testing.T) {
	defer linear.SetThreads(linear.Threads())
	a, b := plate(150), make([]float64, 22500)
	linear.Uniform(b, 9)
	compare := func(t *testing.T, e krylov.Entry, p string) {
		part, err := linear.ParsePart(p)
		if err != nil {
			t.Fatal(err)
		}
		m := build(t, a, part)
		linear.SetThreads(1)
		one := begunWith(t, a, m, b, nil, linear.Part{Name: e.Name})
		one.until(0, 12)
		linear.SetThreads(2)
		two := begunWith(t, a, m, b, nil, linear.Part{Name: e.Name})
		two.until(0, 12)
		if !same(one.last.Residual, two.last.Residual) {
			t.Errorf("%s+%s: %g and %g", e.Name, p, one.last.Residual, two.last.Residual)
		}
		sameVector(t, one.x(), two.x())
	}
	each(t, func(t *testing.T, e krylov.Entry) {
		compare(t, e, "none")
		compare(t, e, "jacobi")
	})
	flexible, _ := krylov.Lookup("fgmres")
	for _, p := range admissible(flexible) {
		compare(t, flexible, p)
	}
}
