package main

import (
	"errors"
	"fmt"
	"os"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

// flagError says in plain words what is wrong with an option.
func flagError(c *cobra.Command, err error) error {
	text := err.Error()
	var invalid *pflag.InvalidValueError
	var missing *pflag.ValueRequiredError
	switch {
	case errors.As(err, &invalid):
		text = fmt.Sprintf("--%s takes %s, not %q", invalid.GetFlag().Name, wantedBy(invalid.GetFlag()), invalid.GetValue())
	case errors.As(err, &missing):
		text = fmt.Sprintf("--%s takes %s", missing.GetFlag().Name, wantedBy(missing.GetFlag()))
	}
	return usage("%s; see %s --help", text, c.CommandPath())
}

// wantedBy names the kind of value that a flag takes.
func wantedBy(f *pflag.Flag) string {
	switch f.Value.Type() {
	case "float64":
		return "a number"
	case "int", "int64":
		return "a whole number"
	case "bool":
		return "true or false"
	}
	name, _ := pflag.UnquoteUsage(f)
	return "a value, " + name
}

// noCommand says that the first of several words is no command; false where it
// could be meant as a system.
func noCommand(root *cobra.Command, args []string) (error, bool) {
	if strings.ContainsAny(args[0], "/.:") {
		return nil, false
	}
	if _, err := os.Stat(args[0]); err == nil {
		return nil, false
	}
	text := fmt.Sprintf("there is no command %q", args[0])
	if near := root.SuggestionsFor(args[0]); len(near) > 0 {
		return usage("%s; did you mean %s? See dwindle --help", text, strings.Join(near, " or ")), true
	}
	return usage("%s; see dwindle --help", text), true
}
