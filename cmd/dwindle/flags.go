package main

import (
	"fmt"
	"math"
	"slices"
	"strconv"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"

	"dwindle/engine"
)

// flags are the options of a session as written on the command line.
type flags struct {
	opt               engine.Options
	memory            string
	as, out           string
	history, solution string
	vectors           string
	strict            bool
	glyphs            string
	rate              float64
}

// problem adds the options that decide what is solved and where.
func (f *flags) problem(c *cobra.Command) {
	s := c.Flags()
	s.SortFlags = false
	s.StringVar(&f.opt.RHS, "rhs", "", "right-hand side: `FILE[:COL]`, ones, made or unit:ROW (default: the file's own, else ones)")
	s.StringVar(&f.opt.Labels, "labels", "", "name the rows in every message: a label a line of `FILE`")
	s.StringVar(&f.opt.Fields, "fields", "", "tell residuals and facts by field of unknowns: a field name a line of `FILE`")
	s.IntVar(&f.opt.Dofs, "dofs", 0, "`K` unknowns of a node stand next to each other: fields u1 to uK, and multilevel methods")
	s.IntVar(&f.opt.Threads, "threads", 0, "use `N` threads (default: what a login node or the job allows)")
	s.StringVar(&f.memory, "memory", "", "let all trials together use `SIZE`, such as 2GiB (default: half of what is free)")
	s.BoolVar(&f.opt.Identify, "identify", false, "name files with their path in reports")
}

// trials adds the options that decide what is run.
func (f *flags) trials(c *cobra.Command, seconds float64) {
	s := c.Flags()
	s.SortFlags = false
	s.StringArrayVar(&f.opt.Pairs, "pair", nil, "run the pairing `P`, such as cg+ic:0; may be repeated (default: made from the facts)")
	s.StringVar(&f.opt.Today, "today", "", "the pairing `P` your code runs now: every gain is told against it")
	s.StringVar(&f.opt.Goal, "goal", "", "what the choice goes by: `GOAL` seconds, memory or robust (default: seconds)")
	s.StringVar(&f.opt.Columns, "columns", "", "measure the choice on further right-hand sides with one set-up: columns `LIST` of the --rhs file, such as 1-8")
	s.StringVar(&f.opt.Guess, "guess", "", "start from the vector in `FILE[:COL]`")
	s.StringVar(&f.opt.Null, "null", "", "near-null vectors for multilevel methods, the columns of `FILE`")
	s.StringVar(&f.opt.Coordinates, "coordinates", "", "coordinates of the nodes, one a row of `FILE`: rigid motions for multilevel methods")
	s.StringVar(&f.opt.Split, "split", "", "second block of a saddle system: not 0 in its rows of `FILE`, one number a row")
	s.Float64Var(&f.opt.Tol, "tol", 1e-8, "tolerance `T`")
	s.StringArrayVar(&f.opt.FieldTols, "tol-field", nil, "the residual of the field must come below the tolerance as well: `NAME=T`; may be repeated")
	s.StringVar(&f.opt.StopRule, "stop", "rhs", "what the tolerance is relative to: `RULE` rhs, initial, backward or absolute")
	s.IntVar(&f.opt.Iterations, "iterations", 0, "at most `N` iterations a trial (default: 10 n, at most 100000)")
	s.Float64Var(&f.opt.Seconds, "seconds", seconds, "end the run after `S` seconds of wall time; 0 is never")
	s.Float64Var(&f.opt.TrialSeconds, "trial-seconds", 0, "end a trial after `S` seconds of its own time (default: never)")
}

// results adds the options that decide what is written where.
func (f *flags) results(c *cobra.Command) {
	s := c.Flags()
	s.StringVar(&f.as, "as", "text", "`FORM` of the result: text, json, csv, md, html or ticket")
	s.StringVar(&f.out, "out", "", "save the result to `FILE` (default: a new file in the state folder)")
	s.StringVar(&f.history, "history", "", "write the history of all trials to `FILE.csv`")
	s.StringVar(&f.solution, "solution", "", "write the solution to `FILE` as a Matrix Market array")
	s.StringVar(&f.opt.Recording, "session", "", "record the session to `FILE` as it goes; dwindle FILE opens it again (name it *.dwindle)")
	s.StringVar(&f.vectors, "vectors", "", "write the vectors behind the findings into folder `DIR`, as Matrix Market arrays")
}

// finish checks the options and completes them with what the engine needs.
func (f *flags) finish(c *cobra.Command, args []string) error {
	if f.as != "" && !slices.Contains(forms(), f.as) {
		return usage("--as must be one of %s, not %q", strings.Join(forms(), ", "), f.as)
	}
	if f.memory != "" {
		n, err := parseSize(f.memory)
		if err != nil {
			return usage("--memory: %v", err)
		}
		f.opt.Memory = n
	}
	if c.Flags().Changed("tol") && f.opt.Tol == 0 {
		return usage("--tol must be above 0")
	}
	if f.rate < 0 || math.IsNaN(f.rate) {
		return usage("--rate must be above 0")
	}
	if !slices.Contains([]string{"", "dot", "line", "ascii"}, f.glyphs) {
		return usage("--glyphs must be dot, line or ascii, not %q", f.glyphs)
	}
	f.opt.Vectors = f.vectors != ""
	f.opt.Version = version()
	f.opt.Command = commandLine(c, args, f.opt.Identify)
	f.opt.Stdin = c.InOrStdin()
	if len(args) == 1 && engine.IsSessionFile(args[0]) {
		if err := unmoved(c, args[0]); err != nil {
			return err
		}
	}
	if err := f.opt.Check(); err != nil {
		return err
	}
	return f.writable()
}

// unmoved refuses options that would change what a recorded session is.
func unmoved(c *cobra.Command, file string) (err error) {
	allowed := []string{"threads", "memory", "identify", "as", "out", "history", "solution", "vectors", "session",
		"strict", "glyphs", "rate"}
	c.Flags().Visit(func(f *pflag.Flag) {
		if err == nil && !slices.Contains(allowed, f.Name) {
			err = usage("--%s does not apply: %s is a recorded session", f.Name, file)
		}
	})
	return err
}

// units are the suffixes of a size, in bytes.
var units = []struct {
	suffix string
	bytes  float64
}{
	{"kib", 1 << 10}, {"mib", 1 << 20}, {"gib", 1 << 30}, {"tib", 1 << 40},
	{"kb", 1e3}, {"mb", 1e6}, {"gb", 1e9}, {"tb", 1e12},
	{"k", 1 << 10}, {"m", 1 << 20}, {"g", 1 << 30}, {"t", 1 << 40}, {"b", 1},
}

// parseSize reads an amount of memory: 2GiB, 500M, 1.5g or bytes.
func parseSize(text string) (int64, error) {
	number, scale := strings.ToLower(strings.TrimSpace(text)), 1.0
	for _, u := range units {
		if s, ok := strings.CutSuffix(number, u.suffix); ok {
			number, scale = s, u.bytes
			break
		}
	}
	x, err := strconv.ParseFloat(strings.TrimSpace(number), 64)
	if err != nil || !(x*scale >= 1 && x*scale < 1<<62) {
		return 0, fmt.Errorf("%q is not a size such as 2GiB", text)
	}
	return int64(x * scale), nil
}
