// Package run turns pairings into histories. A Bench lets trials advance side
// by side in fair slices of time; each trial prepares, builds, begins and
// steps on its own clock, is audited off it, and ends by one of the endings
// of package trace. The driver owns convergence, limits, statistics and time:
// solvers only iterate.
//
//	method.go   a pairing resolved against the catalogues
//	admit.go    what a pairing needs and the system has; memory before start
//	count.go    wrappers that count products and preconditioner uses
//	setup.go    a trial's set-up: prepare, build, begin
//	trial.go    one pairing on the system, step by step
//	record.go   readings become records, with audits where due
//	target.go   the stopping rule
//	audit.go    b−Ax measured afresh: when and what
//	twodoubles.go  x kept in two doubles: audits, its end, others measured against it
//	marks.go    where common stopping rules would have stopped
//	ending.go   how a trial ends
//	direction.go  what a direction of negative curvature proves
//	bench.go    fair slices
//	orders.go   pause, hold, cancel, drop: what may be asked of a running bench
package run
