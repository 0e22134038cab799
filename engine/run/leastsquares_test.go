package run

import (
	"math"
	"testing"
	"time"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// path is the path graph's Laplacian with those conductances: its null vector
// is constant.
func path(conductances []float64) *linear.CSR {
	n := len(conductances) + 1
	var e []linear.Entry
	for i, g := range conductances {
		e = append(e, linear.Entry{I: i, J: i, V: g}, linear.Entry{I: i + 1, J: i + 1, V: g},
			linear.Entry{I: i, J: i + 1, V: -g}, linear.Entry{I: i + 1, J: i, V: -g})
	}
	return linear.FromEntries(n, n, e)
}

// A small Aᵀr is no least-squares solution: one stiff coupling makes it small at
// x = 0 already, and so does a smooth right-hand side on a fine mesh. What no x
// reaches is the mean of b, exactly.
func TestASmallNormalResidualIsNoLeastSquares(t *testing.T) {
	stiff, smooth := []float64{1, 1e9, 1}, make([]float64, 299)
	b := make([]float64, len(smooth)+1)
	for i := range smooth {
		smooth[i] = 1
	}
	for i := range b {
		b[i] = math.Cos(math.Pi*(float64(i)+0.5)/300) + math.Cos(3*math.Pi*(float64(i)+0.5)/300) + 0.1
	}
	for _, c := range []struct {
		a   *linear.CSR
		b   []float64
		tol float64
	}{{path(stiff), []float64{1, 2, 3, -1}, 1e-8}, {path(smooth), b, 1e-3}} {
		mean := 0.0
		for _, v := range c.b {
			mean += v / float64(len(c.b))
		}
		l := limits(c.tol, 2000)
		l.Unreachable = math.Abs(mean) * math.Sqrt(float64(len(c.b))) / linear.Norm2(c.b)
		s := linear.System{Name: "path", A: c.a, B: c.b, Digits: 17}
		for _, h := range finish(t, s, l, ticking(time.Millisecond), "minres+none", "cg+none", "gmres:30+none", "project/cg+none") {
			if h.Stop == trace.LeastSquares && !(h.TrueResidual <= l.Unreachable*(1+2e-6)) {
				t.Errorf("%s: least squares after %d its at %g; %g is out of reach", h.Pairing, h.Iterations, h.TrueResidual, l.Unreachable)
			}
			if h.Pairing == "project/cg+none" && h.Stop != trace.LeastSquares {
				t.Errorf("%s: %s at %g (%s)", h.Pairing, h.Stop, h.TrueResidual, h.Reason)
			}
		}
	}
}
