package main

import (
	"bytes"
	"context"
	"errors"
	"io"
	"os"

	"github.com/spf13/cobra"

	"dwindle/engine"
	"dwindle/engine/report"
	"dwindle/samples"
	"dwindle/tui"
)

const interfaceHelp = `dwindle says why a sparse linear solve is slow or failing, and what to use
instead. It runs pairings of solver and preconditioner side by side on your
system, draws their residuals as they fall, and tells with proof or
measurement what holds them back.

Without SYSTEM it opens on the built-in samples. SYSTEM is a Matrix Market,
Harwell-Boeing or Rutherford-Boeing file, - for stdin, or sample:NAME[:ARGS].
A session recorded with --session opens again with all its screens.

Exit status: 0 left by its user; 2 wrong usage; 3 input unreadable;
4 interrupted, what was done is saved; 5 internal fault, or output that could
not be written.`

func interfaceCommand() *cobra.Command {
	f := &flags{}
	c := &cobra.Command{
		Use:   "dwindle [SYSTEM]",
		Short: "why is this linear solve slow or failing, and what to use instead",
		Long:  interfaceHelp,
		Args: func(c *cobra.Command, args []string) error {
			if len(args) > 1 {
				if err, is := noCommand(c, args); is {
					return err
				}
				return usage("one SYSTEM at a time; see dwindle --help")
			}
			return nil
		},
		RunE: func(c *cobra.Command, args []string) error { return f.show(c, args) },
	}
	f.trials(c, 0)
	f.problem(c)
	f.results(c)
	c.Flags().StringVar(&f.glyphs, "glyphs", "", "draw with `SET` dot, line or ascii (default: by the locale)")
	c.Flags().Float64Var(&f.rate, "rate", 0, "renew the screen `HZ` times a second (default: 4, or 2 over ssh)")
	return c
}

// show opens the interface and says afterwards where the result is.
func (f *flags) show(c *cobra.Command, args []string) error {
	if err := f.finish(c, args); err != nil {
		return err
	}
	screen := terminal(c.OutOrStdout())
	if screen == nil {
		return usage("standard output is not a terminal; use dwindle run, which needs none")
	}
	f.opt.Interactive = true
	var shown *engine.Session
	open := func(source string, opt engine.Options) *engine.Session {
		shown = engine.Open(context.Background(), source, opt)
		return shown
	}
	cfg := tui.Config{Samples: sampleList(), Glyphs: f.glyphs, Rate: f.rate, Out: screen}
	cfg.Open = func(source string) *engine.Session {
		opt := f.opt
		opt.Command = "dwindle " + quote(nameOnly(source, opt.Identify))
		return open(source, opt)
	}
	cfg.Write = func(s *engine.Session) (string, error) { return f.save(s.Document()) }
	cfg.Record = func(s *engine.Session) (string, error) {
		path, err := stateFile("dwindle")
		if err == nil {
			err = s.Record(path)
		}
		return path, err
	}
	var saved error
	cfg.SaveOnExit = func(s *engine.Session) func() {
		end(s)
		d := s.Document()
		if len(d.Trials) == 0 || s.Snapshot().Unchanged() {
			return func() {}
		}
		var where bytes.Buffer
		saved = f.saveAndTell(&where, d, nil)
		return func() {
			report.Ticket(c.OutOrStdout(), d) // a terminal that is gone hears nothing; the file has it all
			c.ErrOrStderr().Write(where.Bytes())
		}
	}
	if len(args) == 1 {
		cfg.Session = open(args[0], f.opt)
	}
	err := tui.Run(cfg)
	return errors.Join(left(err, shown), saved)
}

// terminal is the terminal behind w, nil if it is none.
func terminal(w io.Writer) *os.File {
	if out, ok := w.(*watched); ok {
		w = out.Writer
	}
	if f, ok := w.(*os.File); ok && isTerminal(f) {
		return f
	}
	return nil
}

// left is what the end of the interface means: interrupted, a fault, a system
// that could not be opened, or nil.
func left(err error, s *engine.Session) error {
	switch {
	case errors.Is(err, tui.ErrInterrupted):
		return &ending{interrupted, "interrupted"}
	case errors.Is(err, tui.ErrNoTerminal):
		return usage("%v", err)
	case err != nil:
		return &ending{fault, err.Error()}
	case s == nil:
		return nil
	}
	err = s.Snapshot().Err
	if errors.Is(err, context.Canceled) { // left while the system was read
		return nil
	}
	return err
}

func sampleList() []tui.SampleInfo {
	var list []tui.SampleInfo
	for _, s := range samples.Catalogue {
		list = append(list, tui.SampleInfo{Name: s.Name, Title: s.Title, Shows: s.Shows})
	}
	return list
}
