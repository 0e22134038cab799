package report

import (
	"bytes"
	"encoding/json"

	"dwindle/engine/inspect"
)

// factsJSON writes the facts as one object, in their order.
type factsJSON []named

type factJSON struct {
	Answer    string  `json:"answer"`
	Certainty *string `json:"certainty"`
	Value     number  `json:"value"`
	Why       string  `json:"why"`
	Rows      []int   `json:"rows"`
}

func toFacts(f *inspect.Facts) factsJSON { return allFacts(f) }

// MarshalJSON writes {"name": {"answer": ...}, ...}.
func (fs factsJSON) MarshalJSON() ([]byte, error) {
	var b bytes.Buffer
	e := json.NewEncoder(&b)
	e.SetEscapeHTML(false)
	b.WriteByte('{')
	for i, f := range fs {
		if i > 0 {
			b.WriteByte(',')
		}
		b.WriteString(`"` + f.name + `":`)
		if err := e.Encode(toFact(f.fact)); err != nil {
			return nil, err
		}
	}
	b.WriteByte('}')
	return b.Bytes(), nil
}

func toFact(f inspect.Fact) factJSON {
	j := factJSON{Answer: string(f.Answer), Certainty: optional(string(f.Certainty)), Value: number(f.Value),
		Why: tame(f.Why), Rows: fromOne(f.Rows)}
	if f.Answer == "" || f.Answer == inspect.Unknown && f.Certainty == "" {
		j.Answer, j.Value = string(inspect.Unknown), unknown
	}
	return j
}
