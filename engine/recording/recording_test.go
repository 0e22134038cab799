package recording

import (
	"bytes"
	"encoding/gob"
	"errors"
	"math"
	"os"
	"strings"
	"testing"
	"time"

	"dwindle/engine/inspect"
	"dwindle/engine/trace"
)

// fixed is a source that stands still.
type fixed struct {
	state  State
	answer *Answer
	failed error
}

func (f *fixed) State() State     { return f.state }
func (f *fixed) Answer() *Answer  { return f.answer }
func (f *fixed) Failed(err error) { f.failed = err }

// sample is a session of two trials, one of them under way.
func sample() *fixed {
	ran := trace.History{Pairing: "cg+none", Stop: trace.Converged, TrueResidual: 1e-9,
		Records: []trace.Record{{Iter: 0, Residual: 1, Audit: 1}, {Iter: 1, Residual: 1e-9, Audit: math.NaN()}}}
	return &fixed{state: State{About: &About{Source: "a.mtx"}, Facts: &inspect.Facts{}, Elapsed: time.Second,
		Trials: []Trial{{1, ran}, {4, trace.History{Pairing: "cg+jacobi", Stop: trace.Running}}}}}
}

// file is a file in memory.
type file struct{ bytes.Buffer }

func (f *file) Close() error { return nil }

// written is what a source becomes in a file: a frame at once and one at the end.
func written(t *testing.T, from *fixed) []byte {
	t.Helper()
	f := &file{}
	f.WriteString(magicLine())
	r := begin("s.dwindle", f, from)
	for _, closing := range []bool{false, true} {
		if err := r.look(closing); err != nil {
			t.Fatal(err)
		}
	}
	return f.Bytes()
}

// What was recorded comes back: trials under their numbers, the answer, and
// for a trial whose end no one wrote down an ending that says so.
func TestRecordingComesBack(t *testing.T) {
	from := sample()
	from.answer = &Answer{"cg+none", []float64{1, -0.5}}
	s, err := Read(bytes.NewReader(written(t, from)))
	if err != nil {
		t.Fatal(err)
	}
	if s.About.Source != "a.mtx" || s.Elapsed != time.Second || len(s.Trials) != 2 || s.Trials[1].ID != 4 {
		t.Fatalf("%+v", s)
	}
	if h := s.Trials[0].History; !sameRecords(h.Records, from.state.Trials[0].History.Records) || h.Stop != trace.Converged {
		t.Errorf("%+v", h)
	}
	if h := s.Trials[1].History; h.Stop != trace.Cancelled || h.Reason != leftGoing {
		t.Errorf("%s: %s", h.Stop, h.Reason)
	}
	if s.Answer == nil || s.Answer.Pairing != "cg+none" || s.Answer.X[1] != -0.5 || s.Residual("cg+none") != 1e-9 {
		t.Errorf("answer %+v", s.Answer)
	}
}

// sameRecords says whether two lists hold the same bits.
func sameRecords(a, b []trace.Record) bool {
	if len(a) != len(b) {
		return false
	}
	same := func(x, y float64) bool { return math.Float64bits(x) == math.Float64bits(y) }
	for i, r := range a {
		q := b[i]
		if r.Iter != q.Iter || r.MatVecs != q.MatVecs || r.Solves != q.Solves || r.Clock != q.Clock ||
			!same(r.Residual, q.Residual) || !same(r.Audit, q.Audit) || !same(r.Alpha, q.Alpha) || !same(r.Beta, q.Beta) {
			return false
		}
	}
	return true
}

// What is no session file, or not one any more, is refused; only a torn last
// frame is left out in silence.
func TestDamagedFiles(t *testing.T) {
	whole := written(t, sample())
	middle := bytes.Clone(whole)
	middle[len(magicLine())+headBytes+40] ^= 1
	head := bytes.Clone(whole)
	head[len(magicLine())] ^= 0x80 // the length lies
	for _, c := range []struct {
		says string
		text []byte
	}{
		{"is not a session file", nil},
		{"is not a session file", []byte("%%MatrixMarket matrix coordinate real general\n1 1 1\n1 1 1\n")},
		{"ends in its first line", []byte(magic)},
		{"form \"9\"", []byte(magic + "9\n")},
		{"ends before", []byte(magicLine())},
		{"ends before", whole[:len(magicLine())+headBytes+20]},
		{"frame 1 fails its checksum", middle},
		{"frame 1 fails its checksum", head},
	} {
		if _, err := Read(bytes.NewReader(c.text)); err == nil || !strings.Contains(err.Error(), c.says) {
			t.Errorf("%v, want ... %s", err, c.says)
		}
	}
	for _, tail := range [][]byte{whole[:len(whole)-1], append(bytes.Clone(whole), make([]byte, 4096)...), append(bytes.Clone(whole), 7)} {
		if s, err := Read(bytes.NewReader(tail)); err != nil || s.Facts == nil {
			t.Errorf("a torn end is not left out: %v", err)
		}
	}
}

// A disk that is full ends the recording, and says why.
func TestFullDisk(t *testing.T) {
	full, err := os.OpenFile("/dev/full", os.O_WRONLY, 0)
	if err != nil {
		t.Skip("no /dev/full here")
	}
	from := sample()
	r := Start("full.dwindle", full, from)
	<-r.done
	var told *Error
	if !errors.As(from.failed, &told) || told.Path != "full.dwindle" || !strings.Contains(told.Error(), "no space left") {
		t.Errorf("%v", from.failed)
	}
	r.Finish() // ends at once
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
		if !sameRecords(h.Records, back.Records) {
			t.Fatalf("round %d: %d records, want %d", round, len(back.Records), len(h.Records))
		}
	}
}

// FuzzRead reads hostile payloads in whole frames, and hostile files:
// an error, never a panic and never a hang.
func FuzzRead(f *testing.F) {
	var buf bytes.Buffer
	gob.NewEncoder(&buf).Encode(part{Order: []int{1}, About: &About{Source: "-"},
		Trials: []change{{ID: 1, Records: columnsOf([]trace.Record{{Iter: 0}, {Iter: 1}}), Alphas: []float64{1}, Betas: []float64{1}}}})
	f.Add(buf.Bytes(), true)
	f.Add([]byte(magicLine()+"xxxxxxxxxxxx"), false)
	f.Fuzz(func(t *testing.T, b []byte, whole bool) {
		if whole {
			b = append([]byte(magicLine()), framed(b)...)
		}
		if r, err := Read(bytes.NewReader(b)); err == nil && (r.Facts == nil || r.About == nil) {
			t.Error("a session without facts was taken")
		}
	})
}
