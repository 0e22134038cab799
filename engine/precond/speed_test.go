package precond

import (
	"testing"

	"dwindle/engine/linear"
)

// Set-up and one use on the 5-point operator of 1000 x 1000 points.
func BenchmarkPlate(b *testing.B) {
	a := plate(1000)
	x, y := make([]float64, a.NRows), make([]float64, a.NRows)
	linear.Uniform(x, 1)
	for _, written := range []string{"ssor:1.5", "ic:0", "mic:0", "ict:0.001,10", "ilu:0", "ilut:0.001,25"} {
		p, err := linear.ParsePairing("cg+" + written)
		if err != nil {
			b.Fatal(err)
		}
		e, _ := Lookup(p.Precond.Name)
		v, err := linear.Resolve(e.Name, e.Params, p.Precond.Args)
		if err != nil {
			b.Fatal(err)
		}
		var m linear.Applier
		b.Run(written+"/build", func(b *testing.B) {
			for b.Loop() {
				if m, _, err = e.Build(b.Context(), linear.System{A: a}, v, nil); err != nil {
					b.Fatal(err)
				}
			}
		})
		for _, threads := range []int{1, 2} {
			linear.SetThreads(threads)
			b.Run(written+"/apply/"+string(rune('0'+threads)), func(b *testing.B) {
				for b.Loop() {
					m.Apply(y, x)
				}
			})
		}
	}
}
