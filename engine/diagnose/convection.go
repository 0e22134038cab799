package diagnose

import (
	"fmt"

	"dwindle/engine/inspect"
)

// convection: A is a mesh whose couplings point one way in most rows, as where
// a flow carries more than diffusion spreads.
var convection = Rule{"convection", func(c Case) []Finding {
	f := c.Facts
	if f.Study == nil || f.Study.Couplings == nil || f.Symmetric.Answer != inspect.No {
		return nil
	}
	k := f.Study.Couplings
	if !k.Scalar || !k.Mesh || k.OneWay < 0.5 || !(k.Ratio >= 10) {
		return nil
	}
	return []Finding{{Weight: Note, Certainty: inspect.Measured, Subject: OnSystem,
		Claim: fmt.Sprintf("%s of rows are coupled far more strongly one way than the other (median ratio %s), and A is not symmetric: transport dominates",
			percent(k.OneWay), num(k.Ratio)),
		Advice: "sweeps and incomplete factors follow the flow where the rows are numbered along it; eigenvalues tell little of gmres here",
		Try:    []string{"bicgstab+ilu:0", "gmres:30+ilu:0"},
		Evidence: []Evidence{number("share of rows", k.OneWay, ""), number("median ratio of strong to weak", k.Ratio, ""),
			number("dimension of the mesh", k.Dimension, "")}}}
}}
