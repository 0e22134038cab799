package engine

import (
	"bytes"
	"context"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
	"time"

	"dwindle/engine/linear"
	"dwindle/engine/recording"
	"dwindle/engine/trace"
)

// recordedRun runs a session to its end while it is recorded.
func recordedRun(t *testing.T, source string, opt Options) (Snapshot, string) {
	t.Helper()
	opt.Recording = filepath.Join(t.TempDir(), "s.dwindle")
	return ended(t, source, opt), opt.Recording
}

// reopened returns what a session file shows.
func reopened(t *testing.T, path string) Snapshot {
	t.Helper()
	s := Open(context.Background(), path, Options{Threads: 1})
	defer s.Close()
	if err := s.Wait(context.Background()); err != nil {
		t.Fatal(err)
	}
	return s.Snapshot()
}

// diagonalOf is a diagonal matrix.
func diagonalOf(d ...float64) *linear.CSR {
	var e []linear.Entry
	for i, v := range d {
		e = append(e, linear.Entry{I: i, J: i, V: v})
	}
	return linear.FromEntries(len(d), len(d), e)
}

// sameRecords says whether two lists hold the same bits; own times, which no
// two runs share, are left out where asked.
func sameRecords(a, b []trace.Record, clocks bool) bool {
	if len(a) != len(b) {
		return false
	}
	same := func(x, y float64) bool { return math.Float64bits(x) == math.Float64bits(y) }
	for i, r := range a {
		q := b[i]
		if r.Iter != q.Iter || r.MatVecs != q.MatVecs || r.Solves != q.Solves || clocks && r.Clock != q.Clock ||
			!same(r.Residual, q.Residual) || !same(r.Audit, q.Audit) || !same(r.Alpha, q.Alpha) || !same(r.Beta, q.Beta) {
			return false
		}
	}
	return true
}

// A session that was closed comes back as it was: every record bit by bit,
// the facts, and the same findings and choice judged anew.
func TestSessionFileComesBack(t *testing.T) {
	was, path := recordedRun(t, "sample:plate:24,jump=1e3", Options{Pairs: []string{"cg+none", "cg+ic:0", "gmres:20+none"}, Today: "cg+jacobi"})
	now := reopened(t, path)
	if len(now.Trials) != 4 || !now.Recorded || now.ReadOnly != "" || now.Phase != Ended {
		t.Fatalf("%d trials, recorded %v, read-only %q, %s", len(now.Trials), now.Recorded, now.ReadOnly, now.Phase)
	}
	if was.System != now.System || was.Settings != now.Settings {
		t.Errorf("system or settings differ:\n%+v\n%+v", was.System, now.System)
	}
	for i, u := range now.Trials {
		a, b := was.Trials[i].History, u.History
		if !sameRecords(a.Records, b.Records, true) {
			t.Errorf("%s: the records differ", a.Pairing)
		}
		if a.Stop != b.Stop || a.Today != b.Today || a.OwnTime != b.OwnTime || !reflect.DeepEqual(a.Alphas, b.Alphas) || len(a.Events) != len(b.Events) {
			t.Errorf("%s: %s in %v, was %s in %v", a.Pairing, b.Stop, b.OwnTime, a.Stop, a.OwnTime)
		}
	}
	if !reflect.DeepEqual(was.Facts.Gershgorin, now.Facts.Gershgorin) || !reflect.DeepEqual(was.Facts.Pattern, now.Facts.Pattern) {
		t.Error("the facts differ")
	}
	if a, b := rules(was), rules(now); a != b {
		t.Errorf("findings were%s\nare%s", a, b)
	}
	if was.Choice.Pairing != now.Choice.Pairing {
		t.Errorf("choice %q, was %q", now.Choice.Pairing, was.Choice.Pairing)
	}
}

