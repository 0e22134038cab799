package tui

import (
	"fmt"
	"math"
	"strconv"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"dwindle/engine"
	"dwindle/engine/trace"
)

// named is a view with a name for the key line.
type named interface{ name() string }

// trialsView is the screen of the trials: their curves, their list.
type trialsView struct {
	picked int // trial number
	first  int // first visible row of the list
	hidden map[int]bool

	by     measure
	log    bool
	marks  marking // whose curves carry marks of common stopping rules
	bounds bool    // bounds of the picked trial's error in the energy norm
	truth  bool    // draw audited true residuals
	spans  [3]span // for each measure; they only grow
	y      decades // grows too; zero until there is something to draw

	reading int // column of the reading cursor, -1 if it is away
	columns int // of the chart when last drawn
	digit   int // typed last, for numbers of two digits
	typed   time.Time
}

// newTrials returns the screen as it opens: by seconds, the method's own
// residual.
func newTrials() *trialsView {
	v := &trialsView{hidden: map[int]bool{}, reading: -1}
	v.reset()
	return v
}

func (v *trialsView) name() string   { return "trials" }
func (v *trialsView) entry() *prompt { return nil }

// reset forgets the ranges of the axes, after something was taken away.
func (v *trialsView) reset() {
	for i := range v.spans {
		v.spans[i] = span{fix: measure(i)}
	}
	v.y = decades{}
}

// follow keeps the pick and widens the axes for a new snapshot.
func (v *trialsView) follow(s engine.Snapshot) {
	found := false
	for i := range s.Trials {
		t := &s.Trials[i]
		found = found || t.ID == v.picked
		if r, ok := t.History.Last(); ok {
			for k := range v.spans {
				v.spans[k].grow(v.spans[k].fix.of(r))
			}
		}
	}
	if !found && len(s.Trials) > 0 {
		v.picked = s.Trials[0].ID
	}
	v.widen(s)
}

// headroom is how many decades above the highest start are drawn: one
// diverging trial must not squeeze the rest.
const headroom = 2

// depth is how many decades below the tolerance are drawn.
const depth = 6

// widen grows the vertical range to hold every trial that is not hidden.
func (v *trialsView) widen(s engine.Snapshot) {
	goal, ok := level(s.Settings.Tol)
	if !ok || s.Settings.Tol <= 0 {
		goal = -8
	}
	start, high, low, rest := 0.0, math.Inf(-1), goal, goal
	for i := range s.Trials {
		if v.hidden[s.Trials[i].ID] {
			continue
		}
		for k, r := range s.Trials[i].History.Records {
			y, ok := level(residual(r, v.truth))
			if !ok {
				continue
			}
			if k == 0 {
				start = math.Max(start, y)
			}
			high, low = math.Max(high, y), math.Min(low, y)
			if !s.Trials[i].History.Direct {
				rest = math.Min(rest, y)
			}
		}
	}
	low = math.Max(low, math.Ceil(rest-1)) // how deep a direct solve gets is no reason to squeeze the others
	top := int(math.Ceil(math.Min(math.Max(high, start), math.Ceil(start)+headroom)))
	end := int(math.Floor(math.Max(low, goal-depth) + 0.12)) // a hair below a decade is drawn on it
	if v.y == (decades{}) {
		v.y = decades{top: top, low: end}
	}
	v.y.top, v.y.low = max(v.y.top, top), min(v.y.low, end)
}

// keys are the bindings of the screen.
func (v *trialsView) keys(m *model) []action {
	list := []action{
		bindKey("pick; a trial by its number, those from a on by two digits: 10 is a, 11 is b", v.pickDigit, "1", "2", "3", "4", "5", "6", "7", "8", "9", "0").named("1-9"),
		bind("hold; or resume the picked trial", (*model).holdTrial, " "),
		bind("axis; iterations, products, seconds", v.nextMeasure, "x"),
		bind("tries; for the picked trial", v.enter, "enter"),
		bind("info; all of the picked trial", (*model).openInfo, "i"),
		bind("parameters; of the picked trial, for a new one", (*model).editTrial, "p"),
		bind("stop; the picked trial, its curve stays", (*model).stopTrial, "s"),
		bind("drop; the picked trial and its curve", (*model).dropTrial, "d"),
		bind("residual; own or true", v.turnTruth, "r"),
		bind("today; your code runs this one now", (*model).markToday, "t"),
		bind("marks; where common rules would have stopped", v.turnMarks, "m"),
		bind("error bounds; in the energy norm", v.turnBounds, "e"),
		bind("hide; or show the picked curve", v.hide, "v"),
		bind("log axis; or linear", v.turnLog, "X"),
		bind("read; the picked curve", v.readBy(-1), "left", "h"),
		bind("read; the picked curve", v.readBy(1), "right", "l"),
	}
	return append(list, moves(v.move)...)
}

