package tui

import (
	"fmt"
	"os"
	"testing"
)

func TestLook(t *testing.T) {
	if os.Getenv("LOOK") == "" {
		t.Skip()
	}
	for _, sz := range [][2]int{{80, 24}, {120, 40}} {
		for _, g := range []string{"dot", "line", "ascii"} {
			m := newModel(Config{Glyphs: g}, newFake(8, still(12.3)))
			m.w, m.h = sz[0], sz[1]
			m.trials.picked = 3
			m.look()
			fmt.Println(m.View())
			if g != "dot" {
				continue
			}
			m.turn(1)
			fmt.Println(m.View())
			m.turn(1)
			fmt.Println(m.View())
			m.openHelp()
			m.stale = true
			fmt.Println(m.View())
		}
	}
}
