package choose

import (
	"math"
	"strconv"
	"strings"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

const (
	eachUse   = 5   // numbers of a product that an entry of M counts as, for its index, and its wait for the row before
	cycle     = 5   // passes over every level of a cycle: smoothing, residual, transfer
	eachRow   = 200 // of what is built
	eachEntry = 50
)

// work counts what a trial has done, in numbers touched: its products with A,
// uses of M, vectors of its method, and the making of M. Of trials too short
// for the clock it ranks better than their times, and the same on every run.
func work(f *inspect.Facts, h trace.History) float64 {
	n := float64(f.N)
	p := split(h.Pairing)
	entries := math.Max(worked(f, p.preps), n)
	own := float64(h.Notes.Entries)
	return float64(h.Products)*(entries+vectors(p.solver, h.Iterations)*n) + eachUse*float64(h.PrecondUses)*using(p.precond, own, entries) +
		making(bare(p.precond), own, n)
}

// worked is how many entries of A a product runs over behind these preparations:
// prune leaves the stored zeros out. The share of those of the file is taken for
// that of A, which may have more entries than the file.
func worked(f *inspect.Facts, preps string) float64 {
	entries := float64(f.Entries)
	for _, name := range strings.Split(strings.TrimSuffix(preps, "/"), ",") {
		if bare(name)+"/" == pruned && f.Stored > 0 {
			return entries * (1 - float64(f.ExplicitZeros)/float64(f.Stored))
		}
	}
	return entries
}

// using is the work of one use of a preconditioner with own entries, where A
// has so many. Of symmetric factors one is kept and two are solved with.
func using(precond string, own, entries float64) float64 {
	name, arg, _ := strings.Cut(precond, ":")
	switch name {
	case "none":
		return 0
	case "ic", "mic", "ict", "cholesky", "ldl", "fsai":
		return 2 * own
	case "amg":
		return cycle * own
	case "poly":
		degree, _ := strconv.Atoi(strings.SplitN(arg, ",", 2)[0])
		return float64(degree) * entries
	}
	return own
}

// making is the work of building a preconditioner with so many entries for
// n rows: a factor's rows are each combined with others of its length, an
// approximate inverse solves a small dense system a row. What is done entry by
// entry, with indices and memory, counts as much as many numbers of a product.
func making(precond string, entries, n float64) float64 {
	row := entries / math.Max(1, n)
	switch precond {
	case "none":
		return 0
	case "jacobi", "ssor", "sgs", "sor", "gs", "poly":
		return entries + eachRow*n/10
	case "fsai", "spai":
		return eachRow*n + eachEntry*entries + entries*row*row
	case "ict", "ilut", "ilutp":
		return eachRow*n + 2*eachEntry*entries + entries*row // and sorting
	case "amg":
		return eachRow*n + 2*eachEntry*entries
	}
	return eachRow*n + eachEntry*entries + entries*row
}

// vectors is how many vectors a method reads and writes beside each product.
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
	return 14
}
