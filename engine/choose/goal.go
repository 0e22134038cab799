package choose

// The goals a choice can go by.
const (
	Seconds = "seconds" // least time to the target
	Memory  = "memory"  // least memory of those that reach it
	Robust  = "robust"  // first what cannot fail on a matrix of this kind, then least time
)

// Goals lists the goals.
var Goals = []string{Seconds, Memory, Robust}
