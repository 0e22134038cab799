package samples

import (
	"flag"
	"fmt"
	"os"
	"strings"
	"testing"

	"dwindle/engine/linear"
)

var update = flag.Bool("update", false, "write the table of README.md anew")

const (
	tableStart = "<!-- table: go test ./samples -update -->\n"
	tableEnd   = "<!-- end of table -->\n"
)

// TestReadme checks the table of README.md against the catalogue.
func TestReadme(t *testing.T) {
	raw, err := os.ReadFile("README.md")
	if err != nil {
		t.Fatal(err)
	}
	before, rest, ok := strings.Cut(string(raw), tableStart)
	old, after, ok2 := strings.Cut(rest, tableEnd)
	if !ok || !ok2 {
		t.Fatal("README.md has lost the marks of its table")
	}
	want := table(t)
	if old == want {
		return
	}
	if !*update {
		t.Fatal("the table of README.md is out of date: go test ./samples -update")
	}
	if err := os.WriteFile("README.md", []byte(before+tableStart+want+tableEnd+after), 0o644); err != nil {
		t.Fatal(err)
	}
}

func table(t *testing.T) string {
	var b strings.Builder
	for _, s := range Catalogue {
		_, a := build(t, s.Name)
		fmt.Fprintf(&b, "\n### %s: %s\n\n", s.Name, s.Title)
		fmt.Fprintf(&b, "`%s%s` has %d unknowns and %d entries.\n\n", Prefix, s.Name, a.NRows, a.Entries())
		fmt.Fprintf(&b, "| | |\n| --- | --- |\n| shows | %s |\n| source | %s |\n| spectrum | %s |\n", s.Shows, s.Source, s.Spectrum)
		for _, p := range s.Params {
			fmt.Fprintf(&b, "| `%s` | %s (default %s) |\n", p.Name, p.Meaning, fallback(s, p))
		}
		if len(s.Expect) > 0 {
			fmt.Fprintf(&b, "| findings | %s |\n", strings.Join(s.Expect, ", "))
		}
	}
	return b.String() + "\n"
}

// fallback prints a parameter's default as it would be written.
func fallback(s Sample, p linear.Param) string {
	v, _ := linear.Resolve(s.Name, s.Params, nil)
	for i, a := range v.Args() {
		if s.Params[i].Name == p.Name {
			return a.Text
		}
	}
	return ""
}
