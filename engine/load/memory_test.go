package load

import (
	"bufio"
	"context"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
)

// childFile names the environment variable that makes TestMemoryChild load a
// file and print the memory it took.
const childFile = "DWINDLE_LOAD_CHILD"

// writeBand writes a symmetric matrix of order n with five entries a stored
// row, or its lower triangle as a general matrix.
func writeBand(t testing.TB, path string, n int, symmetric bool) {
	t.Helper()
	f, err := os.Create(path)
	if err != nil {
		t.Fatal(err)
	}
	w := bufio.NewWriter(f)
	stored := 0
	for i := range n {
		stored += min(i, 4) + 1
	}
	kind := "general"
	if symmetric {
		kind = "symmetric"
	}
	fmt.Fprintf(w, "%s%d %d %d\n", mmBanner("coordinate real "+kind), n, n, stored)
	for i := range n {
		for j := max(0, i-4); j <= i; j++ {
			fmt.Fprintf(w, "%d %d %.16e\n", i+1, j+1, 1/float64(i+2*j+3))
		}
	}
	if err := w.Flush(); err != nil {
		t.Fatal(err)
	}
	if err := f.Close(); err != nil {
		t.Fatal(err)
	}
}

// TestMemoryChild is the child of TestMemory: alone it has nothing to do.
func TestMemoryChild(t *testing.T) {
	path := os.Getenv(childFile)
	if path == "" {
		return
	}
	s := load(t, path)
	var m runtime.MemStats
	runtime.ReadMemStats(&m)
	fmt.Printf("\nmatrix %d heap %d\n", s.Matrix().Bytes(), m.HeapSys)
}

// TestMemory loads a million stored entries in a process of its own. HeapSys
// never falls: it is the peak of the heap. The promise is 2.5 times the matrix
// and 64 MiB; the test allows 16 MiB, so that waste shows at this size too.
func TestMemory(t *testing.T) {
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	for _, symmetric := range []bool{true, false} {
		path := filepath.Join(t.TempDir(), "band.mtx")
		writeBand(t, path, 200_000, symmetric)
		cmd := exec.Command(self, "-test.run=^TestMemoryChild$", "-test.v")
		cmd.Env = append(os.Environ(), childFile+"="+path)
		out, err := cmd.CombinedOutput()
		if err != nil {
			t.Fatalf("%v\n%s", err, out)
		}
		var matrix, heap int64
		at := max(strings.Index(string(out), "matrix "), 0)
		if _, err := fmt.Sscanf(string(out[at:]), "matrix %d heap %d", &matrix, &heap); err != nil {
			t.Fatalf("%v\n%s", err, out)
		}
		limit := int64(2.5*float64(matrix)) + 16<<20
		t.Logf("symmetric %v: matrix %d bytes, heap at its peak %d, allowed %d", symmetric, matrix, heap, limit)
		if matrix < 12e6 || heap > limit {
			t.Errorf("symmetric %v: matrix %d bytes, heap at its peak %d, allowed %d", symmetric, matrix, heap, limit)
		}
	}
}

func BenchmarkCoordinates(b *testing.B) {
	path := filepath.Join(b.TempDir(), "band.mtx")
	writeBand(b, path, 200_000, true)
	info, err := os.Stat(path)
	if err != nil {
		b.Fatal(err)
	}
	b.SetBytes(info.Size())
	b.ReportAllocs()
	for b.Loop() {
		if _, err := File(context.Background(), path, nil); err != nil {
			b.Fatal(err)
		}
	}
}
