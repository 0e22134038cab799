package engine_test

import (
	"fmt"
	"go/parser"
	"go/token"
	"io/fs"
	"path"
	"path/filepath"
	"slices"
	"strconv"
	"strings"
	"testing"
)

const module = "dwindle"

// mayImport is the import table: each package of the module, and the packages
// of the module it may import. Verbs are stages, nouns are materials.
var mayImport = map[string][]string{
	"engine/linear": {},
	"engine/trace":  {},

	"engine/spectrum": {"engine/linear"},
	"engine/direct":   {"engine/linear"},
	"engine/prepare":  {"engine/linear", "engine/direct"},
	"engine/krylov":   {"engine/linear", "engine/trace", "engine/spectrum"},
	"engine/precond":  {"engine/linear", "engine/trace", "engine/direct", "engine/spectrum"},
	"samples":         {"engine/linear"},

	"engine/load":    {"engine/linear"},
	"engine/inspect": {"engine/linear", "engine/spectrum", "engine/direct", "engine/prepare"},
	"engine/run": {"engine/linear", "engine/trace", "engine/krylov", "engine/precond", "engine/prepare",
		"engine/spectrum"},
	"engine/check":     {"engine/linear", "engine/trace", "engine/direct", "engine/spectrum"},
	"engine/diagnose":  {"engine/trace", "engine/inspect", "engine/spectrum"},
	"engine/choose":    {"engine/trace", "engine/inspect", "engine/diagnose"},
	"engine/report":    {"engine/trace", "engine/inspect", "engine/check", "engine/diagnose", "engine/choose", "engine/spectrum"},
	"engine/recording": {"engine/trace", "engine/inspect", "engine/choose", "engine/report"},

	"engine": {"engine/linear", "engine/trace", "engine/spectrum", "engine/direct", "engine/prepare",
		"engine/krylov", "engine/precond", "samples", "engine/load", "engine/inspect", "engine/run", "engine/check",
		"engine/diagnose", "engine/choose", "engine/report", "engine/recording"},
	"tui": {"engine", "engine/trace", "engine/inspect", "engine/diagnose", "engine/choose", "engine/spectrum",
		"tui/quiet"},
	"tui/quiet":   {},
	"cmd/dwindle": {"engine", "engine/report", "tui", "tui/quiet", "samples"},
}

// verbs are the stages, in their order; a stage imports no later one.
var verbs = []string{"engine/load", "engine/inspect", "engine/run", "engine/check", "engine/diagnose", "engine/choose", "engine/report",
	"engine/recording"}

// nouns are the materials; they import no stage.
var nouns = []string{"engine/linear", "engine/prepare", "engine/trace", "engine/krylov", "engine/precond",
	"engine/spectrum", "engine/direct", "samples"}

// outside says where a library from outside may appear: only in these
// packages, or nowhere but tests where the list is empty.
var outside = []struct {
	prefix string
	only   []string
}{
	{"github.com/charmbracelet/", []string{"tui", "tui/quiet"}},
	{"github.com/guptarohit/asciigraph", []string{"tui", "engine/report"}},
	{"gonum.org/v1/plot", []string{"engine/report"}},
	{"github.com/spf13/cobra", []string{"cmd/dwindle"}},
	{"github.com/rogpeppe/go-internal", nil},
}

// oneFile are libraries that one file of a package keeps to itself.
var oneFile = []string{"github.com/guptarohit/asciigraph"}

// ours are the packages whose numerical work is their own: no gonum.
var ours = []string{"engine/krylov", "engine/precond", "engine/linear"}

// use is one import of one file that is not a test.
type use struct{ pkg, file, path string }

// judge returns what is wrong with an import, or "".
func judge(u use) string {
	allowed, known := mayImport[u.pkg]
	if !known {
		return fmt.Sprintf("package %s is not in the import table", u.pkg)
	}
	if local, ok := strings.CutPrefix(u.path, module+"/"); ok && !slices.Contains(allowed, local) {
		return fmt.Sprintf("%s may not import %s", u.pkg, local)
	}
	for _, o := range outside {
		if strings.HasPrefix(u.path, o.prefix) && !slices.Contains(o.only, u.pkg) {
			return fmt.Sprintf("%s belongs in %q, not in %s", u.path, o.only, u.pkg)
		}
	}
	if strings.HasPrefix(u.path, "gonum.org/") && slices.Contains(ours, u.pkg) {
		return fmt.Sprintf("%s does its own numerical work, without gonum", u.pkg)
	}
	return ""
}

