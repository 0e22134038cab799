// Command dwindle says why a sparse linear solve is slow or failing, and what
// to use instead.
package main

import (
	_ "dwindle/tui/quiet" // before any terminal library is initialised

	"fmt"
	"io"
	"os"
	"os/signal"
	"runtime/debug"
	"syscall"

	"github.com/spf13/cobra"
)

func main() { os.Exit(run(os.Args[1:], os.Stdin, os.Stdout, os.Stderr)) }

// run is the program: arguments in, exit status out. It never panics.
func run(args []string, stdin io.Reader, stdout, stderr io.Writer) (status int) {
	defer func() {
		if p := recover(); p != nil {
			fmt.Fprintf(stderr, "dwindle: internal fault: %v\n%s", p, debug.Stack())
			status = fault
		}
	}()
	signal.Ignore(syscall.SIGPIPE) // a closed pipe is an error of writing, told and saved like others
	out := &watched{Writer: stdout}
	root := rootCommand()
	root.SetArgs(args)
	root.SetIn(stdin)
	root.SetOut(out)
	root.SetErr(stderr)
	err := root.Execute()
	if err == nil && out.err != nil { // help has no other way to say so
		err = unwritten("the output", reason(out.err))
	}
	if err == nil {
		return met
	}
	if text := err.Error(); text != "" {
		fmt.Fprintln(stderr, "dwindle:", printable(text))
	}
	return statusOf(err)
}

// watched keeps the first error of writing.
type watched struct {
	io.Writer
	err error
}

// Write passes on to the writer.
func (w *watched) Write(p []byte) (int, error) {
	n, err := w.Writer.Write(p)
	if w.err == nil {
		w.err = err
	}
	return n, err
}

// rootCommand is "dwindle" with its subcommands.
func rootCommand() *cobra.Command {
	root := interfaceCommand()
	root.SilenceErrors, root.SilenceUsage = true, true
	root.CompletionOptions.DisableDefaultCmd = true
	root.SetHelpFunc(showHelp)
	root.SetHelpCommand(helpCommand(root))
	root.SetFlagErrorFunc(flagError)
	root.SuggestionsMinimumDistance = 2
	root.AddCommand(runCommand(), factsCommand(), checkCommand(), sampleCommand(), methodsCommand())
	return root
}

// one accepts exactly one SYSTEM.
func one(c *cobra.Command, args []string) error {
	if len(args) != 1 {
		return usage("%s takes one SYSTEM: a file, - or sample:NAME; see %s --help", c.CommandPath(), c.CommandPath())
	}
	return nil
}
