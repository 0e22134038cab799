package trace

import (
	"strings"
	"testing"
)

// Each trial has a tag of its own, and none that a chart marks with.
func TestTags(t *testing.T) {
	seen := map[string]bool{}
	for n := 1; n <= 200; n++ {
		tag := Tag(n)
		if seen[tag] || len(tag) == 1 && strings.Contains("xRIPBE.'+=!#~-^", tag) {
			t.Errorf("trial %d has the tag %q", n, tag)
		}
		seen[tag] = true
	}
	if Tag(9)+Tag(10)+Tag(34) != "9az" {
		t.Errorf("tags %s %s %s, want 9 a z", Tag(9), Tag(10), Tag(34))
	}
}
