package inspect

import (
	"math"
	"sort"

	"dwindle/engine/spectrum"
)

// spectra fills in the spectra of A and of what scaling, or the loss of its
// singleton rows, makes of it, and the digits to expect.
func (e *exam) spectra() error {
	if e.scaled == nil {
		return nil
	}
	if e.solver != nil {
		e.reserved = min(e.left/2, 2*e.searchWork()) // free directions matter more than another digit
		if e.f.PositiveDefinite.Answer == Yes && e.reserved > e.left/4 {
			e.reserved = 0 // the small end of the spectrum shows whether there are any
		}
	}
	defer func() { e.reserved = 0 }()
	var err error
	ask := func(of string, l, r []float64, index []int) *Spectrum {
		var x *Spectrum
		if err == nil {
			x, err = e.spectrumOf(e.see(of, l, r, index))
		}
		return x
	}
	d := byDiagonal(e.a)
	if !e.symmetric {
		d = nil
	}
	switch c, same := constant(d); {
	case same:
		if e.out.Raw = ask("A", nil, nil, nil); e.out.Raw != nil && e.shift == 0 {
			e.out.Jacobi = e.out.Raw.times("A scaled by its diagonal", c*c)
		}
	case d != nil && e.shift == 0:
		e.out.Jacobi = ask("A scaled by its diagonal", d, d, nil)
	}
	if e.out.Jacobi != nil && alike(e.row, d) {
		x := *e.out.Jacobi
		x.Of, e.out.Equilibrated = "equilibrated A", &x
	} else {
		e.out.Equilibrated = ask("equilibrated A", e.row, e.col, nil)
	}
	if e.out.Raw == nil {
		e.out.Raw = ask("A", nil, nil, nil)
	}
	if e.symmetric && 0 < e.f.Singletons && e.f.Singletons < e.f.N-1 {
		e.out.Rest = ask("A without singleton rows", nil, nil, e.coupled())
	}
	if e.out.Jacobi == nil && d != nil {
		e.out.Jacobi = ask("A scaled by its diagonal", d, d, nil)
	}
	e.doubtFactor()
	if x := e.out.Equilibrated; x != nil && x.Condition > 0 && x.Certainty == Measured {
		e.out.Digits = max(0, 53*math.Log10(2)-math.Log10(x.Condition))
	}
	return err
}

// shaky is the condition of A equilibrated from which solves with its
// factorisation may have no correct digit.
const shaky = 1e13

// doubtFactor calls estimated what rests on such a factorisation.
func (e *exam) doubtFactor() {
	if x := e.out.Equilibrated; x == nil || !(x.Condition > shaky) {
		return
	}
	for _, x := range []*Spectrum{e.out.Raw, e.out.Equilibrated, e.out.Jacobi, e.out.Rest} {
		if x != nil {
			x.Certainty = Estimated
		}
	}
}

// alike says whether two positive diagonals differ by no more than what an
// equilibration leaves open: of a definite matrix it is the scaling by the
// diagonal.
func alike(d, e []float64) bool {
	for i, v := range d {
		if math.Abs(v-e[i]) > 0.01*v {
			return false
		}
	}
	return true
}

// constant says whether a positive diagonal is the same number throughout, to
// rounding.
func constant(d []float64) (float64, bool) {
	if d == nil {
		return 0, false
	}
	for _, v := range d {
		if math.Abs(v-d[0]) > 1e-13*d[0] {
			return 0, false
		}
	}
	return d[0], true
}

// times returns the spectrum of the operator times a positive number.
func (x *Spectrum) times(of string, c float64) *Spectrum {
	y := *x
	y.Of = of
	y.Smallest, y.SmallestBound, y.Largest, y.LargestBound = c*x.Smallest, c*x.SmallestBound, c*x.Largest, c*x.LargestBound
	y.Low, y.High, y.Values = nil, nil, nil
	for _, v := range x.Low {
		y.Low = append(y.Low, c*v)
	}
	for _, v := range x.High {
		y.High = append(y.High, c*v)
	}
	for _, v := range x.Values {
		y.Values = append(y.Values, complex(c, 0)*v)
	}
	return &y
}

