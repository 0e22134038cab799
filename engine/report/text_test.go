package report

import (
	"bytes"
	"errors"
	"flag"
	"io"
	"math/rand/v2"
	"os"
	"strings"
	"testing"

	"dwindle/engine/trace"
)

var update = flag.Bool("update", false, "write the golden files anew")

// TestPlainText: whatever a document holds, text is printable ASCII of at
// most 78 columns, the head of at most 12 lines.
func TestPlainText(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	docs := []Document{{}, typical(), told()}
	for range 400 {
		docs = append(docs, wild(r))
	}
	for i, d := range docs {
		if head := Head(d); len(head) > HeadLines || len(head) < 6 {
			t.Fatalf("document %d: head of %d lines", i, len(head))
		}
		for name, write := range map[string]func(io.Writer, Document) error{"text": Text, "facts": Facts, "ticket": Ticket} {
			var b bytes.Buffer
			if err := write(&b, d); err != nil {
				t.Fatal(err)
			}
			checkPlain(t, i, name, b.String(), Width)
		}
		var b bytes.Buffer
		if err := Markdown(&b, d); err != nil {
			t.Fatal(err)
		}
		checkPlain(t, i, "md", b.String(), 1<<20)
	}
}

func checkPlain(t *testing.T, i int, name, text string, width int) {
	t.Helper()
	if !strings.HasSuffix(text, "\n") {
		t.Fatalf("document %d, %s: no end of line", i, name)
	}
	for _, l := range strings.Split(strings.TrimSuffix(text, "\n"), "\n") {
		if len(l) > width {
			t.Fatalf("document %d, %s: %d columns: %q", i, name, len(l), l)
		}
		if strings.HasSuffix(l, " ") {
			t.Fatalf("document %d, %s: trailing blank: %q", i, name, l)
		}
		for _, c := range []byte(l) {
			if c < ' ' || c > '~' {
				t.Fatalf("document %d, %s: byte %#x: %q", i, name, c, l)
			}
		}
	}
}

