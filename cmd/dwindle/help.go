package main

import (
	"fmt"
	"strings"

	"github.com/spf13/cobra"

	"dwindle/engine/report"
)

// showHelp prints what a command does, its form, its subcommands and options.
func showHelp(c *cobra.Command, _ []string) {
	var b strings.Builder
	fmt.Fprintf(&b, "%s\n\nusage: %s\n", c.Long, strings.ReplaceAll(c.UseLine(), "[flags]", "[options]"))
	for i, sub := range c.Commands() {
		if i == 0 {
			b.WriteString("\ncommands:\n")
		}
		if !sub.Hidden {
			fmt.Fprintf(&b, "  %-8s %s\n", sub.Name(), sub.Short)
		}
	}
	if flags := c.LocalFlags().FlagUsagesWrapped(report.Width); flags != "" {
		b.WriteString("\noptions:\n" + flags)
	}
	c.Print(b.String())
}

// helpCommand is "dwindle help [COMMAND]".
func helpCommand(root *cobra.Command) *cobra.Command {
	return &cobra.Command{
		Use:    "help [COMMAND]",
		Hidden: true,
		RunE: func(_ *cobra.Command, args []string) error {
			c, rest, err := root.Find(args)
			if err != nil || len(rest) > 0 {
				return usage("there is no command %q; see dwindle --help", strings.Join(args, " "))
			}
			showHelp(c, nil)
			return nil
		},
	}
}
