package choose

import "strings"

// ladders are the forms of methods that a race climbs, each from one end of
// its parameters to the other; the race tries the neighbours of what leads.
var ladders = [][]string{
	{"ic:0", "ic:1", "ic:2", "ic:3", "ic:5"},
	{"ilu:0", "ilu:1", "ilu:2", "ilu:3"},
	{"ict:0.1,5", "ict:0.01,10", "ict:1e-3,10", "ict:1e-3,30", "ict:1e-4,60"},
	{"ilut:0.1,5", "ilut:0.01,10", "ilut:1e-3,10", "ilut:1e-4,20", "ilut:1e-5,50"},
	{"ilutp:0.01,10,0.1", "ilutp:1e-3,10,0.1", "ilutp:1e-4,20,0.1", "ilutp:1e-5,50,0.1"},
	{"ssor:1", "ssor:1.3", "ssor:1.6", "ssor:1.8", "ssor:1.9"},
	{"sor:1", "sor:1.2", "sor:1.4", "sor:1.6"},
	{"fsai:1", "fsai:2", "fsai:3"},
	{"poly:2,30", "poly:4,30", "poly:8,30", "poly:16,100"},
	{"block-jacobi:4", "block-jacobi:16", "block-jacobi:64"},
	{"ras:2,1,ilu", "ras:8,1,ilu", "ras:32,1,ilu"},
	{"amg:aggregation", "amg:classical", "amg:classical,0,2"},
	{"amg:aggregation", "amg:aggregation,0,2"},
	{"gmres:10", "gmres:30", "gmres:60", "gmres:120", "gmres:250"},
	{"gmresdr:30,8", "gmresdr:60,15"},
	{"gcr:10", "gcr:30", "gcr:60"},
	{"idr:1", "idr:2", "idr:4", "idr:8"},
	{"bicgstabl:1", "bicgstabl:2", "bicgstabl:4", "bicgstabl:6"},
	{"dcg:4", "dcg:8", "dcg:16"},
}

// Ladders returns the forms of methods that a race tries, in order.
func Ladders() [][]string { return ladders }

// parts are a written pairing taken apart: "rcm/" or nothing, solver and
// preconditioner with their parameters.
type parts struct{ preps, solver, precond string }

func split(pairing string) parts {
	var p parts
	rest := pairing
	if before, after, ok := strings.Cut(pairing, "/"); ok && !strings.Contains(before, "+") {
		p.preps, rest = before+"/", after
	}
	p.solver, p.precond, _ = strings.Cut(rest, "+")
	return p
}

func (p parts) String() string { return p.preps + p.solver + "+" + p.precond }

// bare is the name of a method without its parameters.
func bare(method string) string {
	name, _, _ := strings.Cut(method, ":")
	return name
}

// neighbours are the forms next to a method on its ladders, the costlier one
// first.
func neighbours(method string) []string {
	var out []string
	for _, l := range ladders {
		for i, s := range l {
			if s != method {
				continue
			}
			if i+1 < len(l) {
				out = append(out, l[i+1])
			}
			if i > 0 {
				out = append(out, l[i-1])
			}
		}
	}
	return out
}
