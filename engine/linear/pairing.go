package linear

import (
	"fmt"
	"math"
	"strconv"
	"strings"
)

// Arg is one written argument: a value, perhaps with the parameter's name.
type Arg struct{ Name, Text string }

// Part is one method as written: a name and its arguments.
type Part struct {
	Name string
	Args []Arg
}

// Pairing is a written pairing: preparations, a solver and a preconditioner.
//
//	match,rcm/gmres:30+ilut:1e-3,10
type Pairing struct {
	Preps   []Part
	Solver  Part
	Precond Part
	From    string // the preconditioner is built from the matrix in this file; empty: from A
}

// String prints the part: name:arg,name=arg.
func (p Part) String() string {
	var b strings.Builder
	b.WriteString(p.Name)
	for i, a := range p.Args {
		b.WriteByte(":,"[min(i, 1)])
		if a.Name != "" {
			b.WriteString(a.Name + "=")
		}
		b.WriteString(a.Text)
	}
	return b.String()
}

// String prints the pairing in the form ParsePairing reads.
func (p Pairing) String() string {
	s := p.Solver.String() + "+"
	if p.From != "" {
		s += fromWord + p.From + "/"
	}
	s += p.Precond.String()
	if len(p.Preps) == 0 {
		return s
	}
	names := make([]string, len(p.Preps))
	for i, q := range p.Preps {
		names[i] = q.String()
	}
	return strings.Join(names, ",") + "/" + s
}

// ParsePairing reads a pairing. Without a preconditioner it is "none". The
// parenthesised form of the trade, gmres(30)+ilu(0), is read too. Names are
// checked for form only; the catalogues know which exist.
func ParsePairing(s string) (Pairing, error) {
	var p Pairing
	if s == "" {
		return p, fmt.Errorf("a pairing is empty; write solver+preconditioner, such as cg+jacobi")
	}
	rest := s
	if before, after, ok := strings.Cut(s, "/"); ok && plus(before) < 0 {
		for _, w := range splitPreps(before) {
			q, err := parsePart(w)
			if err != nil {
				return p, fmt.Errorf("pairing %q: %w", s, err)
			}
			p.Preps = append(p.Preps, q)
		}
		rest = after
	}
	left, right := rest, "none"
	if i := plus(rest); i >= 0 {
		left, right = rest[:i], rest[i+1:]
	}
	if file, ok := strings.CutPrefix(right, fromWord); ok {
		i := strings.LastIndexByte(file, '/')
		if i <= 0 || !validPath(file[:i]) {
			return p, fmt.Errorf("pairing %q: write from:FILE/PRECONDITIONER", s)
		}
		p.From, right = file[:i], file[i+1:]
	}
	var err error
	if p.Solver, err = parsePart(left); err == nil {
		p.Precond, err = parsePart(right)
	}
	if err != nil {
		return p, fmt.Errorf("pairing %q: %w", s, err)
	}
	return p, nil
}

// fromWord introduces the matrix a preconditioner is built from.
const fromWord = "from:"

// plus finds the sign between solver and preconditioner: one that is not an
// exponent's.
func plus(s string) int {
	for i := 0; i < len(s); i++ {
		if s[i] == '+' && (i+1 == len(s) || !digit(s[i+1])) {
			return i
		}
	}
	return -1
}

// splitPreps splits preparations at the commas that start a new name.
func splitPreps(s string) []string {
	var out []string
	start := 0
	for i := 0; i < len(s); i++ {
		if s[i] != ',' {
			continue
		}
		word, _, _ := strings.Cut(s[i+1:], ",")
		if i+1 < len(s) && lower(s[i+1]) && !strings.Contains(word, "=") {
			out, start = append(out, s[start:i]), i+1
		}
	}
	return append(out, s[start:])
}

func parsePart(s string) (Part, error) {
	name, args, has := s, "", false
	if i := strings.IndexAny(s, ":("); i >= 0 {
		name, args, has = s[:i], s[i+1:], true
		if s[i] == '(' {
			if !strings.HasSuffix(args, ")") {
				return Part{}, fmt.Errorf("%q: a parenthesis is not closed", s)
			}
			args = strings.TrimSuffix(args, ")")
		}
	}
	if !validName(name) {
		return Part{}, fmt.Errorf("%q is not a method name", name)
	}
	p := Part{Name: name}
	if !has {
		return p, nil
	}
	for _, a := range strings.Split(args, ",") {
		arg := Arg{Text: a}
		if n, v, ok := strings.Cut(a, "="); ok {
			arg = Arg{Name: n, Text: v}
			if !validName(n) {
				return p, fmt.Errorf("%q is not a parameter name", n)
			}
		}
		if !validText(arg.Text) {
			return p, fmt.Errorf("%s: %q is not a parameter value", name, a)
		}
		p.Args = append(p.Args, arg)
	}
	return p, nil
}

