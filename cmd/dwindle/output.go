package main

import (
	"errors"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"time"

	"dwindle/engine/report"
)

// writer turns a document into bytes.
type writer func(io.Writer, report.Document) error

// form is one value of --as.
type form struct {
	name, extension string
	write           writer
}

// formats are the forms of a run's result.
var formats = []form{
	{"text", "txt", report.Text},
	{"json", "json", report.JSON},
	{"csv", "csv", report.CSV},
	{"md", "md", report.Markdown},
	{"html", "html", report.HTML},
	{"ticket", "txt", report.Ticket},
}

func forms() []string {
	var names []string
	for _, f := range formats {
		names = append(names, f.name)
	}
	return names
}

func formOf(name string) form {
	for _, f := range formats {
		if f.name == name {
			return f
		}
	}
	return formats[0]
}

// save writes the result to --out, else to a new file in the state folder,
// and returns its path.
func (f *flags) save(d report.Document) (path string, err error) {
	form := formOf(f.as)
	if path = f.out; path == "" {
		if path, err = stateFile(form.extension); err != nil {
			return "", err
		}
	}
	return path, toFile(path, form.write, d)
}

// saveExtras writes the history, the solution and the vectors where they were
// asked for.
func (f *flags) saveExtras(d report.Document) error {
	var history, solution, vectors error
	if f.history != "" {
		history = toFile(f.history, report.CSV, d)
	}
	switch {
	case f.solution != "" && d.Solution == nil:
		solution = unwritten(f.solution, d.NoSolution())
	case f.solution != "":
		solution = toFile(f.solution, report.Solution, d)
	}
	if f.vectors != "" {
		vectors = saveVectors(f.vectors, d)
	}
	return errors.Join(history, solution, vectors)
}

// saveVectors writes each vector into a file of its own in a folder, which is
// made where it is missing.
func saveVectors(dir string, d report.Document) error {
	if len(d.Vectors) == 0 {
		return unwritten(dir, d.NoVectors())
	}
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return unwritten(dir, reason(err))
	}
	for _, v := range d.Vectors {
		write := func(w io.Writer) error { return report.WriteVector(w, d, v) }
		if err := create(filepath.Join(dir, v.Name+".mtx"), write); err != nil {
			return err
		}
	}
	return nil
}

// toFile writes a document to a file.
func toFile(path string, write writer, d report.Document) error {
	return create(path, func(w io.Writer) error { return write(w, d) })
}

// create writes a new file and reports every failure, that of closing too.
func create(path string, write func(io.Writer) error) error {
	w, err := os.Create(path)
	if err != nil {
		return unwritten(path, reason(err))
	}
	err = write(w)
	if e := w.Close(); err == nil {
		err = e
	}
	if err != nil {
		return unwritten(path, reason(err))
	}
	return nil
}

// reason is the cause alone, without the path that the message names already.
func reason(err error) error {
	var p *os.PathError
	if errors.As(err, &p) {
		return p.Err
	}
	return err
}

// stateFile names a new file in $XDG_STATE_HOME/dwindle, else in
// ~/.local/state/dwindle, and makes the folder.
func stateFile(extension string) (string, error) {
	base := os.Getenv("XDG_STATE_HOME")
	if !filepath.IsAbs(base) { // as the XDG specification asks
		home, err := os.UserHomeDir()
		if err != nil {
			return "", unwritten("the result to the state folder", err)
		}
		base = filepath.Join(home, ".local", "state")
	}
	dir := filepath.Join(base, "dwindle")
	if err := os.MkdirAll(dir, 0o700); err != nil {
		return "", unwritten(dir, reason(err))
	}
	stamp := time.Now().Format("20060102-150405.000")
	return filepath.Join(dir, fmt.Sprintf("%s-%d.%s", stamp, os.Getpid(), extension)), nil
}
