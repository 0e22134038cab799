package linear

import "math"

// RHS tells where a right-hand side comes from.
type RHS string

// The sources of a right-hand side.
const (
	FromFile RHS = "file"     // given by the user
	Embedded RHS = "embedded" // stored with the matrix
	Ones     RHS = "ones"     // every entry 1
	Made     RHS = "made"     // b = A x for a known random x
	Unit     RHS = "unit"     // one row is 1
)

// System is A x = b and what is known of it.
type System struct {
	Name  string    // as shown; never a path
	A     Operator  // square, order n; usually a *CSR
	B     []float64 // length n
	Guess []float64 // starting guess, length n; nil is zero
	Exact []float64 // the solution where it is known, length n; else nil
	RHS   RHS
	// Digits is the number of significant decimal digits the matrix values
	// are written with; 17 or more means each double came through exactly.
	Digits int
	Source Source
	// Open reads another square matrix, for preconditioners the user brings;
	// nil where files cannot be read.
	Open func(path string) (*CSR, error)
	// Dofs is how many unknowns of a node stand next to each other; 0 is 1.
	Dofs int
	// NearNull are vectors of length n that A maps nearly to zero, such as
	// rigid motions, for multilevel methods; nil: the constant, one for each
	// unknown of a node.
	NearNull [][]float64
	// Null are vectors of length n that a symmetric A was found to map to zero,
	// to rounding, beyond the constants that its sums show; nil: none known.
	Null [][]float64
	// LeftNull are vectors y of length n with yᵀA = 0, to rounding, that were
	// found of an A that is not symmetric; nil: none known.
	LeftNull [][]float64
	// Second marks the unknowns of the second block of a saddle system (length
	// n), such as pressures; nil: those with a zero on the diagonal.
	Second []bool
	// Shift is added to the diagonal, relative to it, before a preconditioner
	// is built; the system itself stays as it is.
	Shift float64
	// Labels names the rows, one each, as their owner does; nil: by number.
	Labels []string
	// Fields names the fields of unknowns, and FieldOf the field of each row
	// (length n); nil: no fields are known.
	Fields  []string
	FieldOf []int32
	// Coordinates are those of the nodes, one row of 1 to 3 numbers a node;
	// unknowns of node i are rows i·Dofs to i·Dofs+Dofs−1. Nil if not given.
	Coordinates [][]float64
}

// Source is what the reader noticed while it read a file.
type Source struct {
	Format        string    // such as "Matrix Market coordinate real symmetric"
	Symmetric     bool      // the file declares symmetric (one triangle stored)
	Stored        int       // entries in the file
	Duplicates    int       // entries that were summed into another one
	ExplicitZeros int       // stored entries equal to 0
	Notes         []string  // things a user should know, one sentence each
	RHS           []float64 // right-hand side stored with the matrix, else nil
}

// Matrix returns A's entries, or nil when A is matrix-free.
func (s System) Matrix() *CSR {
	m, ok := s.A.(*CSR)
	if !ok {
		return nil
	}
	return m
}

// N returns the order of the system.
func (s System) N() int {
	n, _ := s.A.Dims()
	return n
}

// Delta is the largest relative change of one entry that the printed digits
// leave open: half a unit of the last of Digits digits, 0 when the digits
// determine each double.
func (s System) Delta() float64 {
	if s.Digits <= 0 || s.Digits >= 17 {
		return 0
	}
	return 0.5 * math.Pow(10, float64(1-s.Digits))
}
