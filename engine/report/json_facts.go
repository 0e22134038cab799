package report

import (
	"bytes"
	"encoding/json"

	"dwindle/engine/inspect"
)

// factsJSON writes the facts as one object, in their order.
type factsJSON struct {
	list  []named
	facts *inspect.Facts
}

type factJSON struct {
	Answer    string   `json:"answer"`
	Certainty *string  `json:"certainty"`
	Value     number   `json:"value"`
	Why       string   `json:"why"`
	Rows      []int    `json:"rows"`
	Labels    []string `json:"labels"` // of the rows; empty if none were given
}

func toFacts(f *inspect.Facts) factsJSON { return factsJSON{allFacts(f), f} }

// MarshalJSON writes {"name": {"answer": ...}, ...}.
func (fs factsJSON) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	b.WriteByte('{')
	for i, f := range fs.list {
		if i > 0 {
			b.WriteByte(',')
		}
		b.WriteString(`"` + f.name + `":`)
		if err := e.Encode(toFact(f.fact, fs.facts)); err != nil {
			return nil, err
		}
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

func toFact(f inspect.Fact, facts *inspect.Facts) factJSON {
	j := factJSON{Answer: string(f.Answer), Certainty: optional(string(f.Certainty)), Value: number(f.Value),
		Why: tame(f.Why), Rows: fromOne(f.Rows), Labels: labels(f.Rows, facts)}
	if f.Answer == "" || f.Answer == inspect.Unknown && f.Certainty == "" {
		j.Answer, j.Value = string(inspect.Unknown), unknown
	}
	return j
}
