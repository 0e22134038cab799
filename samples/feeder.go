package samples

import "dwindle/engine/linear"

var feeder = Sample{
	Name:  "feeder",
	Title: "power feeder of the weir: a main cable with branches and ties",
	Shows: "values over many decades from very short cables: cg crawls, diagonal scaling helps little, incomplete Cholesky repairs it",
	Source: "nodal admittances of a direct-current network: conductance 1/length, the substation eliminated, " +
		"loads as small conductances to earth; lengths invented, by a fixed generator",
	Spectrum: "positive definite; largest eigenvalue at most twice the largest diagonal entry",
	Params: []linear.Param{
		{Name: "n", Kind: linear.Int, Default: 500, Min: 2, Max: 5000000, Meaning: "nodes"},
		{Name: "short", Kind: linear.Real, Default: 1e-4, Min: 1e-9, Max: 1, Meaning: "length of the short cables over that of the others"},
	},
	Size:   func(v linear.Values) (int, int) { return v.Int("n"), 5 * v.Int("n") },
	Make:   makeFeeder,
	Expect: []string{"row-scaling", "residual-rises"},
}

func makeFeeder(v linear.Values) (linear.System, error) {
	n := v.Int("n")
	random := lehmer(20011)
	b := make([]float64, n)
	e := []linear.Entry{{I: 0, J: 0, V: 10}} // cable to the substation
	join := func(i, j int, g float64) {
		e = append(e, linear.Entry{I: i, J: i, V: g}, linear.Entry{I: j, J: j, V: g},
			linear.Entry{I: i, J: j, V: -g}, linear.Entry{I: j, J: i, V: -g})
	}
	for i := 0; i < n; i++ {
		if i > 0 {
			join(i, upstream(i, &random), 1/length(&random, v.Real("short")))
		}
		if i%50 == 49 && i > 60 {
			join(i, i-37, 0.2) // a long tie between branches
		}
		e = append(e, linear.Entry{I: i, J: i, V: 1e-2 * random.next()})
		b[i] = -0.01 * random.next() // current drawn
	}
	return linear.System{A: linear.FromEntries(n, n, e), B: b}, nil
}

// upstream is the node that feeds node i > 0: mostly the one before it, now
// and then one further back, where a branch begins.
func upstream(i int, random *lehmer) int {
	if random.next() < 0.2 {
		return max(0, i-2-int(8*random.next()))
	}
	return i - 1
}

// length of a cable in units of 100 m: one in twelve is a short link between
// busbars.
func length(random *lehmer, short float64) float64 {
	l := 0.5 + 2.5*random.next()
	if random.next() < 1.0/12 {
		l *= short
	}
	return l
}

// lehmer is the minimal standard generator of Park and Miller, Comm. ACM 31
// (1988) 1192-1201: s = 16807 s mod (2^31 - 1).
type lehmer uint64

// next returns a number between 0 and 1, ends excluded.
func (s *lehmer) next() float64 {
	*s = *s * 16807 % (1<<31 - 1)
	return float64(*s) / (1<<31 - 1)
}
