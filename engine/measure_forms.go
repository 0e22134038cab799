package engine

import (
	"dwindle/engine/linear"
	"dwindle/samples"
)

// formProducts times the products of the second forms of storage, with dot, on
// systems that take them.
func formProducts() ([]KernelSpeed, error) {
	var list []KernelSpeed
	for _, f := range []struct {
		sample string
		nodal  int // unknowns a node
	}{{measureOn, 1}, {"sample:duct:1000", 1}, {"sample:plate:300", 3}, {"sample:plate:200", 6}} {
		s, err := samples.Build(f.sample)
		if err != nil {
			return nil, err
		}
		a := s.Matrix()
		if f.nodal > 1 {
			a = coupled(shuffled(a), f.nodal)
		}
		list = append(list, formProduct(linear.Foresee(a)))
	}
	return list, nil
}

func formProduct(p linear.Plan) KernelSpeed {
	op := p.Build()
	n, _ := op.Dims()
	x, y := make([]float64, n), make([]float64, n)
	linear.Uniform(x, 1)
	return timed(p.Form+", with dot", p.Product, func() { linear.ApplyDot(op, y, x) })
}

// shuffled numbers the rows and columns of a anew, each a few places away, so
// that no diagonals are left.
func shuffled(a *linear.CSR) *linear.CSR {
	const places = 16
	p := linear.Natural(a.NRows)
	u := make([]float64, a.NRows)
	linear.Uniform(u, 1)
	for i := range p {
		k := min(i+int(places*(u[i]+1)/2), len(p)-1)
		p[i], p[k] = p[k], p[i]
	}
	return a.Permute(p, p)
}

// coupled makes each entry of a a full r×r block of that value: r unknowns at
// every node.
func coupled(a *linear.CSR, r int) *linear.CSR {
	c := &linear.CSR{NRows: r * a.NRows, NCols: r * a.NCols, Ptr: make([]int, 1, r*a.NRows+1)}
	for i := range c.NRows {
		cols, vals := a.Row(i / r)
		for k, j := range cols {
			for q := range r {
				c.Col, c.Val = append(c.Col, int32(r*int(j)+q)), append(c.Val, vals[k])
			}
		}
		c.Ptr = append(c.Ptr, len(c.Col))
	}
	return c
}
