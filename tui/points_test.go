package tui

import (
	"fmt"
	"math"
	"math/rand"
	"regexp"
	"slices"
	"strings"
	"testing"
	"time"

	"dwindle/engine/trace"
)

// odd are histories that a chart must survive.
func odd() map[string]trace.History {
	nan, inf := math.NaN(), math.Inf(1)
	rng := rand.New(rand.NewSource(3))
	noise := make([]float64, 3000)
	for i := range noise {
		noise[i] = math.Pow(10, 30*rng.NormFloat64())
	}
	return map[string]trace.History{
		"empty":    historyOf(trace.Waiting),
		"one":      historyOf(trace.Running, 1),
		"nan":      historyOf(trace.Diverged, nan, nan, nan),
		"inf":      historyOf(trace.Diverged, 1, inf, inf),
		"zero":     historyOf(trace.Converged, 1, 1e-3, 0),
		"zeros":    historyOf(trace.Converged, 0, 0),
		"negative": historyOf(trace.Failed, -1, math.Inf(-1)),
		"gap":      historyOf(trace.Running, 1, nan, 1e-2, inf, 1e-4),
		"tiny":     historyOf(trace.Running, 1, 5e-324, 1e-300),
		"huge":     historyOf(trace.Diverged, 1, math.MaxFloat64),
		"noise":    historyOf(trace.Running, noise...),
	}
}

// Points 1 and 2: a panic, a wide line, too many lines, a lost header, on any
// history at any size.
func TestPoint01And02AnyHistoryAnySize(t *testing.T) {
	names := []string{}
	for name := range odd() {
		names = append(names, name)
	}
	slices.Sort(names)
	sizes := [][2]int{{1, 1}, {2, 40}, {29, 6}, {30, 5}, {30, 6}, {40, 12}, {59, 16}, {60, 16}, {61, 17}, {80, 24}, {99, 33}, {120, 40}, {160, 20}, {200, 60}, {300, 100}}
	histories := odd()
	for _, name := range names {
		s := sessionOf(histories[name], historyOf(trace.Running, 1, 0.1), histories[name])
		everyScreen(t, s, sizes, name)
	}
}

// everyScreen draws every screen in every glyph set at these sizes.
func everyScreen(t *testing.T, s session, sizes [][2]int, name string) {
	t.Helper()
	for _, size := range sizes {
		for _, g := range glyphNames {
			m := screenOf(s, size[0], size[1], g)
			m.on = brush(size[0]%2 == 0)
			for _, keys := range [][]string{nil, {"r"}, {"x", "X"}, {"l", "x"}, {"v"}, {"?"}, {"esc", "a"}, {"esc", "n"}, {"/", "q", "enter"}, {"enter", "p"}, {"e", "9"}, {"esc", "esc", "esc", "esc", "i"}, {"pgdown"}, {"esc", "e"}, {"m"}, {"p"},
				{"esc", "tab"}, {"/"}, {"esc", "tab"}, {"o"}, {"pgdown"}, {"tab"}, {"pgdown"}, {"G"}} {
				press(m, keys...)
				sound(t, m, fmt.Sprintf("%s %dx%d %s %v", name, size[0], size[1], g, keys))
			}
		}
	}
}

// Points 1 and 2 again, on random sizes and histories.
func TestPoint01And02Random(t *testing.T) {
	rng := rand.New(rand.NewSource(7))
	for range 150 {
		var all []trace.History
		for range rng.Intn(14) {
			r := make([]float64, rng.Intn(200))
			for i := range r {
				r[i] = math.Pow(10, rng.Float64()*40-30)
			}
			all = append(all, historyOf(trace.Stop(rng.Intn(16)), r...))
		}
		w, h := 1+rng.Intn(300), 1+rng.Intn(100)
		m := screenOf(sessionOf(all...), w, h, glyphNames[rng.Intn(3)])
		sound(t, m, fmt.Sprintf("%d trials %dx%d", len(all), w, h))
	}
}

// Point 3: a byte over 127 in ASCII glyphs, an escape without colours: sound
// checks both on every screen; here with a claim full of signs.
func TestPoint03SignsAreSpelled(t *testing.T) {
	f := newFake(8, still(12.3))
	f.findings[0].Claim = "κ(M⁻¹A) ≥ 8.3e5 — ‖b−Ax‖₂ → ∞, λ₁₂ ≈ −2·10⁻¹⁰…"
	m := screenOf(f, 120, 40, "ascii")
	sound(t, m, "signs")
	if want := "cond(M^-1A) >= 8.3e5 - ||b-Ax||_2 -> inf, lambda_12 ~ -2*10^-10..."; !strings.Contains(m.View(), want) {
		t.Errorf("not spelled out:\n%s", m.View())
	}
}

// chartOf is the chart's rows and the plot behind a frame.
func chartOf(m *model) []string {
	lines := strings.Split(m.View(), "\n")
	for i, line := range lines {
		if strings.Contains(line, "# trial") {
			return lines[1 : i-2]
		}
	}
	return nil
}