// coupled lists the rows that are no singletons.
func (e *exam) coupled() []int {
	alone := make([]bool, e.f.N) // no other nonzero in the row
	met := make([]bool, e.f.N)   // another nonzero in the column
	for i := range e.f.N {
		cols, vals := e.a.Row(i)
		alone[i] = true
		for k, j := range cols {
			if int(j) != i && vals[k] != 0 {
				alone[i], met[j] = false, true
			}
		}
	}
	var rows []int
	for i := range alone {
		if !alone[i] || met[i] {
			rows = append(rows, i)
		}
	}
	return rows
}

// spectrumOf measures one spectrum; nil where nothing fits the budget.
func (e *exam) spectrumOf(v *view) (*Spectrum, error) {
	x := &Spectrum{Of: v.of, Norm: "2", Certainty: Estimated, Negative: -1, Condition: math.NaN(), Condition1: math.NaN(),
		Smallest: math.NaN(), Largest: math.NaN(), SmallestBound: math.NaN(), LargestBound: math.NaN()}
	if v.invertible() && e.spend(oneNormSolves*e.solveWork()) {
		x.Condition1 = oneNorm(v.m) * spectrum.OneNorm(v.order(), v.inverse, v.inverseT)
	}
	if e.symmetric {
		return e.symmetricSpectrum(v, x)
	}
	return e.singularSpectrum(v, x)
}

// oneNormSolves is how many solves an estimate of the 1-norm takes at most.
const oneNormSolves = 11

// densely says whether all values of a view of order n are affordable, at work
// n³ times the factor.
func (e *exam) densely(n int, factor float64) bool {
	return n <= e.budget.Dense && e.spend(factor*float64(n)*float64(n)*float64(n))
}

// The ends are sought to endTolerance, with endBasis vectors held at a time
// and at most endProducts products; where only the matrix itself is at hand,
// and both ends are wanted, with more.
const (
	endTolerance = 1e-3
	endBasis     = 48
	endProducts  = 96
	bareProducts = 400
	endsKept     = 16
)

// ends finds the outermost eigenvalues of a symmetric operator, within the
// budget; nothing where that is not enough for a few steps.
func (e *exam) ends(n int, apply func(dst, x []float64), low, high int, product float64, products int) (spectrum.Outermost, error) {
	can := affordable(n, product, (e.left-e.reserved)/2, products)
	if can < 10 && can < n {
		return spectrum.Outermost{}, nil
	}
	out, err := spectrum.Ends(e.ctx, n, apply, spectrum.Wanted{Low: low, High: high, Tol: endTolerance, Basis: endBasis, Products: can})
	e.left -= lanczosWork(n, product, out.Products)
	return out, err
}

// lanczosWork is the work of k Lanczos steps of order n: products, and the
// orthogonalisation against a basis that grows up to endBasis vectors.
func lanczosWork(n int, product float64, k int) float64 {
	m := float64(min(k, endBasis))
	return float64(k)*product + 4*float64(n)*(m*m+endBasis*(float64(k)-m))
}

// affordable is the largest number of Lanczos steps, at most most, within the
// work.
func affordable(n int, product, work float64, most int) int {
	return sort.Search(most, func(k int) bool { return lanczosWork(n, product, k+1) > work })
}

// solveWork is the work of one solve with the factor, held to be that of some
// ten products where the factor is not asked.
func (e *exam) solveWork() float64 {
	if b, ok := e.solver.(interface{ Entries() int64 }); ok {
		return 4 * float64(b.Entries())
	}
	if b, ok := e.solver.(both); ok {
		if f, ok := b.Solver.(interface{ Entries() int64 }); ok {
			return 4 * float64(f.Entries())
		}
	}
	return 10 * e.product()
}
