package report

import (
	"fmt"
	"math"
	"strings"

	"dwindle/engine/inspect"
)

// labelled is a text under a label of a word or two.
type labelled struct{ label, text string }

// studyItems tells what the second look at the system found, one item a
// matter; nothing where there was none.
func studyItems(f *inspect.Facts) []labelled {
	if f == nil || f.Study == nil {
		return nil
	}
	s := f.Study
	var out []labelled
	add := func(label, text string) {
		if text != "" {
			out = append(out, labelled{label, text})
		}
	}
	for _, x := range []*inspect.Spectrum{s.Raw, s.Equilibrated, s.Jacobi, s.Rest} {
		if x != nil {
			add(valuesOf(f), spectrumText(*x, f))
		}
	}
	if finite(s.Digits) && (s.Digits != 0 || s.Raw != nil) {
		add("digits of x", fmt.Sprintf("about %.0f correct decimal digits to expect, from the condition after equilibration", max(s.Digits, 0)))
	}
	for _, v := range s.Null[:min(mostTold, len(s.Null))] {
		add("free direction", "A maps it to "+nullText(v, f))
	}
	add("free directions", moreText(s))
	for _, v := range s.Left[:min(mostTold, len(s.Left))] {
		add("left direction", "A^T maps it to "+nullText(v, f))
	}
	if k := len(s.Left); k > mostTold {
		add("left directions", fmt.Sprintf("%d found, %d of them told", k, mostTold))
	}
	add("normality", normalityText(s.Normality))
	add("couplings", couplingsText(s.Couplings))
	if s.Block != nil {
		add("block", fmt.Sprintf("rows repeat in blocks of %d (%.0f %% of them full), proposed from the pattern; --dofs %d takes them as the unknowns of a node",
			s.Block.Size, 100*s.Block.Share, s.Block.Size))
	}
	for _, l := range s.Lines {
		others := ""
		if finite(l.Other) {
			others = " where others have " + short(l.Other)
		}
		add("single rows", fmt.Sprintf("%s of kind %s, diagonal %s%s%s", plural(l.Count, "row", "rows"), l.Kind, short(l.Value), others, rowText(l.Rows, f)))
	}
	add("asymmetry", lopsidedText(s.Lopsided, f))
	add("growth", growthText(s.Growth))
	if s.Restore != nil {
		add("definiteness", fmt.Sprintf("a shift of %s times %s would restore it%s", short(s.Restore.Shift), s.Restore.Of, rowText(s.Restore.Rows, f)))
	}
	return out
}

// valuesOf says of what kind the ends of a spectrum are.
func valuesOf(f *inspect.Facts) string {
	if f.Symmetric.Answer == inspect.Yes {
		return "eigenvalues"
	}
	return "singular values"
}

// spectrumText tells a spectrum; of an A known to be singular, what is as good
// as zero is told as that.
func spectrumText(x inspect.Spectrum, f *inspect.Facts) string {
	_, high := x.Settled()
	s := fmt.Sprintf("of %s: %s to %s%s", x.Of, lowText(x, f), unless(high, "at least "), short(x.Largest))
	if next := nextLow(x, f); x.Zeros > 0 && next > 0 {
		s += fmt.Sprintf(", condition beside the zero %s", short(x.Largest/next))
	}
	if finite(x.Condition) && x.Condition > 0 && x.Zeros == 0 {
		least := ""
		if x.Certainty == inspect.Estimated { // an end that is not settled lies inside
			least = "at least "
		}
		s += fmt.Sprintf(", condition %s%s", least, short(x.Condition))
		if x.Norm != "" {
			s += " in the " + x.Norm + "-norm"
		}
		if finite(x.Condition1) && x.Condition1 > 0 {
			s += fmt.Sprintf(", at least %s in the 1-norm", short(x.Condition1))
		}
	}
	if x.Negative > 0 {
		s += fmt.Sprintf(", %d below zero", x.Negative)
	}
	if x.Exact {
		s += ", all values"
	}
	sure := x.Certainty
	if x.Zeros > 0 && (x.Exact || nextLow(x, f) > 0) {
		sure = inspect.Measured // only the zeros could not be told from rounding
	}
	return s + fmt.Sprintf(" (%s, by %s)", orDash(string(sure)), orDash(x.How))
}

// lowText tells the low end of a spectrum: zero where it is known or as good as
// that, and what comes next.
func lowText(x inspect.Spectrum, f *inspect.Facts) string {
	low := ""
	switch _, rounded := f.LowEnd(x); {
	case x.Zeros == 1:
		low = "0 (proved)"
	case x.Zeros > 1:
		low = fmt.Sprintf("%d times 0 (proved)", x.Zeros)
	case rounded:
		low = "0 (to rounding)"
	default:
		settled, _ := x.Settled()
		return unless(settled, "at most ") + short(x.Smallest)
	}
	if next := nextLow(x, f); next > 0 {
		low += ", next " + short(next) + ","
	}
	return low
}

func unless(settled bool, words string) string {
	if settled {
		return ""
	}
	return words
}

