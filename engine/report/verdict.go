package report

import (
	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/trace"
)

// Reached says whether the goal was met: today's pairing converged if there
// is one, else any.
func (d Document) Reached() bool {
	for _, t := range d.Trials {
		if t.Today {
			return t.Stop == trace.Converged
		}
	}
	for _, t := range d.Trials {
		if t.Stop == trace.Converged {
			return true
		}
	}
	return false
}

// Blocked says whether a finding is a blocker.
func (d Document) Blocked() bool {
	for _, f := range d.Findings {
		if f.Weight == diagnose.Blocker {
			return true
		}
	}
	return false
}

// SystemOnly is the document without trials: facts, and the findings that
// concern no single pairing.
func (d Document) SystemOnly() Document {
	var on []diagnose.Finding
	for _, f := range d.Findings {
		if f.Subject == diagnose.OnSystem {
			on = append(on, f)
		}
	}
	d.Trials, d.Findings, d.Choice, d.Solution = nil, on, choose.Choice{}, nil
	return d
}
