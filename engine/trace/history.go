package trace

import "time"

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
	Negative          bool    // a Ritz value is negative: no condition estimate
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
	Restarted  bool // a restarted method
	Monotone   bool // the true residual cannot grow in exact arithmetic
	Energy     bool // the energy norm of the error cannot grow (cg)
	Direct     bool // one step with an exact factorisation

	Iterations, Products, PrecondUses int
	SetupTime, OwnTime                time.Duration
	CPUShare                          float64 // driver CPU time over own time; NaN if not measured
	MemoryBytes                       int64   // a second form of A included
	// Storage is the form of A that products run on, such as "rows" or "3x3
	// blocks"; empty before set-up and where A is matrix-free.
	Storage string

	Residual         float64    // own norm relative to b, last
	TrueResidual     float64    // ‖b−Ax‖₂/‖b‖₂, last audit; NaN before the first
	BestTrue         float64    // smallest audit so far
	Backward         float64    // normwise backward error, last full audit; NaN before
	Componentwise    float64    // Oettli–Prager backward error; NaN before
	WorstRows        []RowShare // rows with the largest componentwise error (Share is it, capped at 1)
	UnsolvedRows     int        // rows whose componentwise error exceeds √tol
	Error            float64    // relative true error where the solution is known; NaN
	Floor            float64    // estimated accuracy floor of the true residual; NaN before known
	FloorHits        int        // audits at the floor
	SolutionNorm     float64    // ‖x‖₂ at the last audit
	Normal           float64    // ‖Aᵀr‖₂/(‖A‖_F‖r‖₂) at the end where b may be out of range; NaN
	PrecondAsymmetry float64    // |uᵀM⁻¹v − vᵀM⁻¹u| relative, probed at set-up; NaN if not probed

	WouldStop []StopMark
	Condition Condition
}

// Last returns the last record, or false if there is none.
func (h *History) Last() (Record, bool) {
	if len(h.Records) == 0 {
		return Record{}, false
	}
	return h.Records[len(h.Records)-1], true
}