// nextLow is the first value at the low end that is not zero to rounding; NaN
// if it is not known, or if more values are lost to rounding than are known to
// be zero: what comes next is then among those.
func nextLow(x inspect.Spectrum, f *inspect.Facts) float64 {
	nullity, lost := x.Zeros, 0
	if f.Study != nil && nullity == 0 && !f.Study.More {
		nullity = f.Study.Nullity
	}
	if x.Exact || x.How == "dense" {
		for lost < len(x.Low) && !(x.Low[lost] > 10*x.LargestBound) {
			lost++
		}
	} else if nullity, lost = x.Zeros, x.Zeros; f.Study != nil && nullity > 0 { // a subspace finds a multiple value once
		lost = max(lost, f.Study.Nullity)
	}
	if lost != nullity || lost == 0 || lost >= len(x.Low) {
		return math.NaN()
	}
	return x.Low[lost]
}

// mostTold is how many free directions are told one by one.
const mostTold = 8

// moreText counts the free directions where not each is told.
func moreText(s *inspect.Study) string {
	switch k := s.Nullity; {
	case s.More && s.ZeroPivots > k:
		return fmt.Sprintf("%d found, and more are there: LDL' leaves %d pivots zero to rounding", k, s.ZeroPivots)
	case s.More:
		return fmt.Sprintf("%d found, and more may be there", k)
	case k > mostTold && len(s.Null) > mostTold:
		return fmt.Sprintf("%d in all, %d of them told", k, mostTold)
	}
	return ""
}

// nullText tells what comes of a direction, after "A maps it to".
func nullText(v inspect.NullDirection, f *inspect.Facts) string {
	s := short(v.Quotient) + " of its size"
	if finite(v.Next) && v.Next > 0 {
		s += ", the next to " + short(v.Next)
	}
	if v.Rigid != "" {
		s += ", a " + v.Rigid
	}
	if v.Load > 0x1p-53 && finite(v.Load) {
		push := ", b pushes along it with %s of its norm"
		if f.Symmetric.Answer != inspect.Yes {
			push = ", b has %s of its norm along it"
		}
		s += fmt.Sprintf(push, short(v.Load))
	}
	if l := v.Level; l != nil {
		return s + "; constant on " + l.Text(f.Names)
	}
	if v.Support > 0 {
		s += fmt.Sprintf("; 99 %% of it lies in %s", plural(v.Support, "row", "rows"))
	}
	return s + rowText(v.Rows, f)
}

func normalityText(n *inspect.Normality) string {
	if n == nil {
		return ""
	}
	s := fmt.Sprintf("departure from normality %s", short(n.Henrici))
	switch {
	case n.Normal():
		s = "normal to rounding"
	case !n.Exact:
		s = fmt.Sprintf("departure from normality at least %s", short(n.Henrici))
	}
	if !n.Normal() && finite(n.Equilibrated) && n.Equilibrated > 0 {
		least := "at least "
		if n.Exact {
			least = ""
		}
		s += fmt.Sprintf(" (A equilibrated: %s%s)", least, short(n.Equilibrated))
	}
	s += "; (A+A^T)/2 " + n.FieldText(short)
	if n.FieldHoldsZero {
		s += ": the field of values holds zero"
	}
	return s
}

func couplingsText(c *inspect.Couplings) string {
	if c == nil {
		return ""
	}
	var words []string
	if c.OneWay >= 0.005 { // else it rounds to no row at all
		words = append(words, fmt.Sprintf("%.0f %% of rows are coupled far stronger one way, by %s", 100*c.OneWay, short(c.Ratio)))
	}
	if c.Jump > 1 {
		words = append(words, fmt.Sprintf("diagonals of neighbours differ up to %s times", short(c.Jump)))
	}
	if c.Mesh && finite(c.Dimension) {
		words = append(words, fmt.Sprintf("the pattern looks like a mesh of dimension %.1f", c.Dimension))
	}
	return strings.Join(words, "; ")
}

func lopsidedText(l *inspect.Lopsided, f *inspect.Facts) string {
	if l == nil || l.Count == 0 {
		return ""
	}
	s := plural(l.Count, "row has", "rows have") + " entries without an equal one across"
	if l.Identity > 0 {
		s += fmt.Sprintf(", %d of the form of an identity row", l.Identity)
	}
	if l.OnlyThem {
		s += "; without these rows and columns A is symmetric"
	}
	rows := l.Rows
	if l.OnlyThem {
		rows = l.IdentityRows
	}
	return s + rowText(rows, f)
}

func growthText(g *inspect.Growth) string {
	if g == nil || len(g.Unknowns) == 0 {
		return ""
	}
	var steps []string
	for i := range min(len(g.Unknowns), len(g.Iterations)) {
		steps = append(steps, fmt.Sprintf("%d its at %d", g.Iterations[i], g.Unknowns[i]))
	}
	s := g.Pairing + ": " + strings.Join(steps, ", ")
	if finite(g.Exponent) {
		s += fmt.Sprintf("; iterations grow as unknowns to the power %.2f", g.Exponent)
	}
	return s
}
