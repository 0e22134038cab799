// Package recording keeps a session in a file as it goes, and reads it back: a
// line that says what the file is, and frames of what is new since the one
// before. It knows nothing of how a session works; what it writes comes to it
// as a State, and what it reads is one.
package recording

import (
	"bufio"
	"encoding/binary"
	"errors"
	"fmt"
	"hash/crc32"
	"io"
	"strings"
)

// A session file is one line that says what it is, and frames. Each frame is
// a head of twelve bytes (length of the payload, its checksum, the checksum
// of these two; little-endian) and the payload. The payloads joined are one
// stream of package gob. Frames are only appended, each with one write, so
// that a program killed at any moment leaves whole frames and at most one torn
// one at the end, which readers leave out.
const (
	magic     = "dwindle session "
	form      = 1 // raised when a reader of the form before would misread
	headBytes = 12
)

var castagnoli = crc32.MakeTable(crc32.Castagnoli)

// magicLine is the first line of a session file.
func magicLine() string { return fmt.Sprintf("%s%d\n", magic, form) }

// framed puts a head before a payload.
func framed(payload []byte) []byte {
	f := make([]byte, headBytes, headBytes+len(payload))
	binary.LittleEndian.PutUint32(f, uint32(len(payload)))
	binary.LittleEndian.PutUint32(f[4:], crc32.Checksum(payload, castagnoli))
	binary.LittleEndian.PutUint32(f[8:], crc32.Checksum(f[:8], castagnoli))
	return append(f, payload...)
}

// frames joins the payloads of a session file to one stream. It ends with
// io.EOF before a torn last frame.
type frames struct {
	r    *bufio.Reader
	left []byte // of the present payload
	n    int    // frames read
	torn bool   // the last frame was left out
}

// newFrames reads the first line and stands before the first frame.
func newFrames(r io.Reader) (*frames, error) {
	f := &frames{r: bufio.NewReaderSize(r, 1<<16)}
	line, err := f.r.ReadString('\n')
	switch {
	case !strings.HasPrefix(line, magic):
		return nil, errors.New("is not a session file")
	case err != nil:
		return nil, errors.New("ends in its first line")
	case line != magicLine():
		return nil, fmt.Errorf("has form %q of session files; this program reads form %d",
			strings.TrimSpace(line[len(magic):]), form)
	}
	return f, nil
}

// Read takes bytes from the payloads.
func (f *frames) Read(p []byte) (int, error) {
	for len(f.left) == 0 {
		if err := f.next(); err != nil {
			return 0, err
		}
	}
	n := copy(p, f.left)
	f.left = f.left[n:]
	return n, nil
}

// next reads one frame and holds it against its checksums.
func (f *frames) next() error {
	var head [headBytes]byte
	if _, err := io.ReadFull(f.r, head[:]); err == io.EOF {
		return io.EOF
	} else if err != nil {
		return f.tear(err)
	}
	if binary.LittleEndian.Uint32(head[8:]) != crc32.Checksum(head[:8], castagnoli) {
		if head == ([headBytes]byte{}) && f.zeros() {
			return f.tear(io.ErrUnexpectedEOF) // room that the file system gave, and nothing was written to
		}
		return f.damaged()
	}
	payload, err := readUpTo(f.r, int(binary.LittleEndian.Uint32(head[:])))
	if err != nil {
		return f.tear(err)
	}
	if crc32.Checksum(payload, castagnoli) != binary.LittleEndian.Uint32(head[4:]) {
		if _, err := f.r.Peek(1); err == io.EOF {
			return f.tear(io.ErrUnexpectedEOF)
		}
		return f.damaged()
	}
	f.left, f.n = payload, f.n+1
	return nil
}

// readUpTo reads n bytes; memory is taken as they come, since n may lie.
func readUpTo(r io.Reader, n int) ([]byte, error) {
	b, err := io.ReadAll(io.LimitReader(r, int64(n)))
	if err == nil && len(b) < n {
		err = io.ErrUnexpectedEOF
	}
	return b, err
}

// tear ends the stream at a frame that was not written whole; an error of the
// disk is passed on.
func (f *frames) tear(err error) error {
	if err != io.ErrUnexpectedEOF {
		return err
	}
	f.torn = true
	return io.EOF
}

// zeros says whether nothing but zero bytes follow.
func (f *frames) zeros() bool {
	for {
		b, err := f.r.ReadByte()
		if err != nil {
			return err == io.EOF
		}
		if b != 0 {
			return false
		}
	}
}

func (f *frames) damaged() error { return fmt.Errorf("is damaged: frame %d fails its checksum", f.n+1) }
