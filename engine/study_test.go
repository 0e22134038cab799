package engine

import (
	"context"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// A truss that nothing holds, with the coordinates of its joints: the two
// translations and the rotation are named, before any trial.
func TestRigidMotionsAreNamed(t *testing.T) {
	a, xy := truss(8)
	coordinates := filepath.Join(t.TempDir(), "xy.txt")
	var text strings.Builder
	for i := range xy[0] {
		fmt.Fprintf(&text, "%g %g\n", xy[0][i], xy[1][i])
	}
	if err := os.WriteFile(coordinates, []byte(text.String()), 0o600); err != nil {
		t.Fatal(err)
	}
	v := ended(t, written(t, a, 0), Options{FactsOnly: true, Dofs: 2, Coordinates: coordinates})
	for _, f := range v.Findings {
		if f.Rule == "mechanism" {
			if want := "3 zero-energy motions of the whole (2 translations, 1 rotation): nothing holds it in place"; !strings.Contains(f.Claim, want) {
				t.Errorf("%q does not say %q", f.Claim, want)
			}
			return
		}
	}
	t.Errorf("no mechanism is told: %v", v.Findings)
}

// Skip ends a long second look: the session goes on with the facts it has.
func TestTheSecondLookIsSkipped(t *testing.T) {
	s := Open(context.Background(), "sample:plate:400", Options{FactsOnly: true, Threads: 1})
	defer s.Close()
	ctx, cancel := context.WithTimeout(context.Background(), time.Minute)
	defer cancel()
	for v := s.Snapshot(); v.Phase != Ended; v = s.Snapshot() {
		if v.Err != nil || ctx.Err() != nil {
			t.Fatal(v.Err, ctx.Err())
		}
		if v.Facts != nil && v.Facts.Study != nil {
			s.Skip()
		}
		time.Sleep(time.Millisecond)
	}
	v := s.Snapshot()
	if !v.Facts.Complete || v.Facts.Study == nil {
		t.Fatalf("facts complete: %v, study %v", v.Facts.Complete, v.Facts.Study)
	}
	if v.Facts.Study.Density != nil {
		t.Error("the look was not cut short")
	}
}