func validName(s string) bool {
	if s == "" || !lower(s[0]) {
		return false
	}
	for i := 0; i < len(s); i++ {
		if !lower(s[i]) && !digit(s[i]) && s[i] != '-' {
			return false
		}
	}
	return true
}

func validText(s string) bool { return validPath(s) && !strings.ContainsRune(s, ':') }

// validPath admits letters, digits and what file names are made of in places
// where no shell needs a quote.
func validPath(s string) bool {
	for i := 0; i < len(s); i++ {
		c := s[i]
		if !lower(c) && !digit(c) && !(c >= 'A' && c <= 'Z') && !strings.ContainsRune(".-+_/:", rune(c)) {
			return false
		}
	}
	return s != ""
}

func lower(c byte) bool { return c >= 'a' && c <= 'z' }
func digit(c byte) bool { return c >= '0' && c <= '9' }

// maxFamily bounds how many pairings one range may make.
const maxFamily = 200

// Expand writes out the ranges of a pairing: an argument a..b..step becomes
// one pairing a value, the ends included. A pairing without a range is
// returned alone.
func Expand(s string) ([]string, error) {
	p, err := ParsePairing(s)
	if err != nil {
		return nil, err
	}
	parts := append(append([]Part(nil), p.Preps...), p.Solver, p.Precond)
	for i, q := range parts {
		for k, a := range q.Args {
			if !strings.Contains(a.Text, "..") || strings.Contains(a.Text, "/") {
				continue // no range, or a path such as ../M.mtx
			}
			vals, err := span(a.Text)
			if err != nil {
				return nil, fmt.Errorf("pairing %q: %w", s, err)
			}
			var out []string
			for _, v := range vals {
				more, err := Expand(p.with(i, k, v).String())
				if err != nil {
					return nil, err
				}
				if out = append(out, more...); len(out) > maxFamily {
					return nil, fmt.Errorf("pairing %q: more than %d trials", s, maxFamily)
				}
			}
			return out, nil
		}
	}
	return []string{s}, nil
}

// with returns a copy whose part i (preparations, solver, preconditioner in
// order) has text for its argument k.
func (p Pairing) with(i, k int, text string) Pairing {
	parts := append(append([]Part(nil), p.Preps...), p.Solver, p.Precond)
	parts[i].Args = append([]Arg(nil), parts[i].Args...)
	parts[i].Args[k].Text = text
	n := len(p.Preps)
	return Pairing{Preps: parts[:n:n], Solver: parts[n], Precond: parts[n+1], From: p.From}
}

func span(text string) ([]string, error) {
	w := strings.Split(text, "..")
	if len(w) != 3 {
		return nil, fmt.Errorf("%q: a range is first..last..step", text)
	}
	var x [3]float64
	for i := range w {
		var err error
		if x[i], err = strconv.ParseFloat(w[i], 64); err != nil || math.IsInf(x[i], 0) || math.IsNaN(x[i]) {
			return nil, fmt.Errorf("%q: %q is not a number", text, w[i])
		}
	}
	count := (x[1]-x[0])/x[2] + 1e-9
	if !(count >= 0 && count < maxFamily) {
		return nil, fmt.Errorf("%q: the step does not lead from %s to %s within %d values", text, w[0], w[1], maxFamily)
	}
	var out []string
	for k := 0; k <= int(count); k++ {
		out = append(out, short(tidy(x[0]+float64(k)*x[2], x[2])))
	}
	return out, nil
}

// tidy rounds v to twelve decimals below those of step, which takes away what
// the sums of a range leave behind: 0.30000000000000004 becomes 0.3.
func tidy(v, step float64) float64 {
	decimals := 12 - int(math.Floor(math.Log10(math.Abs(step))))
	text := strconv.FormatFloat(v, 'f', max(decimals, 0), 64)
	v, _ = strconv.ParseFloat(text, 64)
	return v
}
