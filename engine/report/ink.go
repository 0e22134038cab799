package report

import (
	"bytes"
	"fmt"
	"image/color"
	"regexp"
	"strconv"
	"strings"

	"gonum.org/v1/plot"
	"gonum.org/v1/plot/font"
	"gonum.org/v1/plot/vg"
	"gonum.org/v1/plot/vg/draw"
	"gonum.org/v1/plot/vg/vgsvg"
)

// ink is a colour by its part in a picture, not by its hue: the page's style
// sheet gives it one hue on a light ground and another on a dark one.
type ink struct {
	role    uint8 // into roles
	density uint8 // 255 is opaque
}

// The roles; those of curves follow.
const (
	inkText   = iota // words and marks
	inkFaint         // grids and frames
	inkGoal          // the tolerance and what is measured afresh
	inkGround        // the page itself
	inkCurves        // the first curve
)

// hues is how many curves differ in hue; later ones differ in dashes.
const hues = 8

// roles are the style sheet's names of the inks.
var roles = [...]string{"--ink", "--faint", "--goal", "--ground",
	"--s0", "--s1", "--s2", "--s3", "--s4", "--s5", "--s6", "--s7"}

// inkBlue marks a colour of the drawing as an ink.
const inkBlue = 0x7f

// RGBA carries role and density through the drawing library as red and green,
// a quarter above the value, so that rounding down finds it again.
func (k ink) RGBA() (r, g, b, a uint32) {
	const quarter = 64
	return uint32(k.role)*257 + quarter, uint32(k.density)*257 + quarter, inkBlue*257 + quarter, 0xffff
}

var _ color.Color = ink{}

func solid(role uint8) ink { return ink{role, 255} }

// curveInk is the ink of trial i, counted from 0.
func curveInk(i int) uint8 { return inkCurves + uint8(i%hues) }

// dashes tell curves of one hue apart.
func dashes(i int) []vg.Length {
	return [][]vg.Length{nil, {6, 2}, {2, 2}, {8, 2, 2, 2}}[i/hues%4]
}

var (
	inked   = regexp.MustCompile(`(fill|stroke):#([0-9A-F]{2})([0-9A-F]{2})7F`)
	faces   = regexp.MustCompile(`font-family:[^;"]*;font-variant:[^;"]*;font-weight:[^;"]*;font-style:[^;"]*;?`)
	opening = regexp.MustCompile(`(?s)^.*?<svg[^>]*>`)
)

// picture is a drawing of w by h points.
type picture struct {
	w, h  vg.Length
	paint func(draw.Canvas)
}

// svg draws the picture as an element that can stand within a page: its inks
// become variables of the style sheet, its type that of the page. class and
// label are the element's class and what is read out in its place.
func (p picture) svg(class, label string) markup {
	c := vgsvg.NewWith(vgsvg.UseWH(p.w, p.h))
	p.paint(draw.NewCanvas(c, p.w, p.h))
	var b bytes.Buffer
	c.WriteTo(&b) // into memory: cannot fail
	text := opening.ReplaceAllString(b.String(), "")
	text = faces.ReplaceAllString(text, "")
	text = inked.ReplaceAllStringFunc(text, func(s string) string {
		m := inked.FindStringSubmatch(s)
		return m[1] + ":" + variable(m[1], m[2], m[3])
	})
	head := fmt.Sprintf(`<svg xmlns="http://www.w3.org/2000/svg" class="%s" viewBox="0 0 %g %g" role="img" aria-label="%s" style="max-width:%gpx">`,
		class, p.w.Points(), p.h.Points(), safe(label), 1.35*p.w.Points())
	return markup(head + "\n" + strings.TrimSpace(text))
}

// variable is the style that an ink's two bytes stand for.
func variable(property, role, density string) string {
	r, _ := strconv.ParseUint(role, 16, 8) // the pattern admits nothing else
	d, _ := strconv.ParseUint(density, 16, 8)
	s := "var(" + roles[min(int(r), len(roles)-1)] + ")"
	if d < 255 {
		s += fmt.Sprintf(";%s-opacity:%.2f", property, float64(d)/255)
	}
	return s
}

// lettering is the type of words in pictures; x and y say which part of them
// stands at the point given.
func lettering(size vg.Length, role uint8, x draw.XAlignment, y draw.YAlignment) draw.TextStyle {
	return draw.TextStyle{Color: solid(role), Font: font.Font{Typeface: "Liberation", Variant: "Sans", Size: size},
		XAlign: x, YAlign: y, Handler: plot.DefaultTextHandler}
}

// stroke is the style of a line.
func stroke(k ink, width vg.Length, dash []vg.Length) draw.LineStyle {
	return draw.LineStyle{Color: k, Width: width, Dashes: dash}
}
