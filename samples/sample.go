package samples

import (
	"fmt"
	"strings"

	"dwindle/engine/linear"
)

// Prefix stands before a sample's name where a file name could stand too.
const Prefix = "sample:"

// Sample is one generator.
type Sample struct {
	Name     string // as written in a spec
	Title    string // the part of the weir it stands for
	Shows    string // what it demonstrates, one sentence
	Source   string // where its form comes from
	Spectrum string // what is known of its eigenvalues
	Params   []linear.Param
	// Size returns the order and an upper bound of the stored entries, before
	// anything is allocated.
	Size func(v linear.Values) (n, entries int)
	// Make generates the system. B is nil where the sample has no right-hand
	// side of its own; where it has, RHS is linear.Embedded.
	Make func(v linear.Values) (linear.System, error)
	// Expect names the rules that must find something when the sample is run
	// with its default parameters; no other may.
	Expect []string
}

// Parse reads NAME[:ARGS], with or without Prefix. The error of an unknown
// name lists the names there are.
func Parse(spec string) (Sample, linear.Values, error) {
	part, err := linear.ParsePart(strings.TrimPrefix(spec, Prefix))
	if err != nil {
		return Sample{}, linear.Values{}, fmt.Errorf("sample %q: %w", spec, err)
	}
	for _, s := range Catalogue {
		if s.Name == part.Name {
			v, err := linear.Resolve("sample "+s.Name, s.Params, part.Args)
			return s, v, err
		}
	}
	return Sample{}, linear.Values{}, fmt.Errorf("there is no sample %q; there are %s", part.Name, strings.Join(names(), ", "))
}

// Build generates the system that spec describes, named canonically.
func Build(spec string) (linear.System, error) {
	s, v, err := Parse(spec)
	if err != nil {
		return linear.System{}, err
	}
	sys, err := s.Make(v)
	if err != nil {
		return linear.System{}, fmt.Errorf("sample %s: %w", s.Name, err)
	}
	sys.Name = s.Spec(v)
	sys.Digits = 17
	sys.Source.Format = "generated"
	if m := sys.Matrix(); m != nil {
		sys.Source.Stored = m.Entries()
	}
	if sys.B != nil {
		sys.RHS = linear.Embedded
		sys.Source.RHS = sys.B
	}
	return sys, nil
}

// Spec returns the canonical name of the sample with values v, Prefix
// included: arguments equal to their default are left out, all but a leading
// one are named. Parse reads it back.
func (s Sample) Spec(v linear.Values) string {
	standard, err := linear.Resolve(s.Name, s.Params, nil)
	if err != nil {
		panic("samples: " + err.Error()) // a mistake in the catalogue
	}
	part := linear.Part{Name: s.Name}
	usual := standard.Args()
	for i, a := range v.Args() {
		if a == usual[i] {
			continue
		}
		if i > 0 {
			a.Name = s.Params[i].Name
		}
		part.Args = append(part.Args, a)
	}
	return Prefix + part.String()
}

func names() []string {
	out := make([]string, len(Catalogue))
	for i, s := range Catalogue {
		out[i] = s.Name
	}
	return out
}