// A recorded session takes new pairings where its system can be read again,
// and says why where it cannot.
func TestReopenedSessionGoesOn(t *testing.T) {
	_, path := recordedRun(t, "sample:plate:12", Options{Pairs: []string{"cg+none"}})
	s := Open(context.Background(), path, Options{Threads: 1})
	defer s.Close()
	s.Wait(context.Background())
	id, err := s.Add("cg+jacobi")
	if err != nil || id != 2 {
		t.Fatalf("trial %d, %v", id, err)
	}
	ctx, cancel := context.WithTimeout(context.Background(), time.Minute)
	defer cancel()
	if err := s.Wait(ctx); err != nil {
		t.Fatal(err)
	}
	v := s.Snapshot()
	if len(v.Trials) != 2 || v.Trials[1].History.Stop != trace.Converged || len(s.Candidates()) == 0 {
		t.Errorf("%d trials", len(v.Trials))
	}
}

func TestReadOnlySession(t *testing.T) {
	from := written(t, diagonalOf(4, 9, 25), 0)
	_, path := recordedRun(t, from, Options{Pairs: []string{"cg+none"}})
	if err := os.Rename(from, from+".away"); err != nil {
		t.Fatal(err)
	}
	s := Open(context.Background(), path, Options{Threads: 1})
	defer s.Close()
	s.Wait(context.Background())
	if v := s.Snapshot(); !strings.Contains(v.ReadOnly, "a.mtx") {
		t.Errorf("read-only because %q", v.ReadOnly)
	}
	if _, err := s.Add("cg+jacobi"); err == nil || !strings.Contains(err.Error(), "read-only") {
		t.Errorf("a pairing could be added: %v", err)
	}
	// another matrix under the old name is noticed by its fingerprint
	if err := os.Rename(written(t, diagonalOf(4, 9, 26), 0), filepath.Join(filepath.Dir(path), "a.mtx")); err != nil {
		t.Fatal(err)
	}
	u := Open(context.Background(), path, Options{Threads: 1})
	defer u.Close()
	u.Wait(context.Background())
	if _, err := u.Add("cg+jacobi"); err == nil || !strings.Contains(err.Error(), "is not the system") {
		t.Errorf("another system was taken: %v", err)
	}
}

// Nothing of a path, or of the machine's owner, stands in the file.
func TestSessionFileKeepsFoldersToItself(t *testing.T) {
	from := written(t, diagonalOf(1, 2, 3), 0)
	_, path := recordedRun(t, from, Options{Pairs: []string{"cg+none"}, RHS: written1(t, 3)})
	b, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	host, _ := os.Hostname()
	for _, private := range []string{filepath.Dir(from), os.TempDir() + "/", host} {
		if private != "" && bytes.Contains(b, []byte(private)) {
			t.Errorf("the file holds %q", private)
		}
	}
}

// written1 writes a vector of ones.
func written1(t *testing.T, n int) string {
	path := filepath.Join(t.TempDir(), "b.txt")
	if err := os.WriteFile(path, []byte(strings.Repeat("1\n", n)), 0o644); err != nil {
		t.Fatal(err)
	}
	return path
}

// A damaged session file is an input that cannot be read, named in the error.
func TestDamagedSessionFileIsNamed(t *testing.T) {
	file := filepath.Join(t.TempDir(), "short.dwindle")
	if err := os.WriteFile(file, []byte("dwindle session 1\n"), 0o644); err != nil {
		t.Fatal(err)
	}
	s := Open(context.Background(), file, Options{Threads: 1})
	defer s.Close()
	s.Wait(context.Background())
	if err := s.Snapshot().Err; !IsInput(err) || !strings.HasPrefix(err.Error(), file+": ends before") {
		t.Errorf("%v", err)
	}
}

