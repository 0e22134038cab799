package report

import (
	"bytes"
	"encoding/xml"
	"errors"
	"io"
	"math"
	"math/rand/v2"
	"regexp"
	"strconv"
	"strings"
	"testing"
)

func htmlOf(t *testing.T, d Document) string {
	t.Helper()
	var b bytes.Buffer
	if err := HTML(&b, d); err != nil {
		t.Fatal(err)
	}
	return b.String()
}

// TestHTMLStandsAlone: whatever a document holds, the page is well formed as
// XML too (so every tag is closed and every text escaped), loads nothing, runs
// nothing, and is the same bytes each time.
func TestHTMLStandsAlone(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	docs := []Document{{}, typical(), told()}
	for range 20 {
		docs = append(docs, wild(r))
	}
	for i, d := range docs {
		page := htmlOf(t, d)
		wellFormed(t, i, page)
		holdsNone(t, i, page, "<script", "javascript:", "src=", "href=", "url(", "@import", "<link", "\x1b", "\u009b", "\u202e")
		for _, drawing := range regexp.MustCompile(`(?s)<svg.*?</svg>`).FindAllString(page, -1) {
			holdsNone(t, i, regexp.MustCompile(`(?s)aria-label="[^"]*"|<text.*?</text>`).ReplaceAllString(drawing, ""), "NaN", "Inf", "#", "font-family")
		}
		if page != htmlOf(t, d) {
			t.Fatalf("document %d is written in two ways", i)
		}
	}
}

func holdsNone(t *testing.T, i int, text string, bad ...string) {
	t.Helper()
	for _, b := range bad {
		if at := strings.Index(text, b); at >= 0 {
			t.Fatalf("document %d holds %q: ...%s", i, b, text[max(0, at-60):min(len(text), at+60)])
		}
	}
}

// wellFormed reads the page as strict XML.
func wellFormed(t *testing.T, i int, page string) {
	t.Helper()
	d := xml.NewDecoder(strings.NewReader(page))
	d.Strict, d.Entity = true, xml.HTMLEntity
	for {
		_, err := d.Token()
		if errors.Is(err, io.EOF) {
			return
		}
		if err != nil {
			t.Fatalf("document %d: %v", i, err)
		}
	}
}

// TestHTMLTells: the page holds every part of a full document.
func TestHTMLTells(t *testing.T) {
	page := htmlOf(t, told())
	for _, want := range []string{"sluice.mtx", "go1", "Example 3000", "seed 1", "dwindle run sluice.mtx --today cg+none", "9f86d081",
		"restarting loses what was learned", "measured", "gmres:60+none", "for 1000 b", "Settings, for any code", "incomplete Cholesky, no fill",
		"Ruled out", "not symmetric", "2 of 3 predictions within 20 %", "Spectra of the system", "Density of eigenvalues", "complex plane",
		"Pattern of A", "Own time of the trials", "Memory of the trials", "Convergence of cg+ic:0", "floor 1.0e-12", "energy error", "reruns",
		"column", "history of cg+none", "free direction", "normality", "pressure"} {
		if !strings.Contains(strings.ToLower(page), strings.ToLower(want)) {
			t.Errorf("no %q", want)
		}
	}
	for _, class := range []string{"broad", "narrow"} {
		if n := strings.Count(page, `<svg xmlns="http://www.w3.org/2000/svg" class="`+class); n != 2 {
			t.Errorf("%d %s pictures, want the race and the spectra", n, class)
		}
	}
}

// TestHTMLEscapes: markup in a name stays text.
func TestHTMLEscapes(t *testing.T) {
	d := typical()
	d.System.Name = `<script>alert("1")</script>&amp;`
	page := htmlOf(t, d)
	if strings.Contains(page, "<script") || !strings.Contains(page, "&lt;script&gt;alert(&#34;1&#34;)&lt;/script&gt;&amp;amp;") {
		t.Error("a name is not escaped")
	}
}

