package load

import (
	"bufio"
	"bytes"
	"compress/gzip"
	"context"
	"io"
	"os"

	"dwindle/engine/linear"
)

// File reads the system in the file at path; see Read. A plain coordinate file
// is read on all threads.
func File(ctx context.Context, path string, progress func(float64)) (linear.System, error) {
	f, size, err := open(path)
	if err != nil {
		return linear.System{}, err
	}
	defer f.Close()
	l, err := newLines(ctx, path, f, size, progress)
	if err != nil {
		return linear.System{}, err
	}
	if l.size >= 2*chunkSize {
		l.whole = &whole{r: f, size: size, chunk: chunkSize}
	}
	return l.system(progress)
}

// Read reads a system from r: a Matrix Market, Harwell–Boeing or
// Rutherford–Boeing file, plain or compressed with gzip, told apart by its
// first bytes. name stands in messages, and its base names the system; size
// is the number of bytes in r, -1 if unknown. progress, which may be nil, is
// told the share of size that was read, from 0 to 1.
//
// The system holds the matrix, its digits and what was noticed; a right-hand
// side stored with the matrix is in its Source. Everything wrong with the
// file is an *Error; when ctx ends the error is ctx.Err().
func Read(ctx context.Context, name string, r io.Reader, size int64, progress func(float64)) (linear.System, error) {
	l, err := newLines(ctx, name, r, size, progress)
	if err != nil {
		return linear.System{}, err
	}
	return l.system(progress)
}

// system reads the system that l begins with.
func (l *lines) system(progress func(float64)) (linear.System, error) {
	read, err := l.format()
	if err != nil {
		return linear.System{}, err
	}
	s, err := read(l)
	if err != nil {
		return linear.System{}, err
	}
	s.Name = shortName(l.name)
	if progress != nil {
		progress(1)
	}
	return s, nil
}

// open opens a file; size is -1 for anything but a regular file.
func open(path string) (f *os.File, size int64, err error) {
	if f, err = os.Open(path); err != nil {
		return nil, 0, notOpened(path, err)
	}
	info, err := f.Stat()
	switch {
	case err != nil:
		f.Close()
		return nil, 0, notOpened(path, err)
	case info.IsDir():
		f.Close()
		return nil, 0, &Error{File: path, Text: "is a folder, not a file"}
	}
	if !info.Mode().IsRegular() {
		return f, -1, nil
	}
	return f, info.Size(), nil
}

// newLines starts to read r, through gzip if its first bytes say so.
func newLines(ctx context.Context, name string, r io.Reader, size int64, progress func(float64)) (*lines, error) {
	l := &lines{ctx: ctx, name: name, size: size, buf: make([]byte, bufferSize), raw: &counter{r: r}}
	if progress != nil && size > 0 {
		l.report = func() { progress(min(float64(l.raw.n)/float64(size), 1)) }
	}
	b := bufio.NewReaderSize(l.raw, 4096)
	l.r = b
	head, err := b.Peek(6)
	if err != nil && err != io.EOF {
		return nil, l.failAt(1, "cannot be read: %v", err)
	}
	if bytes.HasPrefix(head, []byte{0x1f, 0x8b}) {
		z, err := gzip.NewReader(b)
		if err != nil {
			return nil, l.failAt(1, "the gzip header is damaged: %v", err)
		}
		l.r, l.size = z, -1
		return l, nil
	}
	if other := compression(head); other != "" {
		return nil, l.failAt(1, "the file is compressed with %s; only gzip is read", other)
	}
	return l, nil
}

// compression names a compressed format that is not read.
func compression(head []byte) string {
	switch {
	case bytes.HasPrefix(head, []byte("BZh")):
		return "bzip2"
	case bytes.HasPrefix(head, []byte("\xfd7zXZ\x00")):
		return "xz"
	case bytes.HasPrefix(head, []byte("\x28\xb5\x2f\xfd")):
		return "zstd"
	case bytes.HasPrefix(head, []byte("PK\x03\x04")):
		return "zip"
	}
	return ""
}

// counter counts the bytes taken from a reader.
type counter struct {
	r io.Reader
	n int64
}

// Read takes bytes from the reader and counts them.
func (c *counter) Read(p []byte) (int, error) {
	n, err := c.r.Read(p)
	c.n += int64(n)
	return n, err
}
