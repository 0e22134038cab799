package main

import (
	"path/filepath"
	"runtime/debug"
	"strings"

	"github.com/spf13/cobra"
	"github.com/spf13/pflag"
)

// release is the version of the source; a build from version control adds its
// revision.
const release = "0.1"

func version() string {
	if info, ok := debug.ReadBuildInfo(); ok {
		for _, s := range info.Settings {
			if s.Key == "vcs.revision" && len(s.Value) >= 12 {
				return release + "-" + s.Value[:12]
			}
		}
	}
	return release
}

// fileFlags name files; their folders are left out of reports.
var fileFlags = map[string]bool{"rhs": true, "guess": true, "labels": true, "fields": true, "null": true, "coordinates": true, "split": true, "x": true, "x0": true}

// results name what a run writes. They are left out of the command that repeats
// it, which must not write over them.
var results = map[string]bool{"out": true, "history": true, "solution": true, "session": true, "vectors": true}

// commandLine is the command that repeats this run, quoted for a shell. File
// names lose their folder unless identify is set.
func commandLine(c *cobra.Command, args []string, identify bool) string {
	words := []string{c.CommandPath()}
	for _, a := range args {
		words = append(words, quote(nameOnly(a, identify)))
	}
	c.Flags().Visit(func(f *pflag.Flag) {
		if results[f.Name] {
			return
		}
		for _, v := range valuesOf(f) {
			if fileFlags[f.Name] {
				v = nameOnly(v, identify)
			}
			switch {
			case f.Value.Type() == "bool" && v == "true":
				words = append(words, "--"+f.Name)
			case f.Value.Type() == "bool":
				words = append(words, "--"+f.Name+"="+v)
			default:
				words = append(words, "--"+f.Name, quote(v))
			}
		}
	})
	return strings.Join(words, " ")
}

func valuesOf(f *pflag.Flag) []string {
	if list, ok := f.Value.(pflag.SliceValue); ok {
		return list.GetSlice()
	}
	return []string{f.Value.String()}
}

func nameOnly(path string, identify bool) string {
	if identify || path == "" || strings.HasPrefix(path, "sample:") {
		return path
	}
	return filepath.Base(path)
}

// quote protects a word from the shell where it needs it.
func quote(s string) string {
	plain := s != "" && strings.IndexFunc(s, func(r rune) bool {
		return !(r >= 'a' && r <= 'z' || r >= 'A' && r <= 'Z' || r >= '0' && r <= '9' || strings.ContainsRune("-_./:,+=@%", r))
	}) < 0
	if plain && s[0] != '=' { // zsh expands a leading =
		return s
	}
	return "'" + strings.ReplaceAll(s, "'", `'\''`) + "'"
}
