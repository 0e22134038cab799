package engine

import (
	"bytes"
	"context"
	"encoding/gob"
	"math"
	"os"
	"path/filepath"
	"reflect"
	"strings"
	"testing"
	"time"

	"dwindle/engine/linear"
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

// What is no session file, or not one any more, is refused by name; only a
// torn last frame is left out in silence.
func TestDamagedSessionFiles(t *testing.T) {
	whole := twoFrames(t)
	middle := bytes.Clone(whole)
	middle[len(magicLine())+headBytes+40] ^= 1
	head := bytes.Clone(whole)
	head[len(magicLine())] ^= 0x80 // the length lies
	for _, c := range []struct {
		name, says string
		text       []byte
	}{
		{"empty.dwindle", "is not a session file", nil},
		{"foreign.dwindle", "is not a session file", []byte("%%MatrixMarket matrix coordinate real general\n1 1 1\n1 1 1\n")},
		{"magic.dwindle", "ends in its first line", []byte(sessionMagic)},
		{"later.dwindle", "form \"9\"", []byte(sessionMagic + "9\n")},
		{"first.dwindle", "ends before", []byte(magicLine())},
		{"short.dwindle", "ends before", whole[:len(magicLine())+headBytes+20]},
		{"middle.dwindle", "frame 1 fails its checksum", middle},
		{"head.dwindle", "frame 1 fails its checksum", head},
	} {
		file := filepath.Join(t.TempDir(), c.name)
		if err := os.WriteFile(file, c.text, 0o644); err != nil {
			t.Fatal(err)
		}
		s := Open(context.Background(), file, Options{Threads: 1})
		s.Wait(context.Background())
		if err := s.Snapshot().Err; !IsInput(err) || !strings.HasPrefix(err.Error(), file+": ") || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%s: %v, want ... %s", c.name, err, c.says)
		}
		s.Close()
	}
	for _, tail := range [][]byte{whole[:len(whole)-1], append(bytes.Clone(whole), make([]byte, 4096)...), append(bytes.Clone(whole), 7)} {
		if r, err := replayed(bytes.NewReader(tail)); err != nil || r.facts == nil {
			t.Errorf("a torn end is not left out: %v", err)
		}
	}
}

// twoFrames is a session file of two frames.
func twoFrames(t *testing.T) []byte {
	s := Open(context.Background(), "sample:plate:12", Options{Threads: 1, Pairs: []string{"cg+none", "cg+jacobi"}})
	defer s.Close()
	s.Wait(context.Background())
	path := filepath.Join(t.TempDir(), "two.dwindle")
	r, err := newRecorder(s, path)
	for range 2 {
		if err == nil {
			err = r.look(true)
		}
	}
	if err != nil {
		t.Fatal(err)
	}
	r.file.Close()
	whole, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	return whole
}

// A slip on the command line must not cost a file.
func TestRecordingReplacesOnlySessionFiles(t *testing.T) {
	for _, c := range []struct{ text, says string }{{"5 6 7\n", "not a session file"}, {magicLine(), ""}} {
		path := filepath.Join(t.TempDir(), "x")
		if err := os.WriteFile(path, []byte(c.text), 0o644); err != nil {
			t.Fatal(err)
		}
		s := Open(context.Background(), "sample:plate:8", Options{Threads: 1, Pairs: []string{"cg+none"}, Recording: path})
		s.Wait(context.Background())
		s.Close()
		err := s.Snapshot().Err
		if now, _ := os.ReadFile(path); (err != nil) != (c.says != "") || err != nil && (!strings.Contains(err.Error(), c.says) || string(now) != c.text) {
			t.Errorf("%q: %v", c.text, err)
		}
	}
}

// Writing that fails is told, and the run goes on.
func TestFullDiskDoesNotEndTheRun(t *testing.T) {
	if _, err := os.Stat("/dev/full"); err != nil {
		t.Skip("no /dev/full here")
	}
	s := Open(context.Background(), "sample:plate:16", Options{Threads: 1, Pairs: []string{"cg+none"}})
	defer s.Close()
	file, err := os.OpenFile("/dev/full", os.O_WRONLY, 0)
	if err != nil {
		t.Fatal(err)
	}
	r := &recorder{s: s, path: "full.dwindle", file: file, trials: map[int]*told{}, stop: make(chan struct{}), done: make(chan struct{})}
	r.gob = gob.NewEncoder(&r.buf)
	go r.run()
	<-r.done
	s.Wait(context.Background())
	v := s.Snapshot()
	if v.RecordErr == nil || !strings.Contains(v.RecordErr.Error(), "no space left") || v.Trials[0].History.Stop != trace.Converged {
		t.Errorf("%v, %s", v.RecordErr, v.Trials[0].History.Stop)
	}
}

// A thinned history is written anew, and comes back as it is.
func TestThinnedHistoryComesBack(t *testing.T) {
	var h, back trace.History
	var w told
	id := uint32(0)
	for round := range 6 {
		for range 50 {
			h.Records = append(h.Records, trace.Record{Iter: id, Residual: 1 / float64(id+1), Audit: math.NaN(), Alpha: math.Copysign(0, -1)})
			id++
		}
		if round == 3 { // every second record gives way
			var kept []trace.Record
			for i := 0; i < len(h.Records); i += 2 {
				kept = append(kept, h.Records[i])
			}
			h.Records = kept
		}
		h.Iterations = int(id)
		c, moved := w.since(1, h)
		if !moved {
			t.Fatal("no change seen")
		}
		var err error
		if back, err = c.after(back); err != nil {
			t.Fatal(err)
		}
		if !sameRecords(h.Records, back.Records, true) {
			t.Fatalf("round %d: %d records, want %d", round, len(back.Records), len(h.Records))
		}
	}
}

// FuzzSessionFile reads hostile payloads in whole frames, and hostile files:
// an error, never a panic and never a hang.
func FuzzSessionFile(f *testing.F) {
	var buf bytes.Buffer
	gob.NewEncoder(&buf).Encode(part{Order: []int{1}, About: &about{Source: "-"},
		Trials: []change{{ID: 1, Records: columnsOf([]trace.Record{{Iter: 0}, {Iter: 1}}), Alphas: []float64{1}, Betas: []float64{1}}}})
	f.Add(buf.Bytes(), true)
	f.Add([]byte(magicLine()+"xxxxxxxxxxxx"), false)
	f.Fuzz(func(t *testing.T, b []byte, whole bool) {
		if whole {
			b = append([]byte(magicLine()), framed(b)...)
		}
		if r, err := replayed(bytes.NewReader(b)); err == nil && (r.facts == nil || r.about == nil) {
			t.Error("a session without facts was taken")
		}
	})
}
