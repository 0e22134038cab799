package run

// The names of a trial's vectors in its history.
const (
	CurvatureVector = "curvature" // direction of negative curvature
	SlowestVector   = "slowest"   // what the last part of the run still changed
	ResidualVector  = "residual"  // b−Ax at the end
)

// keep puts a vector in the history, where vectors are asked for. v is in the
// user's rows and is not copied.
func (t *Trial) keep(name string, v []float64) {
	if !t.limits.Vectors {
		return
	}
	t.mu.Lock()
	defer t.mu.Unlock()
	all := map[string][]float64{name: v} // snapshots share the old map
	for k, w := range t.hist.Vectors {
		if k != name {
			all[k] = w
		}
	}
	t.hist.Vectors = all
}

// waypoint keeps the iterate in the scratch at iterations that grow by a
// fifth, the last two of them.
func (t *Trial) waypoint(iter int) {
	if !t.limits.Vectors || iter < 2 || float64(iter) < 1.19*float64(t.wayAt) {
		return
	}
	t.wayAt = iter
	last := t.ways[0]
	if last == nil {
		last = make([]float64, t.sys.N())
	}
	copy(last, t.scratch.x)
	t.ways = [2][]float64{t.ways[1], last}
}

// lastVectors keeps what the end of the trial shows: the residual, and the
// difference of the last iterate and that of a fifth to a third of the run
// before. Once the trial has converged that difference is the error which was
// left there, and so made of what the method reduces slowest.
func (t *Trial) lastVectors() {
	if !t.limits.Vectors {
		return
	}
	n := t.sys.N()
	x, r := make([]float64, n), make([]float64, n)
	t.iterate(x)
	t.trueResidual(r, x)
	t.keep(ResidualVector, r)
	if from := t.ways[0]; from != nil {
		for i := range x {
			x[i] -= from[i]
		}
		t.keep(SlowestVector, x)
	}
	t.ways = [2][]float64{}
}
