package report

import (
	"bytes"
	"encoding/csv"
	"encoding/json"
	"fmt"
	"math/rand/v2"
	"slices"
	"sort"
	"strconv"
	"strings"
	"testing"

	"dwindle/engine/trace"
)

// keys are the keys that stable readers may count on: path of object, then
// its members. More may be there.
var keys = map[string]string{
	"":                      "schema version command machine settings system facts trials findings choice toolchain study",
	"machine":               "cpu threads memory_limit_bytes",
	"settings":              "tol stop_rule iterations seconds seed",
	"system":                "name unknowns entries rhs digits fingerprint",
	"facts":                 "symmetric positive_definite singular components pattern_symmetric negative_definite diagonal singletons unreachable triangle_only dominant",
	"facts.*":               "answer certainty value why rows",
	"trials.#":              "pairing today stop iterations products precond_uses setup_seconds own_seconds memory_bytes norm residual true_residual backward_error componentwise_error error would_stop condition reason locks energy_errors delay_iterations harmonic_ritz predictions without fields preconditioner_probe rerun_iterations columns worst_rows worst_row_labels build events",
	"trials.#.would_stop":   "rhs initial preconditioned backward energy",
	"trials.#.condition":    "of estimate smallest largest settled bound",
	"findings.#":            "rule weight certainty subject claim advice try evidence also",
	"findings.#.evidence.#": "quantity value unit iteration rows labels",
	"choice":                "pairing ranked reasons doubts settings ruled_out outcomes goal",
	"choice.ranked.#":       "pairing seconds_to_tol memory_bytes seconds_low seconds_high for",
	"choice.ranked.#.for.#": "right_hand_sides seconds",
}

// TestJSONKeys: every promised key is there, in any document, and what JSON
// cannot hold is null.
func TestJSONKeys(t *testing.T) {
	r := rand.New(rand.NewPCG(5, 6))
	docs := []Document{{}, typical(), told()}
	for range 200 {
		docs = append(docs, wild(r))
	}
	for i, d := range docs {
		root := decode(t, d)
		for path, want := range keys {
			for _, o := range follow(root, path) {
				m, ok := o.(map[string]any)
				if !ok {
					t.Fatalf("document %d: %q is no object: %v", i, path, o)
				}
				for _, k := range strings.Fields(want) {
					if _, ok := m[k]; !ok {
						t.Fatalf("document %d: no %q in %q", i, k, path)
					}
				}
			}
		}
	}
}

func decode(t *testing.T, d Document) map[string]any {
	t.Helper()
	var b bytes.Buffer
	if err := JSON(&b, d); err != nil {
		t.Fatal(err)
	}
	if bytes.ContainsAny(b.Bytes(), "\x1b\x7f") || bytes.Contains(b.Bytes(), []byte("\u009b")) {
		t.Fatal("a control character got through")
	}
	var root map[string]any
	if err := json.Unmarshal(b.Bytes(), &root); err != nil {
		t.Fatalf("%v in %s", err, b.String())
	}
	return root
}

// follow returns the values at a path; # is every element, * every member.
func follow(v any, path string) []any {
	if path == "" {
		return []any{v}
	}
	step, rest, _ := strings.Cut(path, ".")
	var next []any
	switch v := v.(type) {
	case []any:
		next = v
	case map[string]any:
		if step != "*" {
			return follow(v[step], rest)
		}
		for _, k := range sorted(v) {
			next = append(next, v[k])
		}
	}
	var out []any
	for _, n := range next {
		out = append(out, follow(n, rest)...)
	}
	return out
}

func sorted(m map[string]any) []string {
	var ks []string
	for k := range m {
		ks = append(ks, k)
	}
	sort.Strings(ks)
	return ks
}

// TestJSONDeviation: how far factors are from A is a number, and null where it
// is not known.
func TestJSONDeviation(t *testing.T) {
	d := told()
	other := *d.Trials[1].Probe
	other.Deviation = 0
	d.Trials[2].Probe = &other
	if got := fmt.Sprint(follow(decode(t, d), "trials.#.preconditioner_probe.deviation")); got != "[0.31 <nil>]" {
		t.Errorf("deviations %s", got)
	}
}

// TestJSONNames: wherever JSON counts rows it gives their labels, and a finding
// lists the other pairings that it holds for.
func TestJSONNames(t *testing.T) {
	d := typical()
	facts := *d.Facts
	facts.Names.Labels = []string{"1:ux", "1:uy", "", "7:rz\x1b", "9:ux"}
	d.Facts = &facts
	d.Findings[1].Also = []string{"gmres:30+jacobi"}
	d.Trials[1].WorstRows = []trace.RowShare{{Row: 4, Share: 0.9}, {Row: 2, Share: 0.1}}
	d.Trials[2].Events = append(d.Trials[2].Events, trace.Event{Iter: 3, Kind: trace.NegativeCurvature, Rows: []trace.RowShare{{Row: 1}}})
	root := decode(t, d)
	for path, want := range map[string]string{
		"trials.#.worst_rows":          "[[] [5 3] [] []]",
		"trials.#.worst_row_labels":    "[[] [9:ux ] [] []]",
		"trials.#.events.#.rows":       "[[2]]",
		"trials.#.events.#.labels":     "[[1:uy]]",
		"trials.#.build.broke.#.label": "[7:rz?]",
		"findings.#.evidence.#.labels": "[[1:ux 9:ux]]",
		"findings.#.also":              "[[] [gmres:30+jacobi]]",
	} {
		if got := fmt.Sprint(follow(root, path)); got != want {
			t.Errorf("%s = %s, want %s", path, got, want)
		}
	}
}

