package report

import (
	"math"
	"math/rand/v2"
	"time"

	"dwindle/engine/choose"
	"dwindle/engine/diagnose"
	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// typical is a document made by hand, with invented numbers.
func typical() Document {
	facts := &inspect.Facts{Name: "sluice.mtx", N: 400, Entries: 1920, Format: "Matrix Market coordinate real symmetric",
		Stored: 1160, Digits: 17, RHS: "ones", RHSNorm: 20, Components: 1, Complete: true, DiagPositive: 400,
		RowEntries: inspect.Range{Min: 3, Max: 5}, Bandwidth: 20, Dominant: 400, StrictlyDominant: 76,
		RowNorm: inspect.Range{Min: 4, Max: 4}, ColNorm: inspect.Range{Min: 4, Max: 4}, NormInf: 8, NormOne: 8, NormFro: 88,
		Gershgorin: inspect.Range{Min: 0, Max: 8}, Notes: []string{"one comment"}}
	facts.Symmetric = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved, Why: "‖A−Aᵀ‖ = 0", Value: 0}
	facts.PositiveDefinite = inspect.Fact{Answer: inspect.Yes, Certainty: inspect.Proved, Why: "Cholesky of A − cI", Value: math.NaN()}
	nan := math.NaN()
	cg := trace.History{Pairing: "cg+none", Today: true, Stop: trace.Converged, Norm: trace.TwoNorm, Iterations: 60, Products: 61,
		OwnTime: 60 * time.Millisecond, Residual: 9e-9, TrueResidual: 9.1e-9, BestTrue: 9.1e-9, Backward: 1e-10, Componentwise: 1e-8,
		Error: nan, Floor: nan, CPUShare: 0.98, WouldStop: []trace.StopMark{{Rule: "rhs", Iter: 60, True: 9.1e-9}, {Rule: "energy", Iter: -1}},
		Condition: trace.Condition{Of: "A", Smallest: 0.04, Largest: 7.9, Estimate: 178, Settled: true}}
	ic := cg
	ic.Pairing, ic.Today, ic.Iterations, ic.Products, ic.PrecondUses = "cg+ic:0", false, 20, 21, 21
	ic.OwnTime, ic.SetupTime, ic.MemoryBytes = 30*time.Millisecond, 2*time.Millisecond, 40000
	ic.Notes = trace.BuildNotes{Entries: 1160, Fill: 0.6, Bytes: 14000, MinPivot: 3.4, MaxPivot: 4, Broke: []trace.Pivot{{Row: 3, Value: -5}}}
	cg.Records, ic.Records = curveOf(61, time.Millisecond), curveOf(21, 1500*time.Microsecond)
	gm := trace.History{Pairing: "gmres:30+none", Stop: trace.Stagnated, Reason: "20 cycles cut the residual by less than 0.1 %",
		Norm: trace.TwoNorm, Iterations: 800, Products: 840, OwnTime: 400 * time.Millisecond, Residual: 2e-3, TrueResidual: 2e-3,
		Backward: nan, Componentwise: nan, Error: nan, Floor: nan, Events: []trace.Event{{Iter: 30, Kind: trace.Restart}}}
	for i := 0; i < 800; i++ {
		gm.Records = append(gm.Records, trace.Record{Iter: uint32(i), Clock: time.Duration(i) * 500 * time.Microsecond,
			Residual: max(2e-3, math.Pow(0.9, float64(i))), Audit: nan, Alpha: nan, Beta: nan})
	}
	refused := trace.History{Pairing: "cg+ilu:0", Stop: trace.Refused, Reason: "the preconditioner is not symmetric", TrueResidual: nan}
	return Document{Version: "0.1", Toolchain: "go1", Command: "dwindle run sluice.mtx --today cg+none", Machine: Machine{"Example 3000", 2, 1 << 32},
		Settings: Settings{Tol: 1e-8, StopRule: "rhs", Seconds: 30, Seed: 1},
		System:   System{"sluice.mtx", 400, 1920, "ones", 17, "9f86d081884c7d659a2feaa0c55ad015a3bf4f1b2b0b822cd15d6c15b0f00a08"},
		Facts:    facts, Trials: []trace.History{cg, ic, gm, refused}, Elapsed: 2 * time.Second,
		Findings: []diagnose.Finding{
			{Rule: "default-rhs", Weight: diagnose.Note, Certainty: inspect.Proved, Subject: diagnose.OnSystem, Claim: "b is all ones, not yours."},
			{Rule: "restart", Weight: diagnose.Drag, Certainty: inspect.Measured, Subject: "gmres:30+none",
				Claim: "restarting loses what was learned: 20 cycles of 30 cut the residual by a factor > 0.999 each", Advice: "Use a longer cycle, or cg: A is symmetric and definite.",
				Try: []string{"gmres:60+none", "cg+ic:0"}, Evidence: []diagnose.Evidence{{Quantity: "cycle factor", Value: 0.9995, Iteration: 800, Rows: []int{0, 4}}}},
		},
		Choice: choose.Choice{Pairing: "cg+ic:0", Gain: diagnose.Gain{Times: 2, Today: 0.06, Best: 0.03}, Reasons: []string{"it needs a third of the iterations"},
			Doubts: []string{"counts on your own b may differ several-fold: give --rhs"},
			Ranked: []choose.Ranked{{Pairing: "cg+ic:0", Seconds: 0.03, Setup: 0.002, Iterations: 20, Memory: 40000, Reached: true, BreakEven: nan},
				{Pairing: "cg+none", Seconds: 0.06, Iterations: 60, Reached: true, BreakEven: nan},
				{Pairing: "gmres:30+none", Seconds: nan, BreakEven: nan}}},
		Solution: []float64{1, -0.1, 1e-300}}
}

