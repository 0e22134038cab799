package inspect

// Study is what a second, costlier look at a system found, within a budget of
// work: spectra and what changes them. A nil or NaN part was not looked at or
// did not fit the budget. Values are in the user's rows and units.
type Study struct {
	// Spectra of A itself ("A"), of A with its rows and columns equilibrated
	// ("equilibrated A"), of D^-1/2 A D^-1/2 for symmetric A with a positive
	// diagonal ("A scaled by its diagonal"), and of A without its singleton
	// rows ("A without singleton rows").
	Raw, Equilibrated, Jacobi, Rest *Spectrum

	Null []NullDirection // nearly free directions, the freest first
	Left []NullDirection // of a nonsymmetric A: as many that Aᵀ maps to zero as A does, to rounding
	// More: the search for what A maps to zero ended before all was found: Null,
	// and of a symmetric A the sums, show a part of it, of the dimension Nullity.
	// ZeroPivots are those of LDLᵀ of a symmetric A that vanish to rounding; 0 too
	// where A was not factorised without a shift.
	More       bool
	Nullity    int
	ZeroPivots int

	Normality *Normality // of a nonsymmetric A
	Density   []Bin      // of the eigenvalues of a symmetric A
	Couplings *Couplings
	Block     *Block // a repeating block proposed from the pattern
	Lines     []LineRows
	Lopsided  *Lopsided // where A is not symmetric, located
	Growth    *Growth
	Restore   *Restore // what would restore definiteness
	Digits    float64  // correct decimal digits to expect of x, from the condition after equilibration; NaN
}

// Spectrum is what is known of the spectrum, or the condition, of one operator.
type Spectrum struct {
	Of        string
	How       string    // "dense", "lanczos", "factor", "condest": the method
	Certainty Certainty // measured where both ends are converged; estimated else
	Exact     bool      // all eigenvalues are known, to rounding
	Norm      string    // of the condition: "2" or "1"
	// Smallest and Largest are the outermost eigenvalues of a symmetric
	// operator, singular values of another one; NaN if not known. The true
	// value lies within the bound beside it.
	Smallest, SmallestBound float64
	Largest, LargestBound   float64
	Condition               float64
	Condition1              float64      // in the 1-norm, by estimate: a lower bound; NaN without a factorisation
	Negative                int          // eigenvalues below zero; −1 if not counted
	Zeros                   int          // at the low end, proved to be zero: Smallest and as many of Low are 0
	Low, High               []float64    // the outermost values, from the end inwards, at most 16 each
	Values                  []complex128 // all eigenvalues where Exact, ordered by real part
}

// NullDirection is one direction that A, or of the left ones Aᵀ, nearly maps to
// zero.
type NullDirection struct {
	Quotient float64   // ‖Av‖/(‖A‖‖v‖), after equilibration
	Next     float64   // the same of the next direction: how isolated it is; NaN
	Rows     []int     // that carry it, the largest first, at most 16
	Shares   []float64 // of ‖v‖², of these rows
	Rigid    string    // "translation", "rotation" or "" : a motion of the coordinates
	Load     float64   // |vᵀb|/(‖v‖‖b‖) of a left one, or of a symmetric A: the part of b that pushes along it; NaN
	Rounding float64   // of a left one: ‖vᵀA‖ over 2⁻⁵³ ‖|v|ᵀ|A|‖, after equilibration: up to a few, rounding A's entries alone accounts for it
	Support  int       // rows that carry 99 % of it
	Part     int       // the connected part of A, from 0, that most of it lies in
	PartRows int       // rows of that part
	Tied     float64   // how many times as stiff as all else the two unknowns that carry it are tied to each other; 0 if they are not
	Level    *Level    // where it is one number; nil if it is none such
	Vector   []float64 `json:"-"` // length n, in the user's units
}

// Level says that a direction, in the user's units, is one number on some rows
// and zero on all others.
type Level struct {
	Count        int
	First, Last  int  // row; all between belong to it where Last−First+1 is Count
	ZeroDiagonal bool // they are the rows with a zero on the diagonal
}

// Normality says how far the eigenvalues of A can be trusted.
type Normality struct {
	Henrici             float64 // departure from normality relative to ‖A‖_F: √(1 − Σ|λ|²/‖A‖_F²), or its bound
	Exact               bool    // from all eigenvalues; else a lower bound, by balancing or from the commutator
	Equilibrated        float64 // the same of A equilibrated, so that units are not taken for it
	FieldMin, FieldMax  float64 // smallest and largest eigenvalue of (A+Aᵀ)/2
	FieldMinBound       float64 // (A+Aᵀ)/2 has an eigenvalue within it of FieldMin
	FieldSettled        bool    // both ends are
	FieldHoldsZero      bool
	SkewMax             float64 // largest |eigenvalue| of (A−Aᵀ)/2
	LeftmostRe, RightRe float64 // extreme real parts of the eigenvalues where Exact, else of Ritz values; NaN
}

// Bin is one bar of a spectral density, by stochastic Lanczos quadrature.
type Bin struct {
	From, To float64
	Count    float64 // eigenvalues in it, estimated
	Sd       float64 // standard error of Count
}

// Couplings tells how the strength of neighbours differs.
type Couplings struct {
	Scalar    bool    // nine rows in ten are of one sign off the diagonal and of the other on it; else only Mesh and Dimension are filled in
	OneWay    float64 // share of rows whose strong couplings are few and far stronger than the others
	Ratio     float64 // median ratio of strong to weak coupling in those rows
	Jump      float64 // largest ratio of the diagonals of neighbouring rows; 1 for none
	JumpRows  []int
	Mesh      bool    // the pattern looks like a mesh: bounded degree and large diameter
	Dimension float64 // of the mesh, from the growth of neighbourhoods; NaN
}

// Block is a repeating block of unknowns seen in the pattern.
type Block struct {
	Size  int
	Share float64 // of the blocks that are full
}

// LineRows are rows that constrain single unknowns.
type LineRows struct {
	Kind  string // "singleton", "row-replaced" or "penalty"
	Count int
	Rows  []int   // the first 16
	Value float64 // typical diagonal
	Other float64 // typical diagonal of the other rows
}

// Lopsided says where A differs from its transpose.
type Lopsided struct {
	Rows         []int // rows with an asymmetric entry, the first 16
	Count        int
	Identity     int      // of them: rows of the form e_i whose column is not
	IdentityRows []int    // the first 16
	OnlyThem     bool     // A without these rows and columns is symmetric
	Few          []int    // so few rows, at most 16, that A is symmetric without them and their columns; nil if none are known
	Pairs        [][2]int // the rows i < j of all unequal a_ij and a_ji, where they are no more than three; else nil
}

// Growth is how iterations grow with size, from smaller parts cut out of the system.
type Growth struct {
	Pairing    string
	Unknowns   []int
	Iterations []int
	Exponent   float64 // iterations ∝ unknowns^Exponent
}

// Restore is the smallest shift that makes A positive definite, estimated.
type Restore struct {
	Shift  float64   // A + Shift·D is positive definite
	Bound  float64   // of its error
	Of     string    // "diag A"
	Rows   []int     // that carry the direction which needs it, at most 16
	Shares []float64 // of the square of its norm, in units of the diagonal
}
