package report

import (
	"fmt"
	"strconv"

	"gonum.org/v1/plot/vg"

	"dwindle/engine/choose"
	"dwindle/engine/trace"
)

// choicePart is the ranking with what it rests on, the settings of the choice
// and what was ruled out.
func choicePart(d Document) markup {
	c := d.Choice
	parts := []markup{rankingTable(c), bulletsUnder("Because", c.Reasons), bulletsUnder("Doubts", c.Doubts)}
	if len(c.Settings) > 0 {
		parts = append(parts, bulletsUnder("Settings, for any code", c.Settings))
	}
	var ruled []string
	for _, r := range c.RuledOut {
		ruled = append(ruled, r.Pairing+": "+r.Reason)
	}
	return join(append(parts, bulletsUnder("Ruled out", ruled))...)
}

func bulletsUnder(title string, items []string) markup {
	if len(items) == 0 {
		return ""
	}
	return join(element("h3", safe(title)), bullets(items))
}

func rankingTable(c choose.Choice) markup {
	columns := []column{{"", true}, {"pairing", false}, {"seconds to tolerance", true}, {"likely", true}, {"set-up", true}, {"its", true}, {"memory", true}}
	for _, n := range choose.Sides {
		columns = append(columns, column{fmt.Sprintf("for %d b", n), true})
	}
	columns = append(columns, column{"pays from", true})
	var rows [][]markup
	for i, r := range c.Ranked {
		name := element("code", safe(r.Pairing))
		if r.Pairing == c.Pairing {
			name = element("b", name)
		}
		if r.Reached {
			rows = append(rows, append([]markup{safe(strconv.Itoa(i + 1)), name}, words(rankedCells(r)...)...))
		}
	}
	out := table(columns, rows)
	if missed := notReached(c); missed != "" {
		out += element("p", safe("Not reached by "+missed+"."))
	}
	return out
}

// rankedCells are the numbers of one that reached the tolerance.
func rankedCells(r choose.Ranked) []string {
	cells := []string{trace.Took(r.Seconds), likely(r), trace.Took(r.Setup), strconv.Itoa(r.Iterations), memory(r.Memory)}
	for _, x := range r.For {
		cells = append(cells, forText(x))
	}
	return append(cells, breakEven(r))
}

// likely is the range of seconds thought likely.
func likely(r choose.Ranked) string {
	if !(r.Low > 0) || !(r.High > 0) || !finite(r.High) {
		return "-"
	}
	return trace.Took(r.Low) + " to " + trace.Took(r.High)
}

func forText(x float64) string {
	if !(x > 0) {
		return "-"
	}
	return trace.Took(x)
}

func breakEven(r choose.Ranked) string {
	if !finite(r.BreakEven) || r.BreakEven <= 1 {
		return "-"
	}
	return fmt.Sprintf("%.0f b", r.BreakEven)
}

// costPart draws what the trials cost.
func costPart(d Document) markup {
	t, ok := timeBars(d).picture(350)
	m, also := memoryBars(d).picture(350)
	body := join(
		small(t, ok, "Own time of the trials", "Own time: set-up solid, iterations pale; &gt;&gt; is cut."),
		small(m, also, "Memory of the trials", "Memory: preconditioner solid, the rest pale."))
	if body == "" {
		return ""
	}
	return element(`div class="many"`, body)
}

// spectrumPart draws what is known of spectra.
func spectrumPart(d Document) markup {
	parts := []markup{drawn(func(w, _ vg.Length) (picture, bool) { return spectrumPicture(d, w) },
		[2]vg.Length{820}, [2]vg.Length{340}, "Spectra of the system and of the trials",
		"From smallest to largest; ticks are values that are known, those of trials Ritz values that have locked.")}
	var pair []markup
	if d.Facts != nil && d.Facts.Study != nil {
		p, ok := densityPicture(d.Facts.Study.Density, 350, 220)
		pair = append(pair, small(p, ok, "Density of eigenvalues", "Eigenvalues of A in each range, estimated by stochastic Lanczos quadrature, with the standard error."))
	}
	p, ok := planePicture(d, 350, 260)
	pair = append(pair, small(p, ok, "Eigenvalues in the complex plane", cloudCaption(d)))
	if body := join(pair...); body != "" {
		parts = append(parts, element(`div class="many"`, body))
	}
	return join(parts...)
}

func cloudCaption(d Document) markup {
	var parts []markup
	for i, c := range clouds(d) {
		if i > 0 {
			parts = append(parts, ", ")
		}
		parts = append(parts, safe(c.label))
	}
	return join("Dots and rings: ", join(parts...), ".")
}

// outcomesPart holds predictions against what came of them.
func outcomesPart(d Document) markup {
	columns := []column{{"pairing", false}, {"predicted", false}, {"value", true}, {"came", true}}
	var rows [][]markup
	for _, o := range d.Choice.Outcomes {
		rows = append(rows, []markup{element("code", safe(o.Pairing)), safe(o.What), safe(short(o.Predicted)), safe(short(o.Came))})
	}
	parts := []markup{}
	if s := calibration(d.Choice.Outcomes); s != "" {
		parts = append(parts, element("p", safe("Own predictions in this session: "+s+".")))
	}
	return join(append(parts, table(columns, rows))...)
}
