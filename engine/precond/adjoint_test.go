package precond

import (
	"testing"

	"dwindle/engine/linear"
)

// ⟨M⁻¹u, v⟩ = ⟨u, M⁻ᵀv⟩ for every entry that claims a transpose, on a matrix
// of unsymmetric pattern (symmetric methods: on the plate).
func TestTransposes(t *testing.T) {
	for _, e := range Catalogue {
		if !e.Transposes || e.InUserUnits {
			continue
		}
		for name, a := range map[string]*linear.CSR{"unsymmetric": unsymmetric(300), "plate": plate(17)} {
			if name == "unsymmetric" && e.Assumes&linear.AssumesSymmetric != 0 {
				continue
			}
			for _, form := range forms(e) {
				transposes(t, form, a)
			}
		}
	}
}

func transposes(t *testing.T, form string, a *linear.CSR) {
	t.Helper()
	m, _ := made(t, a, form)
	mt, ok := linear.As[linear.Transposer](m)
	if !ok {
		t.Fatalf("%s claims a transpose and has none", form)
	}
	n := a.NRows
	u, v, mu, mv := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	linear.Uniform(u, 1)
	linear.Uniform(v, 2)
	m.Apply(mu, u)
	mt.ApplyT(mv, v)
	near(t, form+": ⟨M⁻¹u,v⟩", linear.Dot(mu, v), linear.Dot(u, mv), 1e-12)
}
