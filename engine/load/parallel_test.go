package load

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"io"
	"math/rand/v2"
	"reflect"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

// onThreads runs f with a number of threads.
func onThreads(threads int, f func()) {
	before := linear.Threads()
	linear.SetThreads(threads)
	defer linear.SetThreads(before)
	f()
}

// readChunks reads a text in chunks of so many bytes.
func readChunks(ctx context.Context, r io.ReaderAt, size int64, chunk int, progress func(float64)) (linear.System, error) {
	l, err := newLines(ctx, "t.mtx", io.NewSectionReader(r, 0, size), size, progress)
	if err != nil {
		return linear.System{}, err
	}
	if l.size >= 0 {
		l.whole = &whole{r: r, size: size, chunk: chunk}
	}
	return l.system(progress)
}

// sameReading checks that a text read in chunks is the same system, or has the
// same error on the same line, as read in one go.
func sameReading(t *testing.T, data []byte, chunk int) {
	t.Helper()
	want, wantErr := Read(context.Background(), "t.mtx", bytes.NewReader(data), int64(len(data)), nil)
	got, err := readChunks(context.Background(), bytes.NewReader(data), int64(len(data)), chunk, nil)
	if wantErr != nil || err != nil {
		if !reflect.DeepEqual(err, wantErr) {
			t.Fatalf("in chunks of %d: error %v; want %v", chunk, err, wantErr)
		}
		return
	}
	sameMatrix(t, got.Matrix(), want.Matrix())
	got.A, want.A = nil, nil
	if !reflect.DeepEqual(got, want) {
		t.Fatalf("in chunks of %d: %+v; want %+v", chunk, got, want)
	}
}

// unruly writes a coordinate file with blank lines, comments, duplicates, both
// kinds of line ends and values of all lengths; then it may damage it.
func unruly(r *rand.Rand, damage bool) string {
	n, entries := 1+r.IntN(30), 1+r.IntN(200)
	kind := []string{"coordinate real general", "coordinate real symmetric", "coordinate integer general", "coordinate pattern general"}[r.IntN(4)]
	var b strings.Builder
	end := []string{"\n", "\r\n"}[r.IntN(2)]
	fmt.Fprintf(&b, "%s%d %d %d%s", mmBanner(kind), n, n, entries, end)
	for range entries {
		switch r.IntN(30) {
		case 0:
			b.WriteString("% " + strings.Repeat("x", r.IntN(100)) + end)
		case 1:
			b.WriteString(strings.Repeat(" ", r.IntN(5)) + end)
		}
		i, j := 1+r.IntN(n), 1+r.IntN(n)
		if strings.Contains(kind, "symmetric") {
			i, j = max(i, j), min(i, j)
		}
		fmt.Fprintf(&b, "%d %d", i, j)
		switch {
		case strings.Contains(kind, "real"):
			fmt.Fprintf(&b, " %.*e", r.IntN(18), r.NormFloat64())
		case strings.Contains(kind, "integer"):
			fmt.Fprintf(&b, " %d", r.IntN(1000)-500)
		}
		b.WriteString(end)
	}
	text := b.String()
	if r.IntN(3) == 0 {
		text = strings.TrimRight(text, "\r\n")
	}
	if !damage {
		return text
	}
	at := len(text) / 4 * (1 + r.IntN(3))
	return text[:at] + []string{"x", "\n", " 7", "\n1 1 1 1\n", "\n% c\n\n", "\n99 99 1\n", "-"}[r.IntN(7)] + text[at:]
}

// Whatever the length of the chunks and the number of threads, a file is the
// same system and its first defect is told in the same words.
func TestChunks(t *testing.T) {
	r := rand.New(rand.NewPCG(7, 8))
	for _, threads := range []int{1, 3} {
		onThreads(threads, func() {
			for k := range 600 {
				sameReading(t, []byte(unruly(r, k%2 > 0)), 1+r.IntN(300))
			}
			sameReading(t, []byte(line1D(3000)), 1000)
		})
	}
}

// A line too long for the end of a chunk is read, one too long at all refused.
func TestChunksLongLines(t *testing.T) {
	for _, length := range []int{longLine - 2, longLine, 3 * longLine, maxLine - 2, maxLine, maxLine + 2, 2 * maxLine} {
		text := mm + "2 2 3\n1 1 1\n%" + strings.Repeat("c", length) + "\n2 2 2\n1 2 3\n"
		for _, chunk := range []int{100, 10_000} {
			sameReading(t, []byte(text), chunk)
		}
	}
}

// A file that is shorter than it was when it was opened, or cannot be read, is
// an error on the line where it ends.
func TestShrunkFile(t *testing.T) {
	text := line1D(3000)
	short := bytes.NewReader([]byte(text[:len(text)/2]))
	_, err := readChunks(context.Background(), short, int64(len(text)), 1000, nil)
	var e *Error
	if !errors.As(err, &e) || e.Line != strings.Count(text[:len(text)/2], "\n")+1 {
		t.Errorf("half a file: %v", err)
	}
}

func TestChunksProgressAndCancel(t *testing.T) {
	text := line1D(50000)
	r := strings.NewReader(text)
	var seen []float64
	if _, err := readChunks(context.Background(), r, r.Size(), 50000, func(f float64) { seen = append(seen, f) }); err != nil {
		t.Fatal(err)
	}
	for k, f := range seen {
		if f < 0 || f > 1 || k > 0 && f < seen[k-1] {
			t.Fatalf("progress %v", seen)
		}
	}
	if len(seen) < len(text)/50000 || seen[len(seen)-1] != 1 {
		t.Errorf("%d reports, the last %v", len(seen), seen[len(seen)-1])
	}
	for _, at := range []int{1, 2, 5} {
		ctx, stop := context.WithCancel(context.Background())
		calls := 0
		_, err := readChunks(ctx, r, r.Size(), 50000, func(float64) {
			if calls++; calls == at {
				stop()
			}
		})
		if !errors.Is(err, context.Canceled) || calls > at+1 {
			t.Errorf("cancelled at report %d: %v after %d reports", at, err, calls)
		}
	}
}

// brokenReader panics when it is read at.
type brokenReader struct{ *strings.Reader }

func (brokenReader) ReadAt([]byte, int64) (int, error) { panic("broken") }

// A panic on a thread reaches the caller, who can recover from it.
func TestChunkPanic(t *testing.T) {
	l, err := newLines(context.Background(), "t", strings.NewReader(line1D(3000)), int64(len(line1D(3000))), nil)
	if err != nil {
		t.Fatal(err)
	}
	l.whole = &whole{r: brokenReader{}, size: l.size, chunk: 1000}
	defer func() {
		if r := recover(); r != "broken" {
			t.Errorf("recovered %v", r)
		}
	}()
	l.system(nil)
}
