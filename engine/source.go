package engine

import (
	"context"
	"io"
	"math"
	"path/filepath"
	"strconv"
	"strings"

	"dwindle/engine/linear"
	"dwindle/engine/load"
	"dwindle/engine/run"
	"dwindle/samples"
)

// madeStart is where the generator of a made right-hand side starts; JSON
// calls it the seed.
const madeStart = 1

// read loads the system that source names, without its right-hand side.
func read(ctx context.Context, source string, stdin io.Reader, memory int64, progress func(float64)) (linear.System, error) {
	switch {
	case strings.HasPrefix(source, samples.Prefix):
		return generate(source, memory)
	case source == "-":
		return load.Read(ctx, "stdin", stdin, -1, progress)
	}
	return load.File(ctx, source, progress)
}

// generate makes a sample, unless it would not fit into memory.
func generate(spec string, memory int64) (linear.System, error) {
	sample, v, err := samples.Parse(spec)
	if err != nil {
		return linear.System{}, &UsageError{err.Error()}
	}
	n, entries := sample.Size(v)
	if need := 12*int64(entries) + 24*int64(n); memory > 0 && need > memory {
		return linear.System{}, badOption("%s needs %s, more than the limit %s", spec, run.Bytes(need), run.Bytes(memory))
	}
	s, err := samples.Build(spec)
	if err != nil {
		err = &UsageError{err.Error()}
	}
	return s, err
}

// complete gives the system its right-hand side, names and guess, as the
// options ask.
func complete(s *linear.System, opt Options) error {
	n := s.N()
	if err := setRHS(s, opt.RHS, n); err != nil {
		return err
	}
	if linear.NormInf(s.B) != linear.NormInf(s.B) || math.IsInf(linear.NormInf(s.B), 0) {
		return badOption("the right-hand side holds a number that is not finite")
	}
	if err := setNames(s, opt); err != nil {
		return err
	}
	if _, err := fieldTols(*s, opt); err != nil {
		return err
	}
	if err := setSplit(s, opt.Split, n); err != nil {
		return err
	}
	if opt.Guess == "" {
		return nil
	}
	x, notes, err := load.VectorFile(opt.Guess, n)
	if err != nil {
		return err
	}
	s.Guess = x
	s.Source.Notes = append(s.Source.Notes, notes...)
	return nil
}

// setSplit reads which unknowns belong to the second block of a saddle system.
func setSplit(s *linear.System, path string, n int) error {
	if path == "" {
		return nil
	}
	v, _, err := load.VectorFile(path, n)
	if err != nil {
		return err
	}
	s.Second = make([]bool, n)
	second := 0
	for i, x := range v {
		if s.Second[i] = x != 0; s.Second[i] {
			second++
		}
	}
	if second == 0 || second == n {
		return badOption("--split %s puts all %d unknowns into one block", path, n)
	}
	return nil
}

func setRHS(s *linear.System, rhs string, n int) error {
	row, isUnit := strings.CutPrefix(rhs, "unit:")
	switch {
	case rhs == "" && s.Source.RHS != nil:
		s.B, s.RHS = s.Source.RHS, linear.Embedded
	case rhs == "":
		setOnes(s, n)
		if onesUnreachable(s) {
			setMade(s, n)
		}
	case rhs == string(linear.Ones):
		setOnes(s, n)
	case rhs == string(linear.Made):
		setMade(s, n)
	case isUnit:
		i, err := strconv.Atoi(row)
		if err != nil || i < 1 || i > n {
			return badOption("--rhs unit:ROW needs a row from 1 to %d, not %q", n, row)
		}
		s.B, s.RHS = make([]float64, n), linear.Unit
		s.B[i-1] = 1
	default:
		b, notes, err := load.VectorFile(rhs, n)
		if err != nil {
			return err
		}
		s.B, s.RHS = b, linear.FromFile
		s.Source.Notes = append(s.Source.Notes, notes...)
	}
	return nil
}

func setOnes(s *linear.System, n int) {
	s.B, s.RHS = make([]float64, n), linear.Ones
	for i := range s.B {
		s.B[i] = 1
	}
}

// setMade makes b = A x for x uniform in [−1, 1], so that the true error is
// known.
func setMade(s *linear.System, n int) {
	s.Exact, s.B, s.RHS = make([]float64, n), make([]float64, n), linear.Made
	linear.Uniform(s.Exact, madeStart)
	s.A.Apply(s.B, s.Exact)
}

// onesUnreachable says whether b = ones has a part outside A's range that the
// visible null vectors show.
func onesUnreachable(s *linear.System) bool {
	return unreachable(*s) != nil
}

// shown is the name of a source on screens and in reports: never a path,
// unless asked for.
func shown(source string, s linear.System, identify bool) string {
	if identify && !strings.HasPrefix(source, samples.Prefix) && source != "-" {
		if abs, err := filepath.Abs(source); err == nil {
			return abs
		}
	}
	return s.Name
}

// open reads a matrix that a pairing names.
func (s *Session) open(path string) (*linear.CSR, error) {
	sys, err := load.File(s.ctx, path, nil)
	if err != nil {
		return nil, err
	}
	return sys.Matrix(), nil
}