// Every option that a file holds comes back as the option it was.
func TestAskedComesBack(t *testing.T) {
	a := recording.Asked{Identify: true}
	v := reflect.ValueOf(&a).Elem()
	for i := range v.NumField() {
		switch f := v.Field(i); f.Kind() {
		case reflect.String:
			f.SetString(v.Type().Field(i).Name)
		case reflect.Int:
			f.SetInt(int64(i + 1))
		case reflect.Float64:
			f.SetFloat(float64(i) + 0.5)
		case reflect.Bool:
			f.SetBool(true)
		case reflect.Slice:
			f.Set(reflect.ValueOf([]string{v.Type().Field(i).Name}))
		default:
			t.Fatalf("%s is a %s", v.Type().Field(i).Name, f.Kind())
		}
	}
	if back := options(a, Options{}).asked(); !reflect.DeepEqual(a, back) {
		t.Errorf("was %+v\nis  %+v", a, back)
	}
}

// Where the vectors behind the findings were asked for, the file holds them and
// the solution, and both come back though the system is not at hand.
func TestVectorsComeBack(t *testing.T) {
	for _, asked := range []bool{true, false} {
		opt := Options{Threads: 1, Pairs: []string{"cg+none", "cg+jacobi"}, Vectors: asked, Recording: filepath.Join(t.TempDir(), "s.dwindle")}
		s := Open(context.Background(), written(t, diagonalOf(4, 9, 25, 1), 0), opt)
		s.Wait(context.Background())
		was := s.Document()
		s.Close()
		u := Open(context.Background(), opt.Recording, Options{Threads: 1, Vectors: true})
		defer u.Close()
		u.Wait(context.Background())
		now := u.Document()
		if !asked {
			if now.Solution != nil || len(now.Vectors) > 0 || !strings.Contains(now.NoSolution().Error(), "without --vectors") {
				t.Errorf("%d vectors, %v", len(now.Vectors), now.NoSolution())
			}
			continue
		}
		if was.Solution == nil || !reflect.DeepEqual(was.Solution, now.Solution) {
			t.Errorf("solution %v, was %v", now.Solution, was.Solution)
		}
		if len(was.Vectors) == 0 || len(now.Vectors) != len(was.Vectors) {
			t.Fatalf("%d vectors, were %d", len(now.Vectors), len(was.Vectors))
		}
		for i, v := range now.Vectors {
			if v.Name != was.Vectors[i].Name || !reflect.DeepEqual(v.Values, was.Vectors[i].Values) {
				t.Errorf("%s differs", v.Name)
			}
		}
	}
}

// A slip on the command line must not cost a file, a session least of all.
func TestRecordingWritesOverNothing(t *testing.T) {
	for _, text := range []string{"", "5 6 7\n", "dwindle session 1\n"} {
		path := filepath.Join(t.TempDir(), "x")
		if err := os.WriteFile(path, []byte(text), 0o644); err != nil {
			t.Fatal(err)
		}
		s := Open(context.Background(), "sample:plate:8", Options{Threads: 1, Pairs: []string{"cg+none"}, Recording: path})
		s.Wait(context.Background())
		s.Close()
		err := s.Snapshot().Err
		if now, _ := os.ReadFile(path); err == nil || !strings.Contains(err.Error(), "exists already") || string(now) != text {
			t.Errorf("%q: %v", text, err)
		}
	}
}

// Writing that fails is told, and the run goes on.
func TestFullDiskDoesNotEndTheRun(t *testing.T) {
	full, err := os.OpenFile("/dev/full", os.O_WRONLY, 0)
	if err != nil {
		t.Skip("no /dev/full here")
	}
	s := Open(context.Background(), "sample:plate:16", Options{Threads: 1, Pairs: []string{"cg+none"}})
	defer s.Close()
	r := recording.Start("full.dwindle", full, recorded{s})
	s.Wait(context.Background())
	r.Finish()
	v := s.Snapshot()
	if v.RecordErr == nil || !strings.Contains(v.RecordErr.Error(), "no space left") || v.Trials[0].History.Stop != trace.Converged {
		t.Errorf("%v, %s", v.RecordErr, v.Trials[0].History.Stop)
	}
}
