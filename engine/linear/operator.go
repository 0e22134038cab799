package linear

// Applier is anything that maps a vector to a vector.
type Applier interface {
	// Apply computes dst = A x. dst and x have the operator's row and
	// column count, do not overlap, and are not kept.
	Apply(dst, x []float64)
}

// Operator is an Applier that knows its shape.
type Operator interface {
	Applier
	Dims() (rows, cols int)
}

// Transposer is the ability to apply the transpose: dst = Aᵀ x.
type Transposer interface{ ApplyT(dst, x []float64) }

// Diagonaler is the ability to give the diagonal (length n); a missing entry
// is 0.
type Diagonaler interface{ Diagonal(dst []float64) }

// Rower is the ability to give one row's entries, columns ascending. The
// slices are views and must not be changed.
type Rower interface {
	Row(i int) (cols []int32, vals []float64)
}

// DotApplier is the ability to fuse the product with a dot product:
// dst = A x, returning xᵀ dst. It saves one pass over memory.
type DotApplier interface {
	ApplyDot(dst, x []float64) float64
}

// Failer is the ability to fail: an operator that can fail keeps its first
// error here, and the runner reads it after every step.
type Failer interface{ Err() error }

// wrapper is what a counting wrapper implements, so that As sees through it.
type wrapper interface{ Unwrap() any }

// As asks op for the ability T. It looks at op itself first, then through
// wrappers; a wrapper that must stay in the path (to count) implements the
// ability itself and answers for what it wraps.
func As[T any](op any) (T, bool) {
	for {
		if gate, ok := op.(interface{ Lacks(any) bool }); ok {
			var want *T
			if gate.Lacks(want) {
				var zero T
				return zero, false
			}
		}
		if t, ok := op.(T); ok {
			return t, true
		}
		w, ok := op.(wrapper)
		if !ok {
			var zero T
			return zero, false
		}
		op = w.Unwrap()
	}
}

// ApplyDot computes dst = A x and returns xᵀ dst, fused where op can.
func ApplyDot(op Applier, dst, x []float64) float64 {
	if f, ok := As[DotApplier](op); ok {
		return f.ApplyDot(dst, x)
	}
	op.Apply(dst, x)
	return Dot(x, dst)
}

// Func is a matrix-free operator: a product and nothing else.
type Func struct {
	N  int                    // order
	Do func(dst, x []float64) // dst = A x, both of length N
}

// Apply computes dst = A x.
func (f Func) Apply(dst, x []float64) { f.Do(dst, x) }

// Dims returns the order twice.
func (f Func) Dims() (rows, cols int) { return f.N, f.N }

// Identity is the operator that changes nothing: "no preconditioner". Solvers
// recognise it and skip the copy.
type Identity struct{}

// Apply computes dst = x.
func (Identity) Apply(dst, x []float64) { copy(dst, x) }

// ApplyT computes dst = x.
func (Identity) ApplyT(dst, x []float64) { copy(dst, x) }

// ApplyDot computes dst = x and returns xᵀ x.
func (Identity) ApplyDot(dst, x []float64) float64 {
	copy(dst, x)
	return Dot(x, x)
}
