package main

import (
	"context"
	"io"
	"time"

	"github.com/spf13/cobra"

	"dwindle/engine"
	"dwindle/engine/report"
)

const factsHelp = `Says what can be known of SYSTEM before any trial: each fact with its answer,
how surely (proved, measured or estimated) and why, and the findings that
concern no single pairing.

Exit status: 0 no blocker; 1 a blocker; 2 to 5 as for dwindle run.`

func factsCommand() *cobra.Command {
	f := &flags{}
	c := &cobra.Command{
		Use:   "facts SYSTEM",
		Short: "say what can be known of a system without any trial",
		Long:  factsHelp,
		Args:  one,
		RunE:  func(c *cobra.Command, args []string) error { return f.facts(c, args) },
	}
	f.problem(c)
	c.Flags().StringVar(&f.as, "as", "text", "`FORM` of the result: text or json")
	c.Flags().StringVar(&f.out, "out", "", "save the result to `FILE` as well")
	return c
}

func (f *flags) facts(c *cobra.Command, args []string) error {
	if f.as != "text" && f.as != "json" {
		return usage("--as must be text or json here, not %q", f.as)
	}
	f.opt.FactsOnly = true
	if err := f.finish(c, args); err != nil {
		return err
	}
	s := engine.Open(context.Background(), args[0], f.opt)
	stopped := attend(s, inspected(s), io.Discard)
	if !stopped {
		end(s)
	}
	snap, d := s.Snapshot(), s.Document().SystemOnly()
	if snap.Err != nil && !stopped {
		return snap.Err
	}
	if d.System.Unknowns == 0 {
		return &ending{interrupted, "interrupted before the system was read"}
	}
	if err := f.deliverFacts(c, d); err != nil {
		return err
	}
	switch {
	case stopped:
		return &ending{interrupted, ""}
	case d.Blocked():
		return &ending{notMet, ""}
	}
	return nil
}

func (f *flags) deliverFacts(c *cobra.Command, d report.Document) error {
	write := report.Facts
	if f.as == "json" {
		write = report.JSON
	}
	if err := write(c.OutOrStdout(), d); err != nil {
		return unwritten("the result", reason(err))
	}
	if f.out == "" {
		return nil
	}
	return toFile(f.out, write, d)
}

// inspected closes its channel when the facts are known or the session broke.
func inspected(s *engine.Session) <-chan struct{} {
	done := make(chan struct{})
	go func() {
		defer close(done)
		for {
			switch s.Snapshot().Phase {
			case engine.Loading, engine.Inspecting:
				time.Sleep(2 * time.Millisecond)
			default:
				return
			}
		}
	}()
	return done
}
