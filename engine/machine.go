package engine

import (
	"bufio"
	"math"
	"os"
	"runtime"
	"strconv"
	"strings"
	"syscall"

	"golang.org/x/sys/unix"

	"dwindle/engine/report"
)

// inBatchJob says whether a scheduler gave this process its own resources.
// The variables are those the common batch systems set.
func inBatchJob() bool {
	for _, v := range []string{"SLURM_JOB_ID", "PBS_JOBID", "LSB_JOBID", "JOB_ID", "LOADL_STEP_ID"} {
		if os.Getenv(v) != "" {
			return true
		}
	}
	return false
}

// defaultThreads is min(4, affinity, cgroup quota) on a login node, all that
// the job may use inside a batch job.
func defaultThreads() int {
	n := runtime.NumCPU() // respects the affinity mask
	if q := cpuQuota(); q > 0 {
		n = min(n, q)
	}
	if !inBatchJob() {
		n = min(n, 4)
	}
	return max(n, 1)
}

// cpuQuota is the cgroup's limit in whole CPUs, 0 if there is none.
func cpuQuota() int {
	quota, period := "", "100000"
	if f := strings.Fields(readLine("/sys/fs/cgroup/cpu.max")); len(f) == 2 {
		quota, period = f[0], f[1]
	} else {
		quota, period = readLine("/sys/fs/cgroup/cpu/cpu.cfs_quota_us"), readLine("/sys/fs/cgroup/cpu/cpu.cfs_period_us")
	}
	q, err := strconv.ParseFloat(quota, 64)
	p, err2 := strconv.ParseFloat(period, 64)
	if err != nil || err2 != nil || q <= 0 || p <= 0 {
		return 0
	}
	return max(1, int(math.Ceil(q/p)))
}

// defaultMemory is half of the tightest of cgroup limit, RLIMIT_AS and
// available memory; inside a batch job, the tightest itself. In bytes.
func defaultMemory() int64 {
	tight := availableMemory()
	for _, f := range []string{"/sys/fs/cgroup/memory.max", "/sys/fs/cgroup/memory/memory.limit_in_bytes"} {
		if v, err := strconv.ParseInt(readLine(f), 10, 64); err == nil && v > 0 {
			tight = min(tight, v)
		}
	}
	var r syscall.Rlimit
	if syscall.Getrlimit(unix.RLIMIT_AS, &r) == nil && r.Cur < math.MaxInt64 {
		tight = min(tight, int64(r.Cur))
	}
	if inBatchJob() {
		return tight
	}
	return tight / 2
}

func availableMemory() int64 {
	f, err := os.Open("/proc/meminfo")
	if err != nil {
		return 4 << 30
	}
	defer f.Close()
	for s := bufio.NewScanner(f); s.Scan(); {
		if v, ok := strings.CutPrefix(s.Text(), "MemAvailable:"); ok {
			kb, err := strconv.ParseInt(strings.TrimSpace(strings.TrimSuffix(strings.TrimSpace(v), "kB")), 10, 64)
			if err == nil {
				return kb << 10
			}
		}
	}
	return 4 << 30
}

func readLine(path string) string {
	b, err := os.ReadFile(path)
	if err != nil {
		return ""
	}
	line, _, _ := strings.Cut(string(b), "\n")
	return strings.TrimSpace(line)
}

// thisMachine describes the machine for a report.
func thisMachine(threads int, memory int64) report.Machine {
	return report.Machine{CPU: cpuName(), Threads: threads, MemoryLimit: memory}
}

func cpuName() string {
	f, err := os.Open("/proc/cpuinfo")
	if err != nil {
		return runtime.GOARCH
	}
	defer f.Close()
	for s := bufio.NewScanner(f); s.Scan(); {
		if name, ok := strings.CutPrefix(s.Text(), "model name"); ok {
			return strings.TrimSpace(strings.TrimLeft(name, "\t :"))
		}
	}
	return runtime.GOARCH
}

// toolchain is what built the program and for which machine.
func toolchain() string { return runtime.Version() + " " + runtime.GOOS + "/" + runtime.GOARCH }
