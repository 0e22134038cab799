package choose

import (
	"fmt"
	"math"
	"strings"

	"dwindle/engine/inspect"
)

// notToldApart names those whose range of times overlaps with the first's.
func notToldApart(c Choice) []string {
	if c.Goal == Memory {
		return nil
	}
	first := c.Ranked[0]
	var names []string
	closest := 0.0
	for _, r := range c.Ranked[1:] {
		if r.Reached && r.two == first.two && r.Low <= first.High && r.Seconds >= first.Low {
			if len(names) == 0 {
				closest = math.Abs(r.Seconds/first.Seconds - 1)
			}
			names = append(names, r.Pairing)
		}
	}
	switch {
	case len(names) == 0:
		return nil
	case len(names) == 1:
		return []string{fmt.Sprintf("%s is not told apart from it: within %.0f %%", names[0], 100*closest)}
	}
	const most = 3
	more := ""
	if len(names) > most {
		more = fmt.Sprintf(" and %d more", len(names)-most)
		names = names[:most]
	}
	return []string{fmt.Sprintf("%s%s are not told apart from it: within what a repetition may differ by", strings.Join(names, ", "), more)}
}

// overturned says at how many right-hand sides another pairing is the better
// one.
func overturned(c Choice) []string {
	first := c.Ranked[0]
	for i := len(Sides) - 1; i > 0; i-- {
		best := first
		for _, r := range c.Ranked[1:] {
			if r.Reached && r.two == first.two && r.For[i] < best.For[i] {
				best = r
			}
		}
		if best.Pairing == first.Pairing || best.For[i] > (1-worth)*first.For[i] {
			continue
		}
		from := (best.Setup - first.Setup) / (first.For[i] - first.Setup - (best.For[i] - best.Setup)) * float64(Sides[i])
		if from < 1 { // by the clock it is better from the first on, and was not told apart
			continue
		}
		return []string{fmt.Sprintf("for %.0f right-hand sides and more, %s is better: %s for %d, against %s", math.Floor(from)+1, best.Pairing,
			took(best.For[i]), Sides[i], took(first.For[i]))}
	}
	return nil
}

// notUnique says that a singular A leaves more than one answer.
func notUnique(f *inspect.Facts) []string {
	if f == nil || f.Singular.Answer != inspect.Yes {
		return nil
	}
	return []string{fmt.Sprintf("x is not unique: A is singular (%s), and whatever it maps to zero may be added", f.Singular.Certainty)}
}
