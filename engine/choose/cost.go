package choose

import (
	"cmp"
	"fmt"
	"slices"
	"strings"

	"dwindle/engine/trace"
)

// cost is what a trial is taken to cost, in seconds, where trials are compared;
// what each of them took by the clock stays in its history.
type cost struct {
	setup, own float64 // all of the set-up; all
	setups     int     // builds of M that the set-up rests on; 0: it is this run's, as it was
	cpu        bool    // it is CPU time, for the machine was busy
	runs       []float64
}

func (c cost) solve() float64 { return c.own - c.setup }

// costs are the costs of all trials. Iterations are a trial's own: those of its
// median run. Its preparations and preconditioner are built alike whatever
// solver uses them, and who builds them first pays for cold pages and caches:
// for that part every trial counts with the median of all builds, in its own
// runs and in those of other trials.
func costs(trials []trace.History) []cost {
	builds := map[string][]float64{}
	for _, h := range trials {
		for _, p := range paid(h) {
			if p.build > 0 {
				key := basis(h.Pairing)
				builds[key] = append(builds[key], p.build)
			}
		}
	}
	for _, list := range builds {
		slices.Sort(list)
	}
	out := make([]cost, len(trials))
	for i, h := range trials {
		list, all := paid(h), builds[basis(h.Pairing)]
		for _, p := range list {
			out[i].runs = append(out[i].runs, p.own-p.build)
		}
		p := list[middle(out[i].runs)]
		if p.build > 0 {
			out[i].setups = len(all)
			typical := all[(len(all)-1)/2]
			p.setup, p.own = p.setup-p.build+typical, p.own-p.build+typical
			for k := range out[i].runs {
				out[i].runs[k] += typical
			}
		}
		out[i].setup, out[i].own, out[i].cpu = p.setup, p.own, p.cpu
	}
	return out
}

// rests says how many runs and set-ups the cost of a pairing is the median of.
func rests(r Ranked) string {
	var words []string
	if r.Runs > 1 {
		words = append(words, fmt.Sprintf("median of %d runs", r.Runs))
	}
	if r.Setups > r.Runs && bare(split(r.Pairing).precond) != "none" {
		words = append(words, fmt.Sprintf("set-up: median of %d with this preconditioner", r.Setups))
	}
	if len(words) == 0 {
		return ""
	}
	return " (" + strings.Join(words, "; ") + ")"
}

// basis is what a pairing iterates on: its preparations and preconditioner.
func basis(pairing string) string {
	p := split(pairing)
	return p.preps + p.precond
}

// payment is what one run took, in seconds: preparations and M, 0 where it got
// no further; all of its set-up; all.
type payment struct {
	build, setup, own float64
	cpu               bool
}

// paid are the payments of the first run of a trial and of those that repeated
// it. By the clock, but where the machine was busy the CPU time of the thread
// that drives: what others got of the processor is no method's doing.
func paid(h trace.History) []payment {
	runs := append([]trace.Run{{Build: h.BuildTime, Setup: h.SetupTime, Own: h.OwnTime,
		BuildCPU: h.BuildCPU, SetupCPU: h.SetupCPU, OwnCPU: h.OwnCPU}}, h.Reruns...)
	out := make([]payment, len(runs))
	for i, r := range runs {
		cpu := r.OwnCPU > 0 && r.OwnCPU.Seconds() < busyShare*r.Own.Seconds()
		if cpu {
			r.Build, r.Setup, r.Own = r.BuildCPU, r.SetupCPU, r.OwnCPU
		}
		out[i] = payment{r.Build.Seconds(), r.Setup.Seconds(), r.Own.Seconds(), cpu}
	}
	return out
}

// middle is where the median of a list stands, the lower one of two.
func middle(list []float64) int {
	at := make([]int, len(list))
	for i := range at {
		at[i] = i
	}
	slices.SortStableFunc(at, func(i, k int) int { return cmp.Compare(list[i], list[k]) })
	return at[(len(at)-1)/2]
}
