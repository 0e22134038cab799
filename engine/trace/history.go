package trace

import (
	"math"
	"time"
)

// Norm names the norm a method watches.
type Norm string

// The norms.
const (
	TwoNorm            Norm = "2"                // ‖r‖₂
	ScaledNorm         Norm = "scaled 2"         // ‖r‖₂ in scaled units
	PrecondNorm        Norm = "preconditioned"   // √(rᵀM⁻¹r)
	LeftNorm           Norm = "left"             // ‖M⁻¹r‖₂
	NormalEquationNorm Norm = "normal-equations" // ‖Aᵀr‖₂
)

// StopMark is where a common stopping rule first held on a trial.
type StopMark struct {
	Rule string  // "rhs", "initial", "preconditioned", "backward", "energy"
	Iter int     // iteration, -1 if it never held
	True float64 // true relative residual there; NaN if not measured there
}

// Condition is what the recurrence coefficients say about the spectrum.
type Condition struct {
	Of                string // "A" or "M⁻¹A"; empty: the method gives none
	Smallest, Largest float64
	Estimate          float64 // Largest/Smallest, a lower bound of κ
	Settled           bool    // both ends have small Ritz residuals
	Negative          bool    // a Ritz value is negative, or M was seen not to be positive definite: no condition estimate
}

// Lock is a Ritz value that has settled on an eigenvalue: its residual bound
// is below a thousandth of its distance to the others.
type Lock struct {
	Value  float64
	Iter   int     // where it locked
	Copies int     // 1; more where lost orthogonality has made ghosts of it
	Weight float64 // share of the first residual (its M⁻¹ norm squared) that lies in it
}

// EnergyError encloses the energy norm of the error ‖x−x_k‖_A at one
// iteration, relative to ‖x−x₀‖_A at the first.
type EnergyError struct {
	Iter         int
	Lower, Upper float64 // Gauss; Gauss–Radau, NaN where no μ is known
}

// Prediction is when a trial is expected to reach the target, told while it ran.
type Prediction struct {
	Iter      int     // where it was told
	Total     float64 // iterations expected in all; +Inf if never
	Low, High float64 // the range thought likely
}

// What a counterfactual changes of the spectrum.
const (
	Deflated          = "deflated"               // the smallest eigenvalues are taken out
	WithoutSingletons = "without singleton rows" // those that stand on the diagonal of singleton rows are
)

// Counterfactual is how many iterations a trial would have needed on a changed
// spectrum, computed from its own coefficients.
type Counterfactual struct {
	What       string
	Removed    int     // eigenvalues taken out, copies not counted
	Largest    float64 // of them
	Next       float64 // the smallest that stays
	Iterations int
}

// Field is the residual of the rows of one field of unknowns.
type Field struct {
	Name          string
	Rows          int
	Residual      float64 // ‖(b−Ax)_f‖₂/‖b_f‖₂; relative to ‖b‖₂ where b_f is 0
	Componentwise float64 // Oettli–Prager, over its rows
	Tol           float64 // that must hold for it as well; 0 if none
}

// MProbe is what probing a preconditioner at set-up with random vectors showed.
type MProbe struct {
	Asymmetry    float64 // |uᵀM⁻¹v − vᵀM⁻¹u| relative to ‖u‖‖M⁻¹v‖
	Nonlinear    float64 // ‖M⁻¹(u+v) − M⁻¹u − M⁻¹v‖ relative
	Unrepeatable float64 // ‖M⁻¹v − M⁻¹v'‖ relative, the same v applied twice
	Distance     float64 // ‖v − γM⁻¹Av‖/‖v‖ with the best γ
	WrongWay     float64 // the same of M in place of M⁻¹, where M can be had; NaN
	Transposed   float64 // the same of Mᵀ in place of M, for a matrix of the user's own; NaN
	Opposite     bool    // vᵀM⁻¹v < 0 for every vector tried: −M may be what was meant
	Plain        float64 // the same of A scaled by its diagonal, without M
	Deviation    float64 // ‖A − M‖_F/‖A‖_F of incomplete factors, computed from them; 0 if it was not, or M is A
}

// Nearness is how far the last iterate of a trial lies from a solution that a
// trial has kept in two doubles.
type Nearness struct {
	Of    string  // that trial
	Error float64 // ‖x−x̂‖₂/‖x̂‖₂; of that trial itself: what rounding x̂ to one double moves
	Worst float64 // max |x_i−x̂_i|/|x̂_i| over the entries that are not zero
	// Doubt and WorstDoubt are what x̂ itself may be off by in these two measures,
	// estimated.
	Doubt, WorstDoubt float64
}

// Run is how long one run of a trial took: preparations and M, all of the
// set-up, and all; by the clock, and the CPU time of the thread that drives.
type Run struct {
	Build, Setup, Own          time.Duration
	BuildCPU, SetupCPU, OwnCPU time.Duration
}

// Column is one of several right-hand sides solved with one set-up.
type Column struct {
	Index      int // from 1, of the file
	Iterations int
	Seconds    float64 // without set-up
	True       float64 // ‖b−Ax‖₂/‖b‖₂
	Reached    bool
}

