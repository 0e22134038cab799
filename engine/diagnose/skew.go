package diagnose

import (
	"fmt"
	"math"

	"dwindle/engine/inspect"
)

// mostlySkew is the share of ‖A‖_F from which its skew-symmetric part rules A.
const mostlySkew = 0.95

// skew: A is skew-symmetric but for little, as central differences make of a
// strong convection.
var skew = Rule{"nearly-skew", func(c Case) []Finding {
	f := c.Facts
	share := f.Asymmetry / 2 // ‖(A−Aᵀ)/2‖_F over ‖A‖_F
	if !(share >= mostlySkew) {
		return nil
	}
	rest := math.Sqrt(math.Max(0, 1-share*share)) // the two parts are orthogonal
	return []Finding{{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("A is nearly skew-symmetric: its symmetric part is %s of it in the Frobenius norm, as central differences make of a strong convection; eigenvalues lie near the imaginary axis",
			percent(rest)),
		Advice: "if A is such, upwind differences or a finer mesh give it a symmetric part; as it stands, use gmres, or stabilisers of more steps (bicgstabl, idr)",
		Try:    []string{"bicgstabl:4+none", "gmres:60+none"},
		Evidence: []Evidence{number("||(A-A')/2||_F", share, "of ||A||_F"),
			number("||(A+A')/2||_F", rest, "of ||A||_F")}}}
}}
