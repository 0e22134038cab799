package run

import (
	"math"
	"slices"
	"testing"
	"time"

	"dwindle/engine/linear"
	"dwindle/engine/trace"
)

// formPlate is the smallest round plate whose products take a second form.
const formPlate = "sample:plate:150"

// A plate's products run on half of its diagonals, three vectors of memory;
// the clocks of two trials carry the same cost of it, and a direct solve none.
func TestTrialsShareASecondForm(t *testing.T) {
	s := sample(t, formPlate)
	n := int64(s.N())
	hs := finish(t, s, limits(1e-8, 1000), ticking(time.Millisecond), "cg+none", "cg+none", "cg+jacobi", "richardson+cholesky")
	for i, want := range []string{"half of the diagonals", "half of the diagonals", "half of the diagonals", "rows"} {
		h := hs[i]
		if h.Storage != want || h.Stop != trace.Converged {
			t.Errorf("%s: stored by %q, want %q; ended %v", h.Pairing, h.Storage, want, h.Stop)
		}
	}
	m, err := Parse("cg+none")
	if err != nil {
		t.Fatal(err)
	}
	if got, want := hs[0].MemoryBytes, m.Memory(Offers(s))+3*8*n; got != want {
		t.Errorf("memory %d, want %d", got, want)
	}
	// Each reading of the clock is a tick: choosing and building the form take
	// one each, the set-up itself three, of which one is the making of M.
	for _, h := range hs[:3] {
		if h.SetupTime != 5*time.Millisecond || h.BuildTime != time.Millisecond {
			t.Errorf("%s: set-up %v, of which M %v, want 5 and 1 ms", h.Pairing, h.SetupTime, h.BuildTime)
		}
		if h.OwnCPU != 0 || !math.IsNaN(h.CPUShare) {
			t.Errorf("%s: CPU time %v, share %g beside a clock of our own", h.Pairing, h.OwnCPU, h.CPUShare)
		}
	}
}

// A trial alone and one that comes last give the same bits.
func TestFormDoesNotDependOnCompany(t *testing.T) {
	s := sample(t, formPlate)
	alone := finish(t, s, limits(1e-8, 1000), ticking(time.Millisecond), "cg+jacobi")[0]
	last := finish(t, s, limits(1e-8, 1000), ticking(time.Millisecond), "cg+none", "richardson+cholesky", "cg+jacobi")[2]
	residuals := func(h trace.History) (list []float64) {
		for _, r := range h.Records {
			list = append(list, r.Residual)
		}
		return list
	}
	if !slices.Equal(residuals(alone), residuals(last)) || alone.TrueResidual != last.TrueResidual {
		t.Error("other bits in company")
	}
}

// Prepared matrices take a form of their own; small ones, matrix-free ones and
// tight limits none.
func TestWhereThereIsASecondForm(t *testing.T) {
	plate := sample(t, formPlate)
	free := plate
	free.A = linear.Func{N: plate.N(), Do: plate.A.Apply}
	bytes := plate.Matrix().Bytes()
	for _, c := range []struct {
		name    string
		s       linear.System
		memory  int64
		pairing string
		want    string
	}{
		{"scaled", plate, 0, "scale/cg+none", "half of the diagonals"},
		{"scattered", plate, 0, "nd/cg+none", "rows"},
		{"matrix-free", free, 0, "cg+none", ""},
		{"small", sample(t, "sample:plate:100"), 0, "cg+none", "rows"},
		{"tight", plate, 2 * bytes / 3, "cg+none", "rows"},
	} {
		b := NewBench(c.s, limits(1e-300, 3), c.memory, ticking(time.Millisecond))
		m, err := Parse(c.pairing)
		if err != nil {
			t.Fatal(err)
		}
		trial := b.Add(m)
		trial.setUp(t.Context())
		if h := trial.History(); h.Storage != c.want || h.Stop != trace.Running {
			t.Errorf("%s: stored by %q, want %q; %v %s", c.name, h.Storage, c.want, h.Stop, h.Reason)
		}
	}
}

// A limit that holds two trials and one form holds exactly that: the shared
// form is counted once, and for a trial that was let in.
func TestSharedFormIsCountedOnce(t *testing.T) {
	s := sample(t, formPlate)
	m, err := Parse("cg+none")
	if err != nil {
		t.Fatal(err)
	}
	plain, form := m.Memory(Offers(s)), 3*8*int64(s.N())
	limit := max(4*form, 3*plain+form)
	fit := int((limit - form) / plain)
	b := NewBench(s, limits(1e-8, 1000), limit, ticking(time.Millisecond))
	for i := range fit + 1 {
		if h := b.Add(m).History(); (h.Stop == trace.Refused) != (i == fit) {
			t.Errorf("trial %d of %d that fit: %v %s", i+1, fit, h.Stop, h.Reason)
		}
	}
}