// TestGolden shows whole reports for people to read.
func TestGolden(t *testing.T) {
	for name, write := range map[string]func(io.Writer, Document) error{
		"text.golden": Text, "facts.golden": Facts, "md.golden": Markdown, "json.golden": JSON, "ticket.golden": Ticket} {
		var b bytes.Buffer
		if err := write(&b, told()); err != nil {
			t.Fatal(err)
		}
		path := "testdata/" + name
		if *update {
			if err := os.WriteFile(path, b.Bytes(), 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if b.String() != string(want) {
			t.Errorf("%s differs (go test ./engine/report -update writes it anew):\n%s", name, b.String())
		}
	}
}

// TestHeadTells: the head alone answers what was run, why, what to use.
func TestHeadTells(t *testing.T) {
	d := typical()
	head := strings.Join(Head(d), "\n")
	for _, want := range []string{"SYSTEM      sluice.mtx: symmetric, definite (proved); 400 unknowns", "b = ones, not yours", "TODAY       cg+none: converged after 60 its, 60.0 ms, true",
		"WHY         [measured] gmres:30+none: restarting", "USE         cg+ic:0, 20 its in 30.0 ms (set-up 2.00 ms), 39.1 KiB, 2.0 times", "DOUBT       counts on",
		"REPEAT      dwindle run sluice.mtx --today cg+none\n", "FINGERPRINT 9f86", "dwindle 0.1, seed 1, go1; Example 3000, 2 threads"} {
		if !strings.Contains(head, want) {
			t.Errorf("no %q in\n%s", want, head)
		}
	}
	d.Trials[1].Stop = trace.LeastSquares
	if head = strings.Join(Head(d), "\n"); !strings.Contains(head, "USE         cg+ic:0 (least-squares), 20 its") {
		t.Errorf("an answer that is not the solution is not told apart:\n%s", head)
	}
	d.Trials[0].Today, d.Choice.Pairing, d.Choice.Reasons = false, "", nil
	head = strings.Join(Head(d), "\n")
	if !strings.Contains(head, "USE         nothing yet: no pairing") || strings.Contains(head, "TODAY") {
		t.Errorf("without today's pairing and a choice:\n%s", head)
	}
}

func TestWrap(t *testing.T) {
	for _, c := range []struct {
		s    string
		w, n int
		want string
	}{
		{"", 5, 1, ""},
		{"ab cd ef", 5, 9, "ab cd|ef"},
		{"abcdefgh", 5, 9, "abcde|fgh"},
		{"ab cd ef gh", 5, 1, "a ..."},
		{"abcdefghij kl", 6, 2, "abcdef|gh ..."},
	} {
		if got := strings.Join(wrapTo(c.s, c.w, c.n), "|"); got != c.want {
			t.Errorf("wrapTo(%q, %d, %d) = %q, want %q", c.s, c.w, c.n, got, c.want)
		}
	}
}

// full takes a few bytes and then fails, like a full disk.
type full struct{ room int }

var errFull = errors.New("no space left")

func (f *full) Write(p []byte) (int, error) {
	if len(p) > f.room {
		n := f.room
		f.room = 0
		return n, errFull
	}
	f.room -= len(p)
	return len(p), nil
}

// TestWriteErrors: no writer hides that it could not write.
func TestWriteErrors(t *testing.T) {
	for name, write := range map[string]func(io.Writer, Document) error{
		"text": Text, "facts": Facts, "md": Markdown, "json": JSON, "csv": CSV, "solution": Solution, "html": HTML, "ticket": Ticket} {
		for _, room := range []int{0, 20} {
			if err := write(&full{room}, typical()); !errors.Is(err, errFull) {
				t.Errorf("%s into %d bytes: %v", name, room, err)
			}
		}
	}
}

// TestTicket: it is the head alone and pastes cleanly: at most 12 lines, no
// tab, no trailing blank, and neither the command to repeat nor the first
// finding is cut, however many findings there are.
func TestTicket(t *testing.T) {
	d := typical()
	d.Command = "dwindle run sluice.mtx --today cg+none " + strings.Repeat("--pair match,rcm/gmres:30+ilut:1e-3,10 ", 2) + "--tol 1e-6"
	for range 3 {
		d.Findings = append(d.Findings, d.Findings[0])
	}
	var b bytes.Buffer
	if err := Ticket(&b, d); err != nil {
		t.Fatal(err)
	}
	text := b.String()
	if n := strings.Count(text, "\n"); n > HeadLines || n != len(Head(d)) {
		t.Errorf("%d lines", n)
	}
	joined := strings.Join(strings.Fields(text), " ")
	for _, want := range []string{d.Command, leading(d.Findings)[0].Claim, "dwindle 0.1, seed 1", "FINGERPRINT " + d.System.Fingerprint[:printDigits]} {
		if !strings.Contains(joined, want) {
			t.Errorf("no %q in\n%s", want, text)
		}
	}
}

// TestVectorFiles: names are safe for shells and file systems, comments stay
// comments, numbers read back bit for bit.
func TestVectorFiles(t *testing.T) {
	if got := VectorName("residual", "match,rcm/gmres:30+ilut:1e-3,10"); got != "residual-match-rcm-gmres-30-ilut-1e-3-10" {
		t.Errorf("%q", got)
	}
	for _, words := range nasty {
		if name := VectorName("x", words); strings.ContainsAny(name, "/\\ :*\x1b") || strings.HasPrefix(name, "-") || strings.HasPrefix(name, ".") {
			t.Errorf("%q becomes %q", words, name)
		}
	}
	var b bytes.Buffer
	v := Vector{Name: "x", Comment: "one\n2 1\n" + strings.Repeat("and more ", 30), Values: []float64{0.1, -1e-300}}
	if err := WriteVector(&b, typical(), v); err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(strings.TrimSpace(b.String()), "\n")
	for i, l := range lines[1 : len(lines)-3] {
		if !strings.HasPrefix(l, "% ") || len(l) > Width {
			t.Errorf("comment line %d: %q", i+1, l)
		}
	}
	if end := lines[len(lines)-3:]; end[0] != "2 1" || end[1] != "1.0000000000000001e-01" || end[2] != "-1.0000000000000000e-300" {
		t.Errorf("%q", end)
	}
}

// Of trials that were outpaced by the same one, that is said once, and they are
// not looked at one by one; what sets each apart stays.
func TestOutpacedTrialsTakeLittleRoom(t *testing.T) {
	d := told()
	for i, own := range []string{"50 ms", "60 ms"} {
		h := d.Trials[1]
		h.Pairing, h.Stop = []string{"cg+jacobi", "cg+ssor:1"}[i], trace.Outpaced
		h.Reason = "cg+ic:0 has the answer after 30.0 ms; this one has used " + own
		d.Trials = append(d.Trials, h)
	}
	for _, write := range []writer{Text, Markdown} {
		var b strings.Builder
		if err := write(&b, d); err != nil {
			t.Fatal(err)
		}
		for what, most := range map[string]int{"has the answer after": 1, "2 outpaced trials: --as": 1, "probe of M": 1} {
			if n := strings.Count(b.String(), what); n > most {
				t.Errorf("%q stands there %d times", what, n)
			}
		}
		if !strings.Contains(b.String(), "2 outpaced trials: --as html or json tells theirs") {
			t.Errorf("it is not said where the others are told:\n%s", b.String())
		}
	}
	var b strings.Builder
	if Text(&b, d); !strings.Contains(b.String(), "this one has used 60 ms") {
		t.Errorf("what sets a trial apart is lost:\n%s", b.String())
	}
}

type writer func(io.Writer, Document) error
