package main

import (
	"errors"
	"os"
	"path/filepath"

	"golang.org/x/sys/unix"
)

// writable says before a run what would keep its results from being written
// after it, without making any file.
func (f *flags) writable() error {
	if f.opt.Recording != "" {
		if _, err := os.Lstat(f.opt.Recording); err == nil {
			return usage("--session %s: exists already and is not written over; name another file, or remove it first", f.opt.Recording)
		}
	}
	for _, path := range []string{f.out, f.history, f.solution, f.opt.Recording} {
		if path == "" {
			continue
		}
		if err := creatable(path); err != nil {
			return unwritten(path, reason(err))
		}
	}
	if info, err := os.Stat(f.vectors); f.vectors != "" && err == nil && !info.IsDir() {
		return unwritten(f.vectors, errors.New("is not a folder"))
	}
	return nil
}

// creatable says why a file cannot be written, or made in its folder.
func creatable(path string) error {
	switch info, err := os.Stat(path); {
	case err == nil && info.IsDir():
		return errors.New("is a folder, not a file")
	case err == nil:
		return unix.Access(path, unix.W_OK)
	}
	dir := filepath.Dir(path)
	info, err := os.Stat(dir)
	switch {
	case err != nil:
		return err
	case !info.IsDir():
		return unix.ENOTDIR
	}
	return unix.Access(dir, unix.W_OK|unix.X_OK)
}
