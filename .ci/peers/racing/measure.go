package main

import (
	"errors"
	"fmt"
	"math"
	"path/filepath"
	"slices"
)

// measure prints the row of one case. The share of the race is taken of all runs
// as long as they would have taken now.
func measure(source, b string) error {
	runs, err := found(source, b)
	if err != nil {
		return err
	}
	all := 0.0
	for _, r := range runs {
		all += r.seconds
	}
	leaders := leading(runs)
	if len(leaders) == 0 {
		return errors.New("nothing converges")
	}
	rerun, err := session(source, b, true)
	if err != nil {
		return err
	}
	defer rerun.Close()
	times := make([][]float64, len(leaders))
	var chosens, races []float64
	count := map[string]int{}
	for range *rounds {
		chosen, spent, err := race(source, b)
		if err != nil {
			return err
		}
		count[chosen]++
		races = append(races, spent)
		again(rerun, leaders[0].pairing) // warms up what the race has left cold
		mine := math.NaN()
		for k, l := range leaders {
			t := again(rerun, l.pairing)
			times[k] = append(times[k], t)
			if l.pairing == chosen {
				mine = t
			}
		}
		if math.IsNaN(mine) {
			mine = again(rerun, chosen)
		}
		chosens = append(chosens, mine)
	}
	best, slower := 0, make([]float64, len(leaders))
	for k := range times {
		slower[k] = leaders[k].seconds / median(times[k])
		if median(times[k]) < median(times[best]) {
			best = k
		}
	}
	fmt.Printf("| %s | %s | %s | %.4f s | %s | %.4f s | %.2f | %.1f s | %.1f s | %.0f %% | %.2f |\n", filepath.Base(source), b, leaders[best].pairing, median(times[best]),
		often(count), median(chosens), median(chosens)/median(times[best]), median(races), all, 100*median(races)*median(slower)/all, median(slower))
	return nil
}

// race runs a race and returns what was chosen and the time of all its trials.
func race(source, b string) (chosen string, spent float64, err error) {
	s, err := session(source, b, false)
	if err != nil {
		return "", 0, err
	}
	defer s.Close()
	v := s.Snapshot()
	for _, t := range v.Trials {
		spent += t.History.OwnTime.Seconds()
		for _, r := range t.History.Reruns {
			spent += r.Own.Seconds()
		}
	}
	if v.Choice.Pairing == "" {
		return "", 0, fmt.Errorf("the race chose nothing")
	}
	return v.Choice.Pairing, spent, nil
}

func median(x []float64) float64 {
	y := slices.Clone(x)
	slices.Sort(y)
	if len(y) == 0 {
		return math.NaN()
	}
	return y[len(y)/2]
}

// often is what was chosen most often, with how often where not always.
func often(count map[string]int) string {
	best, total := "", 0
	for p, n := range count {
		total += n
		if n > count[best] || n == count[best] && p < best {
			best = p
		}
	}
	if count[best] == total {
		return best
	}
	return fmt.Sprintf("%s (%d of %d)", best, count[best], total)
}