// Point 10: a curve without its digit, a picked row without ">".
func TestPoint10Digits(t *testing.T) {
	for _, g := range glyphNames {
		for _, size := range [][2]int{{60, 16}, {80, 24}, {120, 40}, {200, 60}} {
			m := screenOf(newFake(8, still(12.3)), size[0], size[1], g)
			chart := strings.Join(cutMargin(chartOf(m)), "\n")
			for id := 1; id <= 8; id++ {
				if !strings.Contains(chart, fmt.Sprint(id)) {
					t.Errorf("%s %v: trial %d has no digit:\n%s", g, size, id, chart)
				}
			}
			if !strings.Contains(m.View(), "\n>  1 cg+none") {
				t.Errorf("%s %v: no > before the picked row", g, size)
			}
		}
	}
}

// cutMargin takes the labels off the rows of a chart.
func cutMargin(rows []string) []string {
	out := make([]string, len(rows))
	for i, r := range rows {
		out[i] = string([]rune(r)[plot{tol: 1e-8}.margin():])
	}
	return out
}

// Point 11: a short trial without a mark, a diverging one that squeezes the
// rest, identical curves without both tags, tags that read as one number.
func TestPoint11Tags(t *testing.T) {
	long := make([]float64, 20000)
	for i := range long {
		long[i] = math.Pow(10, -4*float64(i)/20000)
	}
	up := []float64{1, 1e20, 1e40}
	s := sessionOf(historyOf(trace.Running, long...), historyOf(trace.Converged, 1, 1e-5, 1e-9),
		historyOf(trace.Running, long...), historyOf(trace.Diverged, up...), historyOf(trace.Converged, 1, 1e-5, 1e-9))
	for _, g := range glyphNames {
		m := screenOf(s, 80, 24, g)
		rows := cutMargin(chartOf(m))
		chart := strings.Join(rows, "\n")
		for _, want := range []string{"1", "2+", "3", "4^!", "5+"} {
			if !strings.Contains(chart, want) {
				t.Errorf("%s: no %q in\n%s", g, want, chart)
			}
		}
		if m.trials.y.top > headroom {
			t.Errorf("%s: the chart reaches up to 1e%d", g, m.trials.y.top)
		}
		if g != "ascii" { // there the digits are the curve
			if two := regexp.MustCompile(`[0-9]\+?[0-9]`).FindString(chart); two != "" {
				t.Errorf("%s: %q reads as one number in\n%s", g, two, chart)
			}
		}
	}
}

// Point 12: uneven decades, a tolerance label missing or doubled, a chart
// whose height or range changes while trials run.
func TestPoint12Axes(t *testing.T) {
	for rows := 2; rows <= 90; rows++ {
		for low := -25; low <= -1; low++ {
			d := decades{top: 2, low: low, rows: rows}
			labels := d.labels(1e-8)
			n, last := 0, -9
			for r, l := range labels {
				switch {
				case l == "":
					continue
				case l == "1e-08":
					n++
				case last == r-1:
					t.Fatalf("%v: labels in rows %d and %d", d, last, r)
				}
				var e int
				fmt.Sscanf(l, "1e%d", &e)
				if got := d.row(float64(e)); math.Abs(got-float64(r)) > 0.5 {
					t.Fatalf("%v: %s in row %d, not %.2f", d, l, r, got)
				}
				last = r
			}
			if low <= -8 && n != 1 {
				t.Fatalf("%v: %d labels for the tolerance", d, n)
			}
		}
	}
	now := 0.5
	m := screenOf(newFake(8, func() time.Duration { return span1(now) }), 80, 24, "dot")
	height, top, low, x := len(chartOf(m)), m.trials.y.top, m.trials.y.low, m.trials.spans
	for ; now < 30; now += 0.37 {
		m.Update(ticked{m.ticking})
		if got := len(chartOf(m)); got != height {
			t.Fatalf("at %.1f s the chart has %d rows, before %d", now, got, height)
		}
		y := m.trials.y
		if y.top < top || y.low > low || m.trials.spans[0].top < x[0].top {
			t.Fatalf("at %.1f s an axis shrank", now)
		}
		top, low, x = y.top, y.low, m.trials.spans
	}
}

// Point 13: the picked curve without its extremes; a condition number without
// its source or for methods that give none.
func TestPoint13Extremes(t *testing.T) {
	r := make([]float64, 5001)
	for i := range r {
		r[i] = 1e-3
	}
	r[2500], r[3700] = 10, 1e-7 // spikes of one iteration
	for _, g := range glyphNames {
		m := screenOf(sessionOf(historyOf(trace.Running, r...)), 120, 40, g)
		m.View()
		m.trials.y.rows = len(chartOf(m))
		rows := cutMargin(chartOf(m))
		for _, want := range []float64{1, -7} {
			row := []rune(rows[int(math.Round(m.trials.y.row(want)))])
			line := strings.Trim(string(row), " ╌⠒-")
			if line == "" {
				t.Errorf("%s: the spike to 1e%g is not drawn:\n%s", g, want, strings.Join(rows, "\n"))
			}
		}
	}
	m := screenOf(newFake(8, still(12.3)), 80, 24, "dot")
	lines := strings.Split(m.View(), "\n")
	for _, line := range lines {
		if strings.Contains(line, "gmres:30") && strings.Contains(line, "stagnated") && !regexp.MustCompile(`\s-\s+9\.300`).MatchString(line) {
			t.Errorf("gmres with a condition number: %q", line)
		}
	}
	if !strings.Contains(m.View(), "Ritz cond") {
		t.Error("the condition number does not name its source")
	}
}
