package run

import (
	"context"
	"runtime"
	"testing"
	"time"
)

// A watch tells apart what passed and what the thread got of it: asleep it
// gets next to nothing, at work no more than passes.
func TestWatch(t *testing.T) {
	runtime.LockOSThread()
	defer runtime.UnlockOSThread()
	w := watch{MachineClock(), threadCPU}
	m := w.now()
	time.Sleep(30 * time.Millisecond)
	if d := w.since(m); d.at < 30*time.Millisecond || d.cpu < 0 || d.cpu > d.at/2 {
		t.Errorf("asleep: %v by the clock, %v of the processor", d.at, d.cpu)
	}
	m = w.now()
	for threadCPU()-m.cpu < 3*time.Millisecond {
	}
	if d := w.since(m); d.cpu < 3*time.Millisecond || d.cpu > d.at {
		t.Errorf("at work: %v by the clock, %v of the processor", d.at, d.cpu)
	}
}

// By the machine's clock a trial and its repetitions are charged CPU time, each
// part no more than its own time.
func TestTrialsAreChargedProcessorTime(t *testing.T) {
	b := NewBench(sample(t, "plate:60"), limits(1e-8, 1000), 0, nil)
	m, err := Parse("cg+ic")
	if err != nil {
		t.Fatal(err)
	}
	u := b.Add(m)
	b.Steer(func() bool {
		if b.Live() {
			return true
		}
		b.Repeat(context.Background(), u, 1)
		return false
	})
	ctx, cancel := context.WithTimeout(context.Background(), time.Minute)
	defer cancel()
	go b.Run(ctx)
	b.WaitEnded(ctx)
	h := u.History()
	if len(h.Reruns) != 1 {
		t.Fatalf("%d repetitions", len(h.Reruns))
	}
	r := h.Reruns[0]
	for _, p := range [][2]time.Duration{{h.BuildCPU, h.BuildTime}, {h.SetupCPU, h.SetupTime}, {h.OwnCPU, h.OwnTime},
		{r.BuildCPU, r.Build}, {r.SetupCPU, r.Setup}, {r.OwnCPU, r.Own}} {
		if p[0] <= 0 || p[0] > p[1] {
			t.Errorf("CPU time %v of %v", p[0], p[1])
		}
	}
	if !(h.BuildTime < h.SetupTime && h.SetupTime < h.OwnTime) || h.CPUShare <= 0 || h.CPUShare > 1 {
		t.Errorf("times %v, %v, %v, share %g", h.BuildTime, h.SetupTime, h.OwnTime, h.CPUShare)
	}
}
