package samples

import "dwindle/engine/linear"

var kershaw = Sample{
	Name:  "kershaw",
	Title: "four anchors tied in a ring",
	Shows: "incomplete Cholesky breaks down on a positive definite matrix: pivots 3, 5/3, 0.6, -5",
	Source: "D. Kershaw, The incomplete Cholesky-conjugate gradient method, " +
		"J. Comput. Phys. 26 (1978) 43-65 (cited from memory)",
	Spectrum: "3 - 2 sqrt(2) and 3 + 2 sqrt(2), each twice",
	Size:     func(linear.Values) (int, int) { return 4, 12 },
	Expect:   []string{"not-your-rhs", "pivot"},
	Make: func(linear.Values) (linear.System, error) {
		rows := [4][4]float64{{3, -2, 0, 2}, {-2, 3, -2, 0}, {0, -2, 3, -2}, {2, 0, -2, 3}}
		var e []linear.Entry
		for i, row := range rows {
			for j, v := range row {
				if v != 0 {
					e = append(e, linear.Entry{I: i, J: j, V: v})
				}
			}
		}
		return linear.System{A: linear.FromEntries(4, 4, e)}, nil
	},
}
