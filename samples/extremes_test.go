package samples

import "testing"

// TestExtremes builds every sample at the smallest value of its size.
func TestExtremes(t *testing.T) {
	for _, s := range Catalogue {
		spec := s.Name
		for _, p := range s.Params {
			if p.Name == "n" {
				spec += ":n=" + map[float64]string{1: "1", 2: "2"}[p.Min]
			}
		}
		sys, a := build(t, spec)
		checkForm(t, sys, a)
	}
}

func BenchmarkPlate1000(b *testing.B) {
	for b.Loop() {
		if _, err := Build("plate:1000"); err != nil {
			b.Fatal(err)
		}
	}
}
