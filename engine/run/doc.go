// Package run turns pairings into histories. A Bench lets trials advance side
// by side in fair slices of time; each trial prepares, builds, begins and
// steps on its own clock, is audited off it, and ends by one of the endings
// of package trace. The driver owns convergence, limits, statistics and time:
// solvers only iterate.
//
//	method.go   a pairing resolved against the catalogues
//	admit.go    what a pairing needs and the system has; memory before start
//	count.go    wrappers that count products and preconditioner uses
//	trial.go    one pairing on the system: set-up, steps, records
//	target.go   the stopping rule
//	audit.go    b−Ax measured afresh: when and what
//	marks.go    where common stopping rules would have stopped
//	ending.go   how a trial ends
//	direction.go  what a direction of negative curvature proves
//	bench.go    fair slices
package run
