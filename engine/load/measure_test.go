//go:build measure

package load

import (
	"fmt"
	"math"
	"os"
	"runtime"
	"runtime/debug"
	"strconv"
	"strings"
	"testing"
	"time"

	"dwindle/engine/linear"
)

// TestMeasureLoad loads the file named by DWINDLE_MEASURE_LOAD on the threads
// that DWINDLE_MEASURE_THREADS names, 2 if it is not set. It prints the
// seconds it took, twice, the entries, the sum of their bits modulo 2^64, and
// the process's peak memory in bytes, with what it was before.
func TestMeasureLoad(t *testing.T) {
	threads := 2
	if v := os.Getenv("DWINDLE_MEASURE_THREADS"); v != "" {
		var err error
		if threads, err = strconv.Atoi(v); err != nil {
			t.Fatal(err)
		}
	}
	linear.SetThreads(threads)
	debug.FreeOSMemory()
	before := peakMemory(t)
	start := time.Now()
	s := load(t, os.Getenv("DWINDLE_MEASURE_LOAD"))
	taken := time.Since(start)
	peak := peakMemory(t)
	var sum uint64
	for _, v := range s.Matrix().Val {
		sum += math.Float64bits(v)
	}
	fmt.Printf("\nload %.6[1]f %.6[1]f %d %d %d %d\n", taken.Seconds(), s.Matrix().Entries(), sum, peak, before)
	runtime.KeepAlive(s)
}

// peakMemory returns the most memory that the process ever had, mapped files
// included.
func peakMemory(t *testing.T) int64 {
	b, err := os.ReadFile("/proc/self/status")
	if err != nil {
		t.Fatal(err)
	}
	_, rest, _ := strings.Cut(string(b), "VmHWM:")
	var kib int64
	if _, err := fmt.Sscan(rest, &kib); err != nil {
		t.Fatal(err)
	}
	return kib << 10
}
