package run

import (
	"strings"
	"testing"
)

func TestNearest(t *testing.T) {
	for _, c := range []struct{ pairing, want string }{
		{"cg+ilu0", `did you mean ilu:0?`}, {"cgg+ilu:0", `did you mean cg?`}, {"gmres30+none", `did you mean gmres:30?`},
		{"cg+jacobbi", `did you mean jacobi?`}, {"scal/cg+none", `did you mean scale?`},
		{"bicgstb+none", `did you mean bicgstab?`}, {"cg+multigrid", "there are none, jacobi"},
	} {
		if _, err := Parse(c.pairing); err == nil || !strings.Contains(err.Error(), c.want) {
			t.Errorf("%s: %v, want %s", c.pairing, err, c.want)
		}
	}
}

// The distances of the words that textbooks show.
func TestDistance(t *testing.T) {
	for _, c := range []struct {
		a, b string
		want int
	}{{"kitten", "sitting", 3}, {"sunday", "saturday", 3}, {"", "abc", 3}, {"abc", "", 3}, {"same", "same", 0}, {"ab", "ba", 2}} {
		if got := lettersOff(c.a, c.b); got != c.want {
			t.Errorf("%s to %s: %d, want %d", c.a, c.b, got, c.want)
		}
	}
}
