package main

import (
	"context"
	"errors"
	"fmt"
	"io"

	"github.com/spf13/cobra"

	"dwindle/engine"
	"dwindle/engine/report"
)

const runHelp = `Runs pairings of solver and preconditioner on SYSTEM side by side, without a
screen: progress on stderr, the result on stdout and in a file.

SYSTEM is a Matrix Market, Harwell-Boeing or Rutherford-Boeing file, - for
stdin, or sample:NAME[:ARGS]. Of a session that was recorded with --session
the result is written as it stands there; nothing is run.

Exit status: 0 today's pairing, if given, else any converged; 1 it did not;
2 wrong usage; 3 input unreadable; 4 interrupted, what was done is printed and
saved; 5 internal fault, or output that could not be written.`

func runCommand() *cobra.Command {
	f := &flags{}
	c := &cobra.Command{
		Use:   "run SYSTEM",
		Short: "run pairings on a system without a screen",
		Long:  runHelp,
		Args:  one,
		RunE:  func(c *cobra.Command, args []string) error { return f.run(c, args) },
	}
	f.trials(c, 30)
	f.problem(c)
	f.results(c)
	c.Flags().BoolVar(&f.strict, "strict", false, "a blocker makes exit status 0 into 1")
	return c
}

func (f *flags) run(c *cobra.Command, args []string) error {
	if err := f.finish(c, args); err != nil {
		return err
	}
	s := engine.Open(context.Background(), args[0], f.opt)
	stopped := attend(s, waited(s), c.ErrOrStderr())
	snap, d := s.Snapshot(), s.Document()
	if snap.Err != nil && !stopped {
		return snap.Err
	}
	if d.System.Unknowns == 0 {
		return &ending{interrupted, "interrupted before the system was read"}
	}
	write := formOf(f.as).write
	if f.as == "html" && (f.out != "" || terminal(c.OutOrStdout()) != nil) { // a page is for a browser
		write = func(io.Writer, report.Document) error { return nil }
	}
	if err := f.deliver(c, d, write); err != nil {
		return err
	}
	end(s)
	switch {
	case s.Snapshot().RecordErr != nil:
		return &ending{fault, ""} // told when it happened
	case stopped:
		return &ending{interrupted, ""}
	case !d.Reached() || f.strict && d.Blocked():
		return &ending{notMet, ""}
	}
	return nil
}

// deliver prints and saves the result; one failing does not keep the other
// from being tried.
func (f *flags) deliver(c *cobra.Command, d report.Document, write writer) error {
	var printed error
	if err := write(c.OutOrStdout(), d); err != nil {
		printed = unwritten("the result", reason(err))
	}
	return f.saveAndTell(c.ErrOrStderr(), d, printed)
}

// saveAndTell saves the result and says where. Not being able to use the state
// folder, which nobody asked for by name, is only told as long as nothing else
// failed before.
func (f *flags) saveAndTell(stderr io.Writer, d report.Document, before error) error {
	path, err := f.save(d)
	if err == nil {
		fmt.Fprintln(stderr, "saved to", printable(path))
	} else if f.out == "" && before == nil {
		fmt.Fprintln(stderr, "dwindle: not saved:", printable(err.Error()))
		err = nil
	}
	return errors.Join(before, err, f.saveExtras(d))
}