// curveOf falls evenly to 9e-9 in n records; the last is audited.
func curveOf(n int, each time.Duration) []trace.Record {
	var rs []trace.Record
	for i := range n {
		rs = append(rs, trace.Record{Iter: uint32(i), MatVecs: uint32(i + 1), Clock: time.Duration(i) * each,
			Residual: math.Pow(9e-9, float64(i)/float64(n-1)), Audit: math.NaN(), Alpha: math.NaN(), Beta: math.NaN()})
	}
	rs[n-1].Audit = 9.1e-9
	return rs
}

// wild is a document with anything a field can hold.
func wild(r *rand.Rand) Document {
	text := func() string { return nasty[r.IntN(len(nasty))] }
	num := func() float64 { return odd[r.IntN(len(odd))] }
	fact := func() inspect.Fact {
		return inspect.Fact{Answer: inspect.Answer([]string{"", "yes", "no", "unknown"}[r.IntN(4)]), Certainty: inspect.Certainty(text()),
			Why: text(), Value: num(), Rows: make([]int, r.IntN(17))}
	}
	d := Document{Version: text(), Toolchain: text(), Command: text(), Machine: Machine{text(), r.IntN(9), r.Int64()},
		Settings: Settings{Tol: num(), StopRule: text(), Iterations: r.IntN(100), Seconds: num(), Seed: r.IntN(9), FieldTols: text()},
		System:   System{text(), r.IntN(1e9), r.IntN(1e9), text(), r.IntN(20), text()}}
	if r.IntN(4) > 0 {
		d.Facts = &inspect.Facts{N: 3, Complete: r.IntN(2) == 0, Format: text(), RHS: "ones", RHSNorm: num(), Components: r.IntN(3),
			Symmetric: fact(), PositiveDefinite: fact(), Singular: fact(), Unreachable: fact(), Notes: []string{text()},
			DiagMissing: r.IntN(2), DiagRows: []int{2}, RowNorm: inspect.Range{Min: num(), Max: num()}, Gershgorin: inspect.Range{Min: num(), Max: num()}}
	}
	for range r.IntN(12) {
		d.Trials = append(d.Trials, wildTrial(r, text, num))
	}
	for range r.IntN(6) {
		d.Findings = append(d.Findings, diagnose.Finding{Rule: text(), Weight: []diagnose.Weight{"blocker", "drag", "note"}[r.IntN(3)],
			Certainty: "measured", Subject: text(), Claim: text(), Advice: text(), Try: []string{text()},
			Evidence: []diagnose.Evidence{{Quantity: text(), Value: num(), Unit: text(), Iteration: r.IntN(3) - 1, Rows: make([]int, r.IntN(20))}}})
	}
	if len(d.Trials) > 0 && r.IntN(2) == 0 {
		d.Choice.Pairing = d.Trials[0].Pairing
		d.Choice.Ranked = []choose.Ranked{{Pairing: d.Choice.Pairing, Seconds: num(), Setup: num(), Memory: r.Int64(), Reached: true, BreakEven: num()}}
	}
	d.Choice.Gain.Times, d.Choice.Reasons, d.Choice.Doubts = num(), []string{text(), text()}, []string{text()}
	if r.IntN(2) == 0 {
		wildDeep(r, &d)
	}
	return d
}

func wildTrial(r *rand.Rand, text func() string, num func() float64) trace.History {
	t := trace.History{Pairing: text(), Today: r.IntN(5) == 0, Stop: trace.Stop(r.IntN(int(trace.Failed) + 1)), Reason: text(),
		Iterations: r.IntN(1e9), Products: r.IntN(2e9), OwnTime: time.Duration(r.Int64()), SetupTime: time.Duration(r.IntN(1e9)),
		Residual: num(), TrueResidual: num(), Error: num(), Floor: num(), Norm: trace.Norm(text()),
		Condition: trace.Condition{Of: text(), Estimate: num(), Negative: r.IntN(2) == 0},
		WouldStop: []trace.StopMark{{Rule: "rhs", Iter: r.IntN(3) - 1, True: num()}},
		Events:    []trace.Event{{Kind: trace.Breakdown, Quantity: text(), Value: num(), Scale: num()}}}
	for i := range r.IntN(3) * r.IntN(300) {
		t.Records = append(t.Records, trace.Record{Iter: uint32(i), Clock: time.Duration(i * r.IntN(3) * 1000), Residual: num(), Audit: num()})
	}
	return t
}

var nasty = []string{"", "cg+none", "plate.mtx", "\x1b[31mred\x1b[0m\nnew line\ttab", "κ(M⁻¹A) ≥ 802, ‖b−Ax‖₂", "宽字 wide 😀", "\xff\xfe\x9b0m",
	"match,rcm/gmres:30+ilut:1e-3,10", "a | b `c` *d* _e_ <f>", "\u009b31m", "x", "longlonglonglonglonglonglonglonglonglonglonglonglonglonglonglonglonglonglonglonglonglonglong",
	"many words that go on and on and on so that the line has to be broken more than once, and then again, since it is meant to be too long for any line and any head; and on and on, until even two lines of the head are not enough to hold it all"}

var odd = []float64{0, math.Copysign(0, -1), 1, -1, 1e-9, 0.5, 1e300, -1e300, 5e-324, math.NaN(), math.Inf(1), math.Inf(-1), 123456.789, 1e-8, 3e-7, 41}