// moves binds the keys that move through a list; to gets the step.
func moves(to func(m *model, step int)) []action {
	by := func(step int) func(*model) tea.Cmd {
		return func(m *model) tea.Cmd { to(m, step); return nil }
	}
	return append(steps(to), bind("page up", by(-8), "pgup"), bind("page down", by(8), "pgdown"))
}

// steps is moves without the pages.
func steps(to func(m *model, step int)) []action {
	by := func(step int) func(*model) tea.Cmd {
		return func(m *model) tea.Cmd { to(m, step); return nil }
	}
	return []action{
		bind("up", by(-1), "up", "k"),
		bind("down", by(1), "down", "j"),
		bind("first", by(math.MinInt32), "g", "home"),
		bind("last", by(math.MaxInt32), "G", "end"),
	}
}

// move picks another trial.
func (v *trialsView) move(m *model, step int) {
	at := v.index(m) + step
	if n := len(m.snap.Trials); n > 0 {
		v.picked = m.snap.Trials[max(min(at, n-1), 0)].ID
	}
}

// index is the place of the picked trial.
func (v *trialsView) index(m *model) int {
	for i, t := range m.snap.Trials {
		if t.ID == v.picked {
			return i
		}
	}
	return 0
}

// twice is how quickly two digits must follow each other to make one number.
const twice = 700 * time.Millisecond

// pickDigit picks a trial by its number.
func (v *trialsView) pickDigit(m *model, pressed string) tea.Cmd {
	d, _ := strconv.Atoi(pressed)
	now := m.now()
	if both := v.digit*10 + d; v.digit > 0 && now.Sub(v.typed) < twice && m.trial(both) != nil {
		v.picked, v.digit = both, 0
		return nil
	}
	v.digit, v.typed = d, now
	if m.trial(d) != nil {
		v.picked = d
	}
	return nil
}

// enter starts the waiting line-up, or shows what could be tried for the
// picked trial.
func (v *trialsView) enter(m *model) tea.Cmd {
	switch {
	case m.snap.Phase == engine.Inspecting:
		return m.skip()
	case m.snap.Phase == engine.Ready:
		return m.start()
	case m.snap.Phase == engine.Broken:
		return m.back()
	}
	return m.tryFor(v.picked)
}

// readBy moves the reading cursor and tells the values under it.
func (v *trialsView) readBy(step int) func(*model) tea.Cmd {
	return func(m *model) tea.Cmd {
		if v.columns <= 0 {
			return nil
		}
		if v.reading < 0 {
			v.reading = v.columns / 2
		} else {
			v.reading = max(min(v.reading+step, v.columns-1), 0)
		}
		m.say(v.readOut(m))
		return nil
	}
}

// readOut is the picked trial's residual at the reading cursor.
func (v *trialsView) readOut(m *model) string {
	t, x := m.trial(v.picked), v.axis()
	if t == nil {
		return ""
	}
	c := reduce(t.History.Records, v.by, v.truth, x.place, v.columns)
	at := x.value(float64(v.reading) / float64(max(v.columns-1, 1)))
	y := c.mid[v.reading]
	text := "no residual there"
	if !math.IsNaN(y) {
		text = "residual " + sci(math.Pow(10, y))
	}
	if v.by != bySeconds {
		at = math.Round(at) // a count
	}
	return fmt.Sprintf("trial %s at %s %s: %s", trace.Tag(t.ID), short(round3(at)), v.by, text)
}

// round3 keeps three digits.
func round3(v float64) float64 {
	r, _ := strconv.ParseFloat(strconv.FormatFloat(v, 'g', 3, 64), 64)
	return r
}

// axis is the horizontal axis in force.
func (v *trialsView) axis() span {
	x := v.spans[v.by]
	x.log = v.log
	return x
}
