package engine

import (
	"strings"
	"testing"

	"dwindle/engine/krylov"
	"dwindle/engine/precond"
)

// Every parameter of every method can be turned: its own value gives the same
// pairing, another one a pairing that says so, nonsense is refused by name.
func TestKnobsOfEveryMethod(t *testing.T) {
	var pairings []string
	for _, e := range krylov.Catalogue {
		pairings = append(pairings, e.Name+"+none")
	}
	for _, p := range precond.Catalogue {
		if !p.InUserUnits {
			pairings = append(pairings, "fgmres+"+p.Name)
		}
	}
	pairings = append(pairings, "match,rcm/gmres:30+ilut:1e-3,10")
	turned := 0
	for _, p := range pairings {
		knobs, err := Knobs(p)
		if err != nil {
			t.Fatal(err)
		}
		for k, knob := range knobs {
			same, err := Turn(p, k, knob.Value)
			again, _ := Knobs(same)
			if err != nil || len(again) != len(knobs) || again[k].Value != knob.Value {
				t.Errorf("%s: %s %s: %q, %v", p, knob.Name, knob.Value, same, err)
			}
			if _, err := Turn(p, k, "nonsense"); err == nil || !strings.Contains(err.Error(), knob.Name) {
				t.Errorf("%s: %s nonsense: %v", p, knob.Name, err)
			}
			for _, c := range knob.Choices {
				if other, err := Turn(p, k, c); err != nil || c != knob.Default && !strings.Contains(other, c) {
					t.Errorf("%s: %s %s: %q, %v", p, knob.Name, c, other, err)
				}
			}
			turned++
		}
	}
	if turned < 20 {
		t.Errorf("%d parameters only", turned)
	}
}

func TestTurn(t *testing.T) {
	for _, c := range []struct {
		pairing string
		k       int
		value   string
		want    string
		says    string
	}{
		{"match,rcm/gmres:30+ilut:1e-3,10", 0, "60", "match,rcm/gmres:60+ilut:1e-3,10", ""},
		{"cg+ic:0", 0, "2", "cg+ic:2", ""},
		{"cg+ic:0", 0, "", "cg+ic:0", ""},
		{"cg+ic:0", 0, "-1", "", "must lie in"},
		{"cg+ic:0", 0, "1.5", "", "whole number"},
		{"cg+none", 0, "1", "", "0 parameters"},
	} {
		got, err := Turn(c.pairing, c.k, c.value)
		if c.says == "" && (err != nil || got != c.want) || c.says != "" && (err == nil || !strings.Contains(err.Error(), c.says)) {
			t.Errorf("%s, knob %d to %q: %q, %v", c.pairing, c.k, c.value, got, err)
		}
	}
}
