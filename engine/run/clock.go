package run

import (
	"syscall"
	"time"
)

// Clock tells the time since some fixed moment; it never goes back. Tests
// inject their own.
type Clock func() time.Duration

// MachineClock is the monotonic clock of the machine.
func MachineClock() Clock {
	start := time.Now()
	return func() time.Duration { return time.Since(start) }
}

// threadCPU returns the CPU time of the calling thread.
func threadCPU() time.Duration {
	const rusageThread = 1 // RUSAGE_THREAD of getrusage(2)
	var u syscall.Rusage
	if syscall.Getrusage(rusageThread, &u) != nil {
		return 0
	}
	return time.Duration(u.Utime.Nano() + u.Stime.Nano())
}