// TestInks: each ink has at least 4.5 times contrast to its ground (WCAG 2.1,
// 1.4.3), but for grids, on light, dark and paper, and each comes through the
// drawing library unchanged.
func TestInks(t *testing.T) {
	grounds := regexp.MustCompile(`:root\{[^}]*\}`).FindAllString(style, -1)
	if len(grounds) != 3 {
		t.Fatalf("%d grounds", len(grounds))
	}
	for _, g := range grounds {
		hue := map[string]float64{}
		for _, m := range regexp.MustCompile(`(--[a-z0-9]+):#([0-9a-f]{6})`).FindAllStringSubmatch(g, -1) {
			hue[m[1]] = luminance(t, m[2])
		}
		for _, name := range append([]string{"--soft"}, roles[:]...) {
			for _, ground := range []string{"--ground", "--panel"} {
				c := (math.Max(hue[name], hue[ground]) + 0.05) / (math.Min(hue[name], hue[ground]) + 0.05)
				if _, ok := hue[name]; !ok || c < 4.5 && name != "--faint" && name != "--ground" {
					t.Errorf("%s on %s has a contrast of %.2f in %s", name, ground, c, g[:40])
				}
			}
		}
	}
	for role := range roles {
		for density := range 256 {
			r, g, b, a := ink{uint8(role), uint8(density)}.RGBA()
			share := 255 / float64(a) // as the drawing library computes it
			if int(float64(r)*share) != role || int(float64(g)*share) != density || int(float64(b)*share) != inkBlue {
				t.Fatalf("ink %d, density %d becomes another", role, density)
			}
		}
	}
}

// luminance is the relative luminance of a colour as WCAG 2.1 defines it.
func luminance(t *testing.T, hex string) float64 {
	t.Helper()
	var l float64
	for k, weight := range []float64{0.2126, 0.7152, 0.0722} {
		v, err := strconv.ParseUint(hex[2*k:2*k+2], 16, 8)
		if err != nil {
			t.Fatal(err)
		}
		c := float64(v) / 255
		if c <= 0.04045 {
			c /= 12.92
		} else {
			c = math.Pow((c+0.055)/1.055, 2.4)
		}
		l += weight * c
	}
	return l
}

// TestOwnCurveKeepsPeaks: thinning loses no extreme of 5000 records.
func TestOwnCurveKeepsPeaks(t *testing.T) {
	d := typical()
	rs := curveOf(5000, 1000)
	rs[1234].Residual = 1e7 // one iteration only
	d.Trials[0].Records = rs
	a := newAxis(d.Trials[:1])
	curve := ownCurve(d.Trials[0], a, 300)
	_, high := bounds(curve, math.Inf(1), math.Inf(-1))
	if high != 7 || len(curve) > 700 {
		t.Errorf("%d points, highest %g", len(curve), high)
	}
	if end := curve[len(curve)-1]; end.x != a.of(rs[4999]) {
		t.Errorf("the curve ends at %g", end.x)
	}
}

// TestTicks: round numbers, no sign on zero, none outside, no more than asked.
func TestTicks(t *testing.T) {
	for _, c := range []struct {
		low, high float64
		most      int
		want      string
	}{{0, 950, 4, "0 500"}, {-1, 1, 5, "-1 -0.5 0 0.5 1"}, {0.2, 0.9, 4, "0.2 0.4 0.6 0.8"}, {3, 3, 4, ""}} {
		var got []string
		for _, k := range roundTicks(c.low, c.high, c.most) {
			got = append(got, k.Label)
		}
		if s := strings.Join(got, " "); s != c.want {
			t.Errorf("%g to %g: %s, want %s", c.low, c.high, s, c.want)
		}
	}
	var got []string
	for _, k := range decadeTicks(-9.5, 1.2, 8) {
		got = append(got, k.Label)
	}
	if s := strings.Join(got, " "); s != "1e-8 1e-6 1e-4 1e-2 1" {
		t.Errorf("decades: %s", s)
	}
}
