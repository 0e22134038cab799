package main

import (
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"dwindle/engine/report"
	"dwindle/samples"
)

const sampleHelp = `Without a name, lists the built-in samples: what each shows, its parameters
and what is known of its spectrum. With NAME[:ARGS], writes that sample as a
Matrix Market file, to stdout or to FILE; a right-hand side of its own goes
beside it.`

func sampleCommand() *cobra.Command {
	var out string
	c := &cobra.Command{
		Use:   "sample [NAME[:ARGS]]",
		Short: "list the built-in samples, or write one to a file",
		Long:  sampleHelp,
		Args: func(c *cobra.Command, args []string) error {
			if len(args) > 1 || len(args) == 0 && out != "" {
				return usage("%s takes one NAME[:ARGS]; see %s --help", c.CommandPath(), c.CommandPath())
			}
			return nil
		},
		RunE: func(c *cobra.Command, args []string) error {
			if len(args) == 0 {
				return listSamples(c.OutOrStdout())
			}
			return writeSample(c, args[0], out)
		},
	}
	c.Flags().StringVarP(&out, "out", "o", "", "write to `FILE`")
	return c
}

func listSamples(w io.Writer) error {
	var b strings.Builder
	paragraph := func(label, text string) {
		for _, l := range report.Paragraph(label, text) {
			b.WriteString(l + "\n")
		}
	}
	for i, s := range samples.Catalogue {
		if i > 0 {
			b.WriteByte('\n')
		}
		_, v, err := samples.Parse(s.Name)
		if err != nil {
			return err
		}
		n, _ := s.Size(v)
		paragraph(samples.Prefix+s.Name+"  ", fmt.Sprintf("%s (%d unknowns)", s.Title, n))
		paragraph("  shows     ", s.Shows)
		paragraph("  source    ", s.Source)
		paragraph("  spectrum  ", s.Spectrum)
		usual := v.Args()
		for k, p := range s.Params {
			paragraph(fmt.Sprintf("  %-9s ", p.Name), fmt.Sprintf("%s (default %s)", p.Meaning, usual[k].Text))
		}
	}
	if _, err := io.WriteString(w, b.String()); err != nil {
		return unwritten("the list", reason(err))
	}
	return nil
}

func writeSample(c *cobra.Command, spec, out string) error {
	s, err := samples.Build(spec)
	if err != nil {
		return usage("%v", err)
	}
	matrix := func(w io.Writer) error { return samples.Write(w, s) }
	if out == "" {
		if err := matrix(c.OutOrStdout()); err != nil {
			return unwritten("the sample", reason(err))
		}
		return nil
	}
	if err := create(out, matrix); err != nil {
		return err
	}
	again := "dwindle run " + quote(out)
	if s.B != nil {
		beside := strings.TrimSuffix(out, ".mtx") + ".rhs.mtx"
		if err := create(beside, func(w io.Writer) error { return samples.WriteRHS(w, s) }); err != nil {
			return err
		}
		again += " --rhs " + quote(beside)
	}
	fmt.Fprintln(c.ErrOrStderr(), "written; run it with:", printable(again))
	return nil
}
