package linear

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"
)

// Has is what a method cannot run without; a pairing that lacks one is
// refused with the reason.
type Has uint8

// The abilities a method can need.
const (
	NeedsEntries    Has = 1 << iota // the matrix entries, not only products
	NeedsDiagonal                   // the diagonal, every entry nonzero
	NeedsTranspose                  // Aᵀ x
	NeedsTransposeM                 // M⁻ᵀ x
	NeedsSplit                      // two blocks of unknowns: zeros on the diagonal, or told
)

// Assume is what a method's theory takes for granted. A pairing is run all
// the same; diagnosis judges.
type Assume uint8

// The assumptions.
const (
	AssumesSymmetric  Assume = 1 << iota // A = Aᵀ
	AssumesDefinite                      // A (or M) positive definite
	AssumesFixedM                        // the preconditioner is one fixed linear operator
	AssumesSymmetricM                    // M = Mᵀ, positive definite
)

// Kind is the type of a parameter.
type Kind uint8

// The kinds of parameters.
const (
	Int Kind = iota
	Real
	Choice
	Path // a file; must be given
)

// Param describes one parameter of a method: parsed, listed, edited and
// varied from this.
type Param struct {
	Name     string
	Kind     Kind
	Default  float64  // for Choice: index into Choices
	Min, Max float64  // inclusive bounds for Int and Real
	Choices  []string // for Choice
	Quiet    bool     // not printed at its default, unless a later one is
	Meaning  string   // one line
}

// Values are the parameters of one method, in its order.
type Values struct {
	params []Param
	vals   []float64
	paths  []string // length of params; empty but for Kind Path
}

// Resolve matches the written arguments with the parameters of the method
// named what and fills in defaults.
func Resolve(what string, params []Param, args []Arg) (Values, error) {
	v := Values{params: params, vals: make([]float64, len(params)), paths: make([]string, len(params))}
	for i, p := range params {
		v.vals[i] = p.Default
	}
	given := make([]bool, len(params))
	for pos, a := range args {
		i := pos
		if a.Name != "" {
			i = slices.IndexFunc(params, func(p Param) bool { return p.Name == a.Name })
			if i < 0 {
				return v, fmt.Errorf("%s has no parameter %q%s", what, a.Name, hint(params))
			}
		} else if pos >= len(params) {
			return v, fmt.Errorf("%s takes %d parameter(s), %d given%s", what, len(params), len(args), hint(params))
		}
		if given[i] {
			return v, fmt.Errorf("%s: parameter %s is given twice", what, params[i].Name)
		}
		given[i] = true
		if params[i].Kind == Path {
			v.paths[i] = a.Text
			continue
		}
		x, err := params[i].parse(a.Text)
		if err != nil {
			return v, fmt.Errorf("%s: %w", what, err)
		}
		v.vals[i] = x
	}
	for i, p := range params {
		if p.Kind == Path && !given[i] {
			return v, fmt.Errorf("%s needs the file %s", what, p.Name)
		}
	}
	return v, nil
}

func hint(params []Param) string {
	if len(params) == 0 {
		return ""
	}
	names := make([]string, len(params))
	for i, p := range params {
		names[i] = p.Name
	}
	return " (its parameters: " + strings.Join(names, ", ") + ")"
}

func (p Param) parse(text string) (float64, error) {
	if p.Kind == Choice {
		i := slices.Index(p.Choices, text)
		if i < 0 {
			return 0, fmt.Errorf("%s must be one of %s, not %q", p.Name, strings.Join(p.Choices, ", "), text)
		}
		return float64(i), nil
	}
	x, err := strconv.ParseFloat(text, 64)
	if err != nil || math.IsNaN(x) || math.IsInf(x, 0) {
		return 0, fmt.Errorf("%s must be a number, not %q", p.Name, text)
	}
	if p.Kind == Int && x != math.Trunc(x) {
		return 0, fmt.Errorf("%s must be a whole number, not %s", p.Name, text)
	}
	if x < p.Min || x > p.Max {
		return 0, fmt.Errorf("%s must lie in %s to %s, not %s", p.Name, short(p.Min), short(p.Max), text)
	}
	return x, nil
}

// Int returns the named whole-number parameter. It panics on an unknown name:
// a mistake in a catalogue.
func (v Values) Int(name string) int { return int(v.get(name)) }

// Real returns the named real parameter.
func (v Values) Real(name string) float64 { return v.get(name) }

// Choice returns the chosen word of the named parameter.
func (v Values) Choice(name string) string {
	i := v.index(name)
	return v.params[i].Choices[int(v.vals[i])]
}

// Is says whether the method has the named parameter and its word was chosen.
func (v Values) Is(name, word string) bool {
	return slices.ContainsFunc(v.params, func(p Param) bool { return p.Name == name }) && v.Choice(name) == word
}

// Path returns the named file.
func (v Values) Path(name string) string { return v.paths[v.index(name)] }

func (v Values) get(name string) float64 { return v.vals[v.index(name)] }

func (v Values) index(name string) int {
	i := slices.IndexFunc(v.params, func(p Param) bool { return p.Name == name })
	if i < 0 {
		panic("linear: no parameter " + name)
	}
	return i
}

// Args returns the values as written in a pairing, in order: every one but the
// last where those are quiet and at their defaults.
func (v Values) Args() []Arg {
	n := len(v.params)
	for n > 0 && v.params[n-1].Quiet && v.vals[n-1] == v.params[n-1].Default {
		n--
	}
	args := make([]Arg, n)
	for i, p := range v.params[:n] {
		switch p.Kind {
		case Choice:
			args[i] = Arg{Text: p.Choices[int(v.vals[i])]}
		case Path:
			args[i] = Arg{Text: v.paths[i]}
		default:
			args[i] = Arg{Text: short(v.vals[i])}
		}
	}
	return args
}

// short prints a number in the fewest characters that read back to it.
func short(x float64) string {
	if x == 0 {
		return "0"
	}
	f := strconv.FormatFloat(x, 'f', -1, 64)
	e := strconv.FormatFloat(x, 'e', -1, 64)
	mant, exp, _ := strings.Cut(e, "e")
	exp = strings.TrimPrefix(exp, "+")
	neg := strings.HasPrefix(exp, "-")
	exp = strings.TrimLeft(strings.TrimPrefix(exp, "-"), "0")
	if neg {
		exp = "-" + exp
	}
	e = mant + "e" + exp
	if len(e) < len(f) && (x != math.Trunc(x) || math.Abs(x) >= 1e7) {
		return e
	}
	return f
}
