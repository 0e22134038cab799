package choose

import (
	"math"
	"strconv"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	cycle   = 5  // passes over every level of a cycle: smoothing, residual, transfer
	coarsen = 60 // the same of making the levels
)

// work counts what a trial has done, in numbers touched: its products with A,
// uses of M, vectors of its method, and the making of M. Of trials too short
// for the clock it ranks better than their times, and the same on every run.
func work(f *inspect.Facts, h trace.History) float64 {
	n, entries := float64(f.N), math.Max(float64(f.Entries), float64(f.N))
	p := split(h.Pairing)
	own := float64(h.Notes.Entries)
	if bare(p.precond) == "none" {
		own = 0
	}
	use := own
	if bare(p.precond) == "amg" {
		use = cycle * own
	}
	if degree := strings.TrimPrefix(p.precond, "poly:"); degree != p.precond {
		d, _, _ := strings.Cut(degree, ",")
		k, _ := strconv.Atoi(d)
		use = float64(k) * entries
	}
	return float64(h.Products)*entries + float64(h.PrecondUses)*use + float64(h.Iterations)*vectors(p.solver, h.Iterations)*n +
		making(bare(p.precond), own, n)
}

// making is the work of building a preconditioner with so many entries for
// n rows: a factor's rows are each combined with others of its length, an
// approximate inverse solves a small dense system a row.
func making(precond string, entries, n float64) float64 {
	row := entries / math.Max(1, n)
	switch precond {
	case "none", "jacobi", "ssor", "sgs", "sor", "gs", "poly":
		return entries
	case "fsai", "spai":
		return entries * row * row
	case "amg":
		return coarsen * entries
	}
	return entries * row
}

// vectors is how many vectors an iteration of a method reads and writes.
func vectors(solver string, iterations int) float64 {
	name, arg, _ := strings.Cut(solver, ":")
	switch name {
	case "cg", "fcg", "cr", "richardson", "chebyshev":
		return 10
	case "gmres", "fgmres", "gcr", "gmresdr":
		m, err := strconv.Atoi(strings.SplitN(arg, ",", 2)[0])
		if err != nil {
			m = 30
		}
		return 4 + 2*math.Min(float64(m), float64(iterations)) // half a basis, read and subtracted twice
	}
	return 16
}
