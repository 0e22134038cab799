package report

import (
	"fmt"
	"html"
	"strings"
	"unicode"
)

// markup is HTML that is safe to write: text enters it through safe alone.
type markup string

// safe escapes a text for HTML. Characters that are not seen but obeyed
// (controls, marks of direction, broken encoding) become "?".
func safe(s string) markup {
	return markup(html.EscapeString(strings.Map(func(r rune) rune {
		if unicode.IsControl(r) && r != '\n' || unicode.Is(unicode.Cf, r) || r == unicode.ReplacementChar || !isXML(r) {
			return '?'
		}
		return r
	}, s)))
}

// isXML says whether XML, and so HTML, can hold the character.
func isXML(r rune) bool { return r != 0xFFFE && r != 0xFFFF }

// element wraps parts in a tag, which may carry attributes.
func element(tag string, parts ...markup) markup {
	name, _, _ := strings.Cut(tag, " ")
	var b strings.Builder
	b.WriteString("<" + tag + ">")
	for _, p := range parts {
		b.WriteString(string(p))
	}
	b.WriteString("</" + name + ">")
	return markup(b.String())
}

// section is a part of the page under a heading; nothing where it is empty.
func section(title string, parts ...markup) markup {
	body := join(parts...)
	if body == "" {
		return ""
	}
	return element("section", element("h2", safe(title)), body) + "\n"
}

func join(parts ...markup) markup {
	var b strings.Builder
	for _, p := range parts {
		b.WriteString(string(p))
	}
	return markup(b.String())
}

// bullets is a list of texts; nothing where there are none.
func bullets(items []string) markup {
	var list []markup
	for _, s := range items {
		list = append(list, element("li", safe(s)))
	}
	if len(list) == 0 {
		return ""
	}
	return element("ul", list...)
}

// column is the heading of a table's column.
type column struct {
	title   string
	numbers bool // set flush right
}

// table is a table that scrolls by itself where the page is narrow; nothing
// without rows. A row of one cell is a remark on the row above it.
func table(columns []column, rows [][]markup) markup {
	if len(rows) == 0 {
		return ""
	}
	var head, body []markup
	for _, c := range columns {
		head = append(head, element(tagged("th", c), safe(c.title)))
	}
	for _, r := range rows {
		if len(r) == 1 {
			body = append(body, remark(r[0], len(columns)), "\n")
			continue
		}
		var cells []markup
		for k, m := range r {
			cells = append(cells, element(tagged("td", columns[k]), m))
		}
		body = append(body, element("tr", cells...), "\n")
	}
	return element(`div class="wide"`, element("table", element("thead", element("tr", head...)), element("tbody", body...)))
}

// remark is a row that holds one text across all columns but the first.
func remark(m markup, columns int) markup {
	return element("tr", element("td"), element(fmt.Sprintf(`td class="remark" colspan="%d"`, columns-1), element("div", m)))
}

func tagged(tag string, c column) string {
	if c.numbers {
		return tag + ` class="n"`
	}
	return tag
}

// words turns texts into cells.
func words(list ...string) []markup {
	var out []markup
	for _, s := range list {
		out = append(out, safe(s))
	}
	return out
}

// figure is a picture with what its signs mean.
func figure(drawing, caption markup) markup {
	if drawing == "" {
		return ""
	}
	return element("figure", drawing, element("figcaption", caption)) + "\n"
}
