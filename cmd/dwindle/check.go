package main

import (
	"context"
	"io"
	"os"
	"os/signal"
	"syscall"

	"github.com/spf13/cobra"

	"dwindle/engine"
	"dwindle/engine/report"
)

const checkHelp = `Judges a solution from elsewhere, without any trial: every common measure of
b-Ax (evaluated in twice the working precision), backward errors, the error of
x where A can be factorised, the rows that are worst, and which stopping rules
hold at the tolerance. With --said it tells which of the measures your code's
number is, or that it is none.

Exit status: 0 the rule of --stop holds at --tol; 1 it does not; 2 to 5 as for
dwindle run.`

func checkCommand() *cobra.Command {
	f, given := &flags{}, &engine.Checked{}
	c := &cobra.Command{
		Use:   "check SYSTEM --x FILE",
		Short: "judge a solution from elsewhere",
		Long:  checkHelp,
		Args:  one,
		RunE:  func(c *cobra.Command, args []string) error { return f.check(c, args, *given) },
	}
	s := c.Flags()
	s.SortFlags = false
	s.StringVar(&given.X, "x", "", "the solution: `FILE[:COL]`, a Matrix Market array or plain columns")
	s.StringVar(&f.opt.Guess, "x0", "", "what it was started from, `FILE[:COL]` (default: zero)")
	s.StringVar(&given.Said, "said", "", "the residual `S` that your code printed, such as 9e-11; below 0 its logarithm")
	s.Float64Var(&f.opt.Tol, "tol", 1e-8, "tolerance `T`")
	s.StringVar(&f.opt.StopRule, "stop", "rhs", "what the tolerance is relative to: `RULE` rhs, initial, backward or absolute")
	s.StringArrayVar(&f.opt.FieldTols, "tol-field", nil, "the residual of the field must come below the tolerance as well: `NAME=T`; may be repeated")
	f.problem(c)
	s.StringVar(&f.as, "as", "text", "`FORM` of the result: text or json")
	s.StringVar(&f.out, "out", "", "save the result to `FILE` as well")
	return c
}

func (f *flags) check(c *cobra.Command, args []string, given engine.Checked) error {
	switch {
	case f.as != "text" && f.as != "json":
		return usage("--as must be text or json here, not %q", f.as)
	case given.X == "":
		return usage("check needs --x FILE, the solution to judge; see %s --help", c.CommandPath())
	}
	if err := f.finish(c, args); err != nil {
		return err
	}
	ctx, stop := signal.NotifyContext(context.Background(), os.Interrupt, syscall.SIGTERM)
	defer stop()
	d, err := engine.Check(ctx, args[0], f.opt, given)
	switch {
	case ctx.Err() != nil:
		return &ending{interrupted, "interrupted before the solution was judged"}
	case err != nil:
		return err
	}
	if err := f.deliverCheck(c, d); err != nil {
		return err
	}
	if !d.Answer.Solved {
		return &ending{notMet, ""}
	}
	return nil
}

func (f *flags) deliverCheck(c *cobra.Command, d report.CheckDocument) error {
	write := report.CheckText
	if f.as == "json" {
		write = report.CheckJSON
	}
	if err := write(c.OutOrStdout(), d); err != nil {
		return unwritten("the result", reason(err))
	}
	if f.out == "" {
		return nil
	}
	return create(f.out, func(w io.Writer) error { return write(w, d) })
}
