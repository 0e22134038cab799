package choose

import (
	"math"
	"slices"

	"dwindle/engine/diagnose"
)

// wayApart is how many times longer than what is too short for the clock today's
// pairing must take to be told from one that is too short.
const wayApart = 10

// gain is what the first of a ranking gains over today's pairing: by the clock
// where that tells them apart, else by counted work.
func gain(list []Ranked) diagnose.Gain {
	k := slices.IndexFunc(list, func(r Ranked) bool { return r.Today && r.Reached })
	if k < 0 {
		return diagnose.Gain{}
	}
	first, today := list[0], list[k]
	g := diagnose.Gain{Times: today.Seconds / first.Seconds, Today: today.Seconds, Best: first.Seconds}
	long := first.Seconds >= tooShort || today.Seconds >= wayApart*tooShort
	if k == 0 || long && (first.High < today.Low || today.High < first.Low) {
		return g
	}
	g.Times, g.ByWork = today.Work/math.Max(1, first.Work), true
	return g
}
