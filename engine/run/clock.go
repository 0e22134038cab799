package run

import (
	"time"

	"golang.org/x/sys/unix"
)

// Clock tells the time since some fixed moment; it never goes back. Tests
// inject their own.
type Clock func() time.Duration

// MachineClock is the monotonic clock of the machine.
func MachineClock() Clock {
	start := time.Now()
	return func() time.Duration { return time.Since(start) }
}

// watch tells time by a clock and by what the thread got of its processor.
type watch struct {
	clock Clock
	cpu   Clock // CPU time of the calling thread; nil: not measured, as beside an injected clock
}

// moment is a point of time, or what has passed between two.
type moment struct{ at, cpu time.Duration }

// now takes a moment before something is timed.
func (w watch) now() moment {
	var m moment
	if w.cpu != nil {
		m.cpu = w.cpu()
	}
	m.at = w.clock() // last, so that reading the other is not on it
	return m
}

// since returns what has passed since m. Of the CPU time it is no more than
// the clock says.
func (w watch) since(m moment) moment {
	d := moment{at: w.clock() - m.at}
	if w.cpu != nil {
		d.cpu = min(w.cpu()-m.cpu, d.at)
	}
	return d
}

// threadCPU returns the CPU time of the calling thread, to the nanosecond;
// getrusage(2) tells it in ticks of the scheduler.
func threadCPU() time.Duration {
	var t unix.Timespec
	if unix.ClockGettime(unix.CLOCK_THREAD_CPUTIME_ID, &t) != nil {
		return 0
	}
	return time.Duration(t.Nano())
}
