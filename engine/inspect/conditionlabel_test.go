package inspect_test

import (
	"math/rand/v2"
	"strings"
	"testing"

	"dwindle/engine/inspect"
)

// A is regular by the larger of two conditions, told in the norm that it is in:
// that in the 1-norm is an estimate from below.
func TestConditionIsToldInItsNorm(t *testing.T) {
	seen := map[string]int{}
	for seed := range uint64(20) {
		rng, n := rand.New(rand.NewPCG(seed, 8)), []int{6, 40}[seed%2]
		rows := make([][]float64, n)
		for i := range rows {
			rows[i] = make([]float64, n)
			for j := range rows {
				switch {
				case n == 6:
					rows[i][j] = rng.NormFloat64()
				case i == j || i == 0: // one row of ones: large in the 2-norm, in no column
					rows[i][j] = 1 + 0.1*rng.Float64()
				}
			}
		}
		f := studied(t, ones(dense(rows...), 17), inspect.Quick)
		expect(t, "singular", f.Singular, inspect.No, inspect.Measured)
		x := f.Study.Equilibrated
		want, least := "2-norm", false
		if x.Condition1 > x.Condition {
			want, least = "1-norm", true
		}
		seen[want]++
		if why := f.Singular.Why; !strings.Contains(why, want) || strings.Contains(why, "at least") != least {
			t.Errorf("seed %d: %s; %g in the 2-norm, %g in the 1-norm", seed, why, x.Condition, x.Condition1)
		}
		if f.Singular.Value != max(x.Condition, x.Condition1) {
			t.Errorf("seed %d: %g told", seed, f.Singular.Value)
		}
	}
	if len(seen) < 2 {
		t.Errorf("only %v", seen)
	}
}
