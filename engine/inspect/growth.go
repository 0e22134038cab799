package inspect

import (
	"math"

	"dwindle/engine/linear"
)

// Parts of a system that growth is measured on: a quarter of the rows each
// time, of at least smallestPart, until the residual has fallen by growthTol.
const (
	smallestPart = 120
	growthTol    = 1e-8
)

// growth measures how the iterations of conjugate gradients, with the diagonal
// as preconditioner, grow with size: on breadth-first balls of the system of a
// quarter of its rows, a quarter of that, and so on, with b = 1, and on the
// whole where the budget allows. The iterations are those of a principal part,
// whose rim is held. It ends where a part turns out not to be definite.
func (e *exam) growth() error {
	c := e.out.Couplings
	if !e.symmetric || c == nil || !c.Mesh || e.f.PositiveDefinite.Answer == No {
		return nil
	}
	g := &Growth{Pairing: "cg+jacobi", Exponent: math.NaN()}
	sizes := []int{}
	for size := e.f.N; size >= smallestPart; size /= 4 {
		sizes = append([]int{size}, sizes...)
	}
	w := newBalls(e)
	centre := e.middle(w)
	if centre < 0 {
		return nil
	}
	for _, size := range sizes {
		if e.foreseen(g, size) > e.left {
			return nil
		}
		a := e.a
		if size < e.f.N {
			rows, _ := w.grow(centre, size)
			a = part(e.a, rising(rows, e.f.N))
		}
		its, err := e.iterations(a)
		if err != nil || its == 0 {
			return err
		}
		g.Unknowns, g.Iterations = append(g.Unknowns, a.NRows), append(g.Iterations, its)
		if k := len(g.Unknowns); k >= 2 {
			g.Exponent = fitPower(g.Unknowns[max(0, k-3):], g.Iterations[max(0, k-3):])
			kept := *g
			e.out.Growth = &kept
		}
	}
	return nil
}

// foreseen is the work of the next size if iterations grow as they did last, by
// a factor of two at first.
func (e *exam) foreseen(g *Growth, size int) float64 {
	k := len(g.Iterations)
	if k == 0 {
		return 0
	}
	factor := 2.0
	if k > 1 {
		factor = float64(g.Iterations[k-1]) / float64(g.Iterations[k-2])
	}
	share := float64(size) / float64(e.f.N)
	return factor * float64(g.Iterations[k-1]) * share * iterationWork(e.a)
}

// iterationWork is the work of one iteration of conjugate gradients.
func iterationWork(a *linear.CSR) float64 { return 2*float64(len(a.Val)) + 16*float64(a.NRows) }

// middle is a row far from the rim of the mesh: half way between two rows that
// are far apart, in a part that holds most of the system; -1 where there is no
// such part.
func (e *exam) middle(w *balls) int {
	for start := e.f.N / 2; start < min(e.f.N/2+64, e.f.N); start++ {
		rows, _ := w.grow(start, e.f.N)
		if 2*len(rows) < e.f.N {
			continue
		}
		rows, within := w.grow(int(rows[len(rows)-1]), e.f.N)
		half := len(within) / 2
		return int(rows[(within[max(0, half-1)]+within[half])/2])
	}
	return -1
}

// rising lists rows in rising order, of n in all.
func rising(rows []int32, n int) []int {
	in := make([]bool, n)
	for _, i := range rows {
		in[i] = true
	}
	var out []int
	for i, yes := range in {
		if yes {
			out = append(out, i)
		}
	}
	return out
}

// iterations of conjugate gradients with the diagonal on a x = 1; 0 where the
// budget is used up, or the matrix is not definite after all.
func (e *exam) iterations(a *linear.CSR) (int, error) {
	n := a.NRows
	d := byDiagonal(a)
	if d == nil {
		return 0, nil
	}
	r, z, p, q := make([]float64, n), make([]float64, n), make([]float64, n), make([]float64, n)
	for i := range r {
		r[i] = 1
		z[i] = d[i] * d[i]
	}
	copy(p, z)
	rho, target := linear.Dot(r, z), growthTol*math.Sqrt(float64(n))
	work := iterationWork(a)
	for its := 1; ; its++ {
		if err := e.ctx.Err(); err != nil {
			return 0, err
		}
		if !e.spend(work) {
			return 0, nil
		}
		curvature := linear.ApplyDot(a, q, p)
		if !(curvature > 0) {
			return 0, nil
		}
		alpha := rho / curvature
		linear.Axpy(-alpha, q, r)
		if linear.Norm2(r) <= target {
			return its, nil
		}
		for i, v := range r {
			z[i] = d[i] * d[i] * v
		}
		next := linear.Dot(r, z)
		linear.Lin(p, 1, z, next/rho, p)
		rho = next
	}
}

// fitPower is the slope of log iterations over log unknowns, by least squares.
func fitPower(unknowns, iterations []int) float64 {
	n, sx, sy, sxx, sxy := float64(len(unknowns)), 0.0, 0.0, 0.0, 0.0
	for k, u := range unknowns {
		x, y := math.Log(float64(u)), math.Log(float64(iterations[k]))
		sx, sy, sxx, sxy = sx+x, sy+y, sxx+x*x, sxy+x*y
	}
	return (n*sxy - sx*sy) / (n*sxx - sx*sx)
}