// TestJSONValues: rows count from 1, unknown is null, the value is the value.
func TestJSONValues(t *testing.T) {
	root := decode(t, typical())
	for path, want := range map[string]string{
		"schema":                        "1",
		"settings.tol":                  "1e-08",
		"facts.positive_definite.value": "<nil>",
		"facts.symmetric.value":         "0",
		"facts.singular.answer":         "unknown",
		"facts.components.answer":       "yes",
		"facts.components.value":        "1",
		"findings.#.evidence.#.rows":    "[1 5]",
		"choice.pairing":                "cg+ic:0",
	} {
		if got := fmt.Sprint(follow(root, path)[0]); got != want {
			t.Errorf("%s = %s, want %s", path, got, want)
		}
	}
	trial := follow(root, "trials.#")
	for i, checks := range []map[string]string{
		{"today": "true", "stop": "converged", "error": "<nil>", "condition.estimate": "178", "condition.bound": "lower",
			"would_stop.rhs": "60", "would_stop.energy": "<nil>", "would_stop.initial": "<nil>"},
		{"build.broke.#.row": "4", "precond_uses": "21"},
		{"stop": "stagnated", "condition.of": "<nil>", "condition.bound": "<nil>", "events": "[]"},
		{"stop": "refused", "residual": "<nil>", "true_residual": "<nil>", "norm": "<nil>"},
	} {
		for path, want := range checks {
			if got := fmt.Sprint(follow(trial[i], path)[0]); got != want {
				t.Errorf("trial %d: %s = %s, want %s", i+1, path, got, want)
			}
		}
	}
	d := typical()
	d.Choice.Pairing = ""
	if got := follow(decode(t, d), "choice.pairing")[0]; got != nil {
		t.Errorf("no choice is %v", got)
	}
}

// TestNumber: the shortest form that reads back, and null.
func TestNumber(t *testing.T) {
	for _, x := range odd {
		text := number(x).text()
		if !finite(x) {
			if text != "null" {
				t.Errorf("%g is %s", x, text)
			}
			continue
		}
		if back, err := strconv.ParseFloat(text, 64); err != nil || back != x {
			t.Errorf("%g is %s", x, text)
		}
	}
}

// TestCSV: the promised header, one line a record, unknown is empty.
func TestCSV(t *testing.T) {
	var b bytes.Buffer
	d := typical()
	d.Trials[0].Pairing = "match,rcm/cg+none"
	if err := CSV(&b, d); err != nil {
		t.Fatal(err)
	}
	if !strings.HasPrefix(b.String(), "pairing,iteration,own_seconds,products,precond_uses,residual,norm,true_residual\n") {
		t.Error("header")
	}
	rows, err := csv.NewReader(&b).ReadAll()
	if err != nil || len(rows) != 1+61+21+800 {
		t.Fatalf("%d rows, %v", len(rows), err)
	}
	if want := []string{"match,rcm/cg+none", "60", "0.06", "61", "0", "9e-09", "2", "9.1e-09"}; !slices.Equal(rows[61], want) {
		t.Errorf("%q, want %q", rows[61], want)
	}
	if rows[1][7] != "" {
		t.Errorf("an unknown true residual is %q", rows[1][7])
	}
}

// TestSolution: a Matrix Market array whose numbers read back bit for bit.
func TestSolution(t *testing.T) {
	var b bytes.Buffer
	d := typical()
	d.System.Name = "a\n1 2 3\x1b"
	if err := Solution(&b, d); err != nil {
		t.Fatal(err)
	}
	lines := strings.Split(b.String(), "\n")
	if lines[0] != "%%MatrixMarket matrix array real general" || lines[2] != "3 1" || len(lines) != 7 {
		t.Fatalf("%q", lines)
	}
	for i, x := range d.Solution {
		if back, err := strconv.ParseFloat(lines[3+i], 64); err != nil || back != x {
			t.Errorf("%g is written %s", x, lines[3+i])
		}
	}
	if err := Solution(&b, Document{Trials: []trace.History{{}}}); err == nil || !strings.Contains(err.Error(), "no trial has begun") {
		t.Errorf("no solution: %v", err)
	}
}

// TestJSONDeep: what deeper looks found is told with its numbers, rows from 1.
func TestJSONDeep(t *testing.T) {
	root := decode(t, told())
	for path, want := range map[string]string{
		"study.free_directions.#.rows":     "[4 6]",
		"study.free_directions.#.quotient": "1e-14",
		"study.spectra.#.condition":        "199",
		"study.single_rows.#.rows":         "[1 10]",
		"study.digits":                     "13",
		"study.growth.exponent":            "0.5",
		"study.restoring_shift.shift":      "0.2",
		"choice.ranked.#.for.#.seconds":    "0.03",
		"choice.ruled_out.#.reason":        "its M is not symmetric",
		"choice.outcomes.#.predicted":      "21",
	} {
		if got := fmt.Sprint(follow(root, path)[0]); got != want {
			t.Errorf("%s = %s, want %s", path, got, want)
		}
	}
	trial := follow(root, "trials.#")[1]
	for path, want := range map[string]string{
		"locks.#.value":                      "0.3",
		"energy_errors.#.upper":              "1.1",
		"predictions.#.total":                "21",
		"fields.#.name":                      "pressure",
		"preconditioner_probe.distance":      "0.4",
		"preconditioner_probe.distance_of_m": "<nil>",
		"rerun_iterations":                   "[19 20 21]",
		"columns.#.iterations":               "21",
		"delay_iterations":                   "2",
	} {
		if got := fmt.Sprint(follow(trial, path)[0]); got != want {
			t.Errorf("%s = %s, want %s", path, got, want)
		}
	}
	if follow(decode(t, typical()), "study")[0] != nil {
		t.Error("a study that was not made is told")
	}
}
