package main

import (
	"context"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"testing"
	"time"

	"dwindle/engine"
	"dwindle/engine/trace"
)

// A run killed with SIGKILL in the middle leaves a session file that holds
// everything up to the last second: its records are, bit for bit, those of a
// run that was not killed.
func TestKilledRunReopens(t *testing.T) {
	bin := filepath.Join(t.TempDir(), "dwindle")
	if out, err := exec.Command("go", "build", "-o", bin, ".").CombinedOutput(); err != nil {
		t.Fatalf("%v\n%s", err, out)
	}
	file := filepath.Join(t.TempDir(), "killed.dwindle")
	const source = "sample:plate:160"                            // steepest descent takes some 200 000 iterations: it is under way when it is killed
	pairs := []string{"sd+none", "richardson+jacobi", "cg+none"} // two slow ones, and one that has ended by then
	c := exec.Command(bin, "run", source, "--pair", pairs[0], "--pair", pairs[1], "--pair", pairs[2],
		"--tol", "1e-13", "--iterations", "10000000", "--session", file)
	c.Env = append(os.Environ(), "XDG_STATE_HOME="+t.TempDir())
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	started := time.Now()
	moving := func(s engine.Snapshot) bool {
		return len(s.Trials) == 3 && s.Trials[0].History.Iterations > 20 && s.Trials[1].History.Iterations > 20 &&
			s.Trials[2].History.Stop.Ended() && s.Elapsed > 2*time.Second
	}
	for !moving(reopen(t, file)) {
		if time.Since(started) > 30*time.Second {
			c.Process.Kill()
			t.Fatal("the trials did not move for half a minute")
		}
		time.Sleep(100 * time.Millisecond)
	}
	time.Sleep(700 * time.Millisecond) // into the middle of a second
	c.Process.Kill()
	lived := time.Since(started)
	if err := c.Wait(); err == nil {
		t.Fatal("the run came to its end before it was killed")
	}
	v := reopen(t, file)
	if missing := lived - v.Elapsed; missing > 2*time.Second { // a second, and what starting takes on a busy machine
		t.Errorf("the last %v are missing", missing)
	}
	t.Logf("killed %.2f s after its start, the file ends at %.2f s", lived.Seconds(), v.Elapsed.Seconds())
	for i, p := range pairs {
		h := v.Trials[i].History
		if i < 2 && h.Stop != trace.Cancelled || len(h.Records) < 20 {
			t.Fatalf("trial %d: %s %s, %d records", i+1, h.Pairing, h.Stop, len(h.Records))
		}
		t.Logf("%s: %d records of %v", p, len(h.Records), h.OwnTime)
		compare(t, h, unkilled(t, source, p, h.Iterations+1))
	}
}

// reopen is what a session file shows, or an empty snapshot where it is too
// young.
func reopen(t *testing.T, file string) engine.Snapshot {
	s := engine.Open(context.Background(), file, engine.Options{Threads: 1})
	defer s.Close()
	s.Wait(context.Background())
	return s.Snapshot()
}

// unkilled runs one pairing for n iterations.
func unkilled(t *testing.T, source, pairing string, n int) trace.History {
	s := engine.Open(context.Background(), source, engine.Options{Pairs: []string{pairing}, Tol: 1e-13, Iterations: n, Threads: 1})
	defer s.Close()
	s.Wait(context.Background())
	return s.Snapshot().Trials[0].History
}

// compare holds the records of the killed run against the same iterations of
// the other.
func compare(t *testing.T, killed, other trace.History) {
	t.Helper()
	bits := math.Float64bits
	if len(other.Records) < len(killed.Records) {
		t.Fatalf("%s: %d records, the other run has %d", killed.Pairing, len(killed.Records), len(other.Records))
	}
	for k, r := range killed.Records {
		q := other.Records[k]
		if r.Iter != q.Iter || r.MatVecs != q.MatVecs || r.Solves != q.Solves || bits(r.Residual) != bits(q.Residual) ||
			bits(r.Audit) != bits(q.Audit) || bits(r.Alpha) != bits(q.Alpha) || bits(r.Beta) != bits(q.Beta) {
			t.Fatalf("%s: iteration %s differs:\n%+v\n%+v", killed.Pairing, strconv.Itoa(int(r.Iter)), r, q)
		}
	}
}
