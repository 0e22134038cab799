package precond

import (
	"context"
	"math"
	"testing"

	"gonum.org/v1/gonum/mat"

	"dwindle/engine/linear"
)

// elementStiffness returns that of the bilinear square of unit side in plane
// stress, E = 1 and ν = 0.3, by 2 x 2 Gauss points; unknowns u, v at the
// corners (0,0), (1,0), (1,1), (0,1).
func elementStiffness() *mat.Dense {
	const nu = 0.3
	d := mat.NewDense(3, 3, []float64{1, nu, 0, nu, 1, 0, 0, 0, (1 - nu) / 2})
	d.Scale(1/(1-nu*nu), d)
	k := mat.NewDense(8, 8, nil)
	for _, x := range []float64{0.5 - 0.5/math.Sqrt(3), 0.5 + 0.5/math.Sqrt(3)} {
		for _, y := range []float64{0.5 - 0.5/math.Sqrt(3), 0.5 + 0.5/math.Sqrt(3)} {
			dx, dy := []float64{y - 1, 1 - y, y, -y}, []float64{x - 1, -x, x, 1 - x}
			b := mat.NewDense(3, 8, nil)
			for c := range dx {
				b.Set(0, 2*c, dx[c])
				b.Set(1, 2*c+1, dy[c])
				b.Set(2, 2*c, dy[c])
				b.Set(2, 2*c+1, dx[c])
			}
			var p mat.Dense
			p.Product(b.T(), d, b)
			p.Scale(0.25, &p)
			k.Add(k, &p)
		}
	}
	return k
}

// membrane returns a square of n x n elements clamped on its left side, and
// its rigid motions: two shifts and a turn.
func membrane(n int) (*linear.CSR, [][]float64) {
	k := elementStiffness()
	var e []linear.Entry
	order := 2 * n * (n + 1)
	unknown := func(x, y, c int) int { return 2*(y*n+x-1) + c } // below 0 in the clamped column
	for y := 0; y < n; y++ {
		for x := 0; x < n; x++ {
			corner := [4][2]int{{x, y}, {x + 1, y}, {x + 1, y + 1}, {x, y + 1}}
			for r := 0; r < 8; r++ {
				for c := 0; c < 8; c++ {
					p, q := corner[r/2], corner[c/2]
					if p[0] > 0 && q[0] > 0 {
						e = append(e, linear.Entry{I: unknown(p[0], p[1], r%2), J: unknown(q[0], q[1], c%2), V: k.At(r, c)})
					}
				}
			}
		}
	}
	rigid := [][]float64{make([]float64, order), make([]float64, order), make([]float64, order)}
	for y := 0; y <= n; y++ {
		for x := 1; x <= n; x++ {
			i := unknown(x, y, 0)
			rigid[0][i], rigid[1][i+1] = 1, 1
			rigid[2][i], rigid[2][i+1] = -float64(y), float64(x)
		}
	}
	return linear.FromEntries(order, order, e), rigid
}

// A clamped membrane: with its rigid motions as near-null vectors the count
// stays level under refinement; with the constants of each direction it is
// larger, and with one constant for both larger still.
func TestAMGElasticity(t *testing.T) {
	e, v := lookup(t, "amg")
	counts := map[string][]int{}
	for _, n := range []int{20, 40, 80} {
		a, rigid := membrane(n)
		b := make([]float64, a.NRows)
		for i := 1; i < len(b); i += 2 {
			b[i] = -1
		}
		for name, s := range map[string]linear.System{
			"one": {A: a}, "dofs": {A: a, Dofs: 2}, "rigid": {A: a, Dofs: 2, NearNull: rigid},
		} {
			m, _, err := e.Build(context.Background(), s, v, nil)
			if err != nil {
				t.Fatal(err)
			}
			counts[name] = append(counts[name], steps(m, a, b, 1e-8))
		}
	}
	t.Log(counts)
	last := func(name string) int { return counts[name][2] }
	if last("rigid") > 20 || last("rigid")-counts["rigid"][0] > 5 {
		t.Errorf("rigid motions: %v iterations", counts["rigid"])
	}
	if !(last("rigid") < last("dofs") && last("dofs") < last("one")) {
		t.Errorf("iterations %v", counts)
	}
	if _, _, err := e.Build(context.Background(), linear.System{A: plate(3), Dofs: 2}, v, nil); err == nil {
		t.Error("9 unknowns pass for nodes of 2")
	}
}
