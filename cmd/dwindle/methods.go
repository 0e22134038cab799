package main

import (
	"fmt"
	"io"
	"strings"

	"github.com/spf13/cobra"

	"dwindle/engine"
	"dwindle/engine/report"
)

const methodsHelp = `Lists the solvers, preconditioners and preparations that a pairing is made of,
with their parameters, what they need, what they assume, and their source.

A pairing is written SOLVER+PRECONDITIONER, with preparations before a slash:
cg+ic:0, gmres:30+ilu:0, scale/bicgstab+jacobi. A range makes a family of
trials: cg+ssor:1.0..1.9..0.1.`

func methodsCommand() *cobra.Command {
	var measure bool
	var threads int
	c := &cobra.Command{
		Use:   "methods",
		Short: "list solvers, preconditioners and preparations",
		Long:  methodsHelp,
		Args: func(c *cobra.Command, args []string) error {
			if len(args) > 0 {
				return usage("%s takes no argument", c.CommandPath())
			}
			return nil
		},
		RunE: func(c *cobra.Command, _ []string) error {
			if measure {
				return measureKernels(c.OutOrStdout(), threads)
			}
			return listMethods(c.OutOrStdout(), engine.Methods())
		},
	}
	c.Flags().BoolVar(&measure, "measure", false, "measure this machine's memory bandwidth and each kernel's share of it instead")
	c.Flags().IntVar(&threads, "threads", 0, "use `N` threads (default: what a login node or the job allows)")
	return c
}

// measureKernels prints what the kernels of an iteration move on this machine.
func measureKernels(w io.Writer, threads int) error {
	list, err := engine.MeasureKernels(threads)
	if err != nil {
		return err
	}
	var b strings.Builder
	b.WriteString("kernels on 10^6 unknowns, 5-point (blocks: fewer); bytes counted once each way;\nabove 100%: what a cache still holds\n")
	fmt.Fprintf(&b, "%-32s %9s %11s %9s %9s\n", "kernel", "MB a call", "ms a call", "GB/s", "share")
	for _, k := range list {
		fmt.Fprintf(&b, "%-32s %9.1f %11.3f %9.2f %8.0f%%\n", k.Name, float64(k.Bytes)/1e6, 1e3*k.Time, k.Rate/1e9, 100*k.Share)
	}
	_, err = io.WriteString(w, b.String())
	return err
}

func listMethods(w io.Writer, methods []engine.Method) error {
	var b strings.Builder
	paragraph := func(label, text string) {
		if text == "" {
			return
		}
		for _, l := range report.Paragraph(label, text) {
			b.WriteString(l + "\n")
		}
	}
	kind := ""
	for _, m := range methods {
		if m.Kind != kind {
			kind = m.Kind
			fmt.Fprintf(&b, "%ss\n", kind)
		}
		paragraph(fmt.Sprintf("  %-10s  ", m.Name), m.Title)
		for _, p := range m.Params {
			paragraph("              ", fmt.Sprintf("%s: %s (default %s, %s)", p.Name, p.Meaning, p.Default, p.Range))
		}
		paragraph("              needs ", m.Needs)
		paragraph("              assumes ", m.Assumes)
		paragraph("              products a step: ", m.Products)
		paragraph("              source: ", m.Source)
	}
	if _, err := io.WriteString(w, b.String()); err != nil {
		return unwritten("the list", reason(err))
	}
	return nil
}
