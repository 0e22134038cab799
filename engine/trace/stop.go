package trace

// Stop is the state of a trial: first the live states, then the endings.
type Stop uint8

// The states and endings.
const (
	Waiting Stop = iota
	SettingUp
	Running
	Held
	Converged
	LeastSquares
	FalselyConverged
	IterationLimit
	TimeLimit
	BrokeDown
	Diverged
	Stagnated
	Outpaced
	Refused
	Cancelled
	Failed
)

// stops is the one table of states: name and mark.
var stops = [...]struct {
	name string
	mark byte
}{
	Waiting:          {"waiting", '.'},
	SettingUp:        {"setting-up", '~'},
	Running:          {"running", '~'},
	Held:             {"held", '-'},
	Converged:        {"converged", '+'},
	LeastSquares:     {"least-squares", '+'},
	FalselyConverged: {"falsely-converged", '!'},
	IterationLimit:   {"iteration-limit", '#'},
	TimeLimit:        {"time-limit", '#'},
	BrokeDown:        {"broke-down", 'x'},
	Diverged:         {"diverged", '!'},
	Stagnated:        {"stagnated", '='},
	Outpaced:         {"outpaced", '#'},
	Refused:          {"refused", 'x'},
	Cancelled:        {"cancelled", '#'},
	Failed:           {"failed", 'x'},
}

// String returns the name used on screens and in JSON.
func (s Stop) String() string { return stops[s].name }

// Mark returns the one-character mark.
func (s Stop) Mark() byte { return stops[s].mark }

// Ended says whether the trial is over.
func (s Stop) Ended() bool { return s >= Converged }
