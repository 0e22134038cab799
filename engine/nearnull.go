package engine

import (
	"dwindle/engine/linear"
	"dwindle/engine/load"
)

// setNearNull gives the system what the user knows of its nearly free motions,
// for multilevel methods: vectors from a file, or the rigid motions of its
// nodes, or how many unknowns stand next to each other at a node.
func setNearNull(s *linear.System, opt Options) error {
	n := s.N()
	s.Dofs = opt.Dofs
	if opt.Dofs > 1 && n%opt.Dofs != 0 {
		return badOption("--dofs %d does not divide the %d unknowns", opt.Dofs, n)
	}
	switch {
	case opt.Null != "":
		v, err := load.ColumnsFile(opt.Null, n)
		s.NearNull = v
		return err
	case opt.Coordinates != "":
		dofs := max(opt.Dofs, 1)
		x, err := load.ColumnsFile(opt.Coordinates, n/dofs)
		if err != nil {
			return err
		}
		if s.NearNull = rigidMotions(x, dofs); s.NearNull == nil {
			return badOption("--coordinates with %d columns and --dofs %d: rigid motions are known for 2 columns with 2 or 3 unknowns a node, and for 3 with 3 or 6", len(x), dofs)
		}
		s.Coordinates = byNode(x)
	}
	return nil
}

// byNode turns coordinates, one slice an axis, into one slice a node.
func byNode(x [][]float64) [][]float64 {
	nodes := make([][]float64, len(x[0]))
	for i := range nodes {
		nodes[i] = make([]float64, len(x))
		for c := range x {
			nodes[i][c] = x[c][i]
		}
	}
	return nodes
}

// rigidMotions returns the three rigid motions of a plane or the six of space
// for nodes at x (one slice a coordinate), with dofs unknowns a node:
// displacements, then rotations where there are more. nil for other counts.
func rigidMotions(x [][]float64, dofs int) [][]float64 {
	plane := len(x) == 2 && (dofs == 2 || dofs == 3)
	space := len(x) == 3 && (dofs == 3 || dofs == 6)
	if !plane && !space {
		return nil
	}
	nodes := len(x[0])
	var out [][]float64
	motion := func(at func(v []float64, node int)) {
		v := make([]float64, nodes*dofs)
		for k := 0; k < nodes; k++ {
			at(v[k*dofs:(k+1)*dofs], k)
		}
		out = append(out, v)
	}
	for c := range x {
		motion(func(v []float64, _ int) { v[c] = 1 })
	}
	if plane {
		motion(func(v []float64, k int) {
			v[0], v[1] = -x[1][k], x[0][k]
			if dofs == 3 {
				v[2] = 1
			}
		})
		return out
	}
	for axis := range 3 {
		p, q := (axis+1)%3, (axis+2)%3
		motion(func(v []float64, k int) {
			v[p], v[q] = -x[q][k], x[p][k]
			if dofs == 6 {
				v[3+axis] = 1
			}
		})
	}
	return out
}