// History is everything a trial left behind. Records and Events are
// append-only: a copy of the struct is a consistent snapshot.
type History struct {
	Pairing string // canonical
	Today   bool   // the user's code runs this one now
	Stop    Stop
	Reason  string // one sentence on the ending; empty while live

	Norm       Norm
	Records    []Record // the first is iteration 0; long histories are thinned
	Events     []Event
	Notes      BuildNotes
	SymmetricA bool // the solver assumes A symmetric
	DefiniteA  bool // the solver assumes A positive definite
	SPDM       bool // the solver assumes M symmetric positive definite
	FixedM     bool // the solver assumes that M is one linear operator
	Restarted  bool // a restarted method
	Monotone   bool // the true residual cannot grow in exact arithmetic
	Energy     bool // the energy norm of the error cannot grow (cg)
	Direct     bool // one step with an exact factorisation
	TwoDoubles bool // x is the unevaluated sum of two doubles, and so is what its residuals and its ending are of

	Iterations, Products, PrecondUses int
	BuildTime, SetupTime, OwnTime     time.Duration // preparations and M; all of the set-up; all
	BuildCPU, SetupCPU, OwnCPU        time.Duration // of these, the CPU time of the thread that drives; 0 if not measured
	CPUShare                          float64       // OwnCPU over OwnTime; NaN if not measured
	MemoryBytes                       int64         // a second form of A included
	// Storage is the form of A that products run on, such as "rows" or "3x3
	// blocks"; empty before set-up and where A is matrix-free.
	Storage string

	Residual         float64    // own norm relative to b, last
	TrueResidual     float64    // ‖b−Ax‖₂/‖b‖₂, last audit; NaN before the first
	BestTrue         float64    // smallest audit so far
	Rounded          float64    // with TwoDoubles: the true residual of x rounded to one double; else NaN
	Backward         float64    // normwise backward error, last full audit; NaN before
	Componentwise    float64    // Oettli–Prager backward error; NaN before
	WorstRows        []RowShare // unsolved rows with the largest componentwise error (Share is it, capped at 1)
	UnsolvedRows     int        // rows whose componentwise error exceeds √tol, and not for a small x alone
	SmallRows        int        // of these, rows whose norm is far below those of the others
	Error            float64    // relative true error where the solution is known; NaN
	Floor            float64    // estimated accuracy floor of the true residual; NaN before known
	FloorHits        int        // audits at the floor
	SolutionNorm     float64    // ‖x‖₂ at the last audit
	Normal           float64    // ‖Aᵀr‖₂/(‖A‖_F‖r‖₂) at the end where b may be out of range; NaN
	PrecondAsymmetry float64    // |uᵀM⁻¹v − vᵀM⁻¹u| relative, probed at set-up; NaN if not probed

	WouldStop []StopMark
	Condition Condition

	// Alphas and Betas are the recurrence coefficients of every step of a
	// method of the conjugate gradient family (append-only, never thinned):
	// α_k and β_{k+1} as Hestenes and Stiefel name them; nil for other methods.
	Alphas, Betas []float64
	Locks         []Lock               // Ritz values that have settled, by iteration
	EnergyErrors  []EnergyError        // at growing iterations; nil where not known
	EnergyProved  bool                 // Upper rests on a proved μ; else μ is estimated from the smallest Ritz value
	Without       []Counterfactual     // of an ended trial that converged; nil where nothing changes
	Delay         int                  // iterations lost to lost orthogonality, estimated; 0 if none seen
	Harmonic      []complex128         // harmonic Ritz values of the last whole cycle of an Arnoldi method
	Predictions   []Prediction         // told at growing iterations, none before the curve has begun to fall
	Fields        []Field              // residuals by field of unknowns, last full audit
	Probe         *MProbe              // nil if not probed
	Counts        []int                // iterations of reruns with each b_i changed by one unit in its last place
	Near          *Nearness            // against a solution in two doubles; nil where there is none
	Reruns        []Run                // times of the same trial run again, where times were close
	Columns       []Column             // other right-hand sides solved with the same set-up
	Vectors       map[string][]float64 // what stands behind an event or the end, in the user's rows: "curvature", "slowest", "residual"
}

// Last returns the last record, or false if there is none.
func (h *History) Last() (Record, bool) {
	if len(h.Records) == 0 {
		return Record{}, false
	}
	return h.Records[len(h.Records)-1], true
}

// Unfallen says that the trial has iterated and its curve has shown no fall,
// so that nothing is foretold of it.
func (h *History) Unfallen() bool {
	const few = 4 // the first iterations are too few to say so
	return len(h.Predictions) == 0 && h.Iterations >= few && !h.Direct
}

// Attainable returns Floor where nothing contradicts it: NaN where the true
// residual came below it, and before that has fallen to a tenth.
func (h *History) Attainable() float64 {
	const nearAnswer = 0.1 // before, x has not grown to its size, which the floor goes by
	if h.Floor < 1 && h.BestTrue <= nearAnswer && !(h.BestTrue < h.Floor) {
		return h.Floor
	}
	return math.NaN()
}
