package report

import (
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
)

type findingJSON struct {
	Rule      string         `json:"rule"`
	Weight    string         `json:"weight"`
	Certainty string         `json:"certainty"`
	Subject   string         `json:"subject"`
	Claim     string         `json:"claim"`
	Advice    string         `json:"advice"`
	Try       []string       `json:"try"`
	Evidence  []evidenceJSON `json:"evidence"`
	Also      []string       `json:"also"` // other pairings of which the same is said
}

type evidenceJSON struct {
	Quantity  string   `json:"quantity"`
	Value     number   `json:"value"`
	Unit      string   `json:"unit"`
	Iteration *int     `json:"iteration"`
	Rows      []int    `json:"rows"`
	Labels    []string `json:"labels"` // of the rows; empty if none were given
}

func toFindings(fs []diagnose.Finding, facts *inspect.Facts) []findingJSON {
	out := make([]findingJSON, 0, len(fs))
	for _, f := range fs {
		j := findingJSON{Rule: tame(f.Rule), Weight: string(f.Weight), Certainty: string(f.Certainty),
			Subject: tame(f.Subject), Claim: tame(f.Claim), Advice: tame(f.Advice), Try: tameAll(f.Try),
			Evidence: []evidenceJSON{}, Also: tameAll(f.Also)}
		for _, e := range f.Evidence {
			k := evidenceJSON{tame(e.Quantity), number(e.Value), tame(e.Unit), nil, fromOne(e.Rows), labels(e.Rows, facts)}
			if e.Iteration >= 0 {
				k.Iteration = &e.Iteration
			}
			j.Evidence = append(j.Evidence, k)
		}
		out = append(out, j)
	}
	return out
}

// labels are those of rows, never nil; none where the rows have no labels.
func labels(rows []int, facts *inspect.Facts) []string {
	out := []string{}
	if facts == nil || facts.Names.Labels == nil {
		return out
	}
	for _, r := range rows {
		out = append(out, labelOf(r, facts))
	}
	return out
}

// labelOf is the label of a row, empty where it has none.
func labelOf(row int, facts *inspect.Facts) string {
	if facts == nil {
		return ""
	}
	return tame(facts.Names.Label(row))
}