// crowded returns what is wrong with how a library is spread over files.
func crowded(all []use) (faults []string) {
	for _, lib := range oneFile {
		first := map[string]string{}
		for _, u := range all {
			if u.path != lib {
				continue
			}
			if f := first[u.pkg]; f != "" && f != u.file {
				faults = append(faults, fmt.Sprintf("%s is in two files: %s and %s", lib, f, u.file))
			}
			first[u.pkg] = u.file
		}
	}
	return faults
}

// uses collects the imports of every file of the module that is not a test. A
// file without imports gives one use with an empty path, so that its package
// is judged too.
func uses(root string) (all []use, err error) {
	err = filepath.WalkDir(root, func(name string, d fs.DirEntry, err error) error {
		if err != nil {
			return err
		}
		base := d.Name()
		if d.IsDir() {
			if name != root && (strings.HasPrefix(base, ".") || base == "testdata") {
				return fs.SkipDir
			}
			return nil
		}
		if !strings.HasSuffix(base, ".go") || strings.HasSuffix(base, "_test.go") {
			return nil
		}
		rel, err := filepath.Rel(root, name)
		if err != nil {
			return err
		}
		rel = filepath.ToSlash(rel)
		parsed, err := parser.ParseFile(token.NewFileSet(), name, nil, parser.ImportsOnly)
		if err != nil {
			return err
		}
		all = append(all, use{path.Dir(rel), rel, ""})
		for _, s := range parsed.Imports {
			p, err := strconv.Unquote(s.Path.Value)
			if err != nil {
				return err
			}
			all = append(all, use{path.Dir(rel), rel, p})
		}
		return nil
	})
	return all, err
}

func TestImportTable(t *testing.T) {
	all, err := uses("..")
	if err != nil {
		t.Fatal(err)
	}
	if len(all) < 50 {
		t.Fatalf("only %d imports found: not looking at the module", len(all))
	}
	for _, u := range all {
		if fault := judge(u); fault != "" {
			t.Errorf("%s: %s", u.file, fault)
		}
	}
	for _, fault := range crowded(all) {
		t.Error(fault)
	}
}

// The table itself keeps the rules it is there to keep.
func TestImportTableKeepsStages(t *testing.T) {
	for _, noun := range nouns {
		for _, p := range mayImport[noun] {
			if slices.Contains(verbs, p) {
				t.Errorf("material %s imports stage %s", noun, p)
			}
		}
	}
	for i, verb := range verbs {
		for _, p := range mayImport[verb] {
			if slices.Index(verbs, p) > i {
				t.Errorf("stage %s imports the later stage %s", verb, p)
			}
		}
	}
	for pkg, list := range mayImport {
		for _, p := range list {
			if _, ok := mayImport[p]; !ok {
				t.Errorf("%s may import %s, which has no row of its own", pkg, p)
			}
		}
	}
}

// What must be caught is caught.
func TestImportJudge(t *testing.T) {
	for _, u := range []use{
		{"engine/linear", "f.go", "dwindle/engine/trace"},
		{"engine/krylov", "f.go", "dwindle/engine/run"},
		{"engine/diagnose", "f.go", "dwindle/engine/choose"},
		{"engine/diagnose", "f.go", "dwindle/engine/krylov"},
		{"tui", "f.go", "dwindle/engine/run"},
		{"engine/krylov", "f.go", "gonum.org/v1/gonum/mat"},
		{"engine", "f.go", "github.com/charmbracelet/bubbletea"},
		{"cmd/dwindle", "f.go", "github.com/charmbracelet/lipgloss"},
		{"engine/run", "f.go", "github.com/guptarohit/asciigraph"},
		{"tui", "f.go", "gonum.org/v1/plot/vg"},
		{"cmd/dwindle", "f.go", "github.com/rogpeppe/go-internal/testscript"},
		{"engine/helpers", "f.go", ""},
	} {
		if judge(u) == "" {
			t.Errorf("%s importing %q was let through", u.pkg, u.path)
		}
	}
	for _, u := range []use{
		{"engine/spectrum", "f.go", "gonum.org/v1/gonum/mat"},
		{"tui", "f.go", "github.com/charmbracelet/bubbles/key"},
		{"engine/krylov", "f.go", "math"},
	} {
		if fault := judge(u); fault != "" {
			t.Errorf("refused for nothing: %s", fault)
		}
	}
	const lib = "github.com/guptarohit/asciigraph"
	two := []use{{"tui", "a.go", lib}, {"tui", "b.go", lib}, {"engine/report", "c.go", lib}}
	if len(crowded(two)) != 1 || len(crowded(two[1:])) != 0 {
		t.Errorf("files of one library: %q", crowded(two))
	}
}
