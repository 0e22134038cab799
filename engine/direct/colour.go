package direct

import (
	"slices"

	"dwindle/engine/linear"
)

// Colour gives each row a colour such that no two rows joined in the pattern
// of A + Aᵀ share one: greedily, rows of most neighbours first, each the
// lowest that is free (Welsh and Powell, Comput. J. 10 (1967) 85–86). colour
// has length n and values below number.
func Colour(a *linear.CSR) (colour []int32, number int) {
	g := patternOf(a)
	n := g.order()
	rows := linear.Natural(n)
	slices.SortStableFunc(rows, func(x, y int32) int { return len(g.neighbours(y)) - len(g.neighbours(x)) })
	colour = make([]int32, n)
	for i := range colour {
		colour[i] = unseen
	}
	taken := []int32{} // by which row each colour is ruled out, plus one
	for _, i := range rows {
		for _, j := range g.neighbours(i) {
			if c := colour[j]; c >= 0 {
				taken[c] = i + 1
			}
		}
		c := int32(0)
		for int(c) < len(taken) && taken[c] == i+1 {
			c++
		}
		if int(c) == len(taken) {
			taken = append(taken, 0)
		}
		colour[i] = c
	}
	return colour, len(taken)
}

// ByColour returns the order that puts rows of one colour together, each
// colour in the original order.
func ByColour(colour []int32, number int) linear.Permutation {
	next := make([]int, number+1)
	for _, c := range colour {
		next[c+1]++
	}
	for c := range number {
		next[c+1] += next[c]
	}
	p := make(linear.Permutation, len(colour))
	for i, c := range colour {
		p[next[c]] = int32(i)
		next[c]++
	}
	return p
}
