package load

import (
	"bytes"
	"context"
	"fmt"
	"io"
)

const (
	bufferSize = 64 << 10 // bytes: a few thousand lines between two looks at the context
	maxLine    = 1 << 20  // bytes
)

// lines hands out the lines of a stream without copying them. It knows where
// it stands, for messages, and stops when the context ends.
type lines struct {
	ctx      context.Context
	name     string // as the user named the file
	r        io.Reader
	buf      []byte
	pos, end int // buf[pos:end] is read but not handed out
	num      int // number of the line handed out last, 1-based
	atEOF    bool
	err      error  // set once the stream cannot be read on
	size     int64  // bytes of text in the stream, -1 if unknown
	read     int64  // bytes taken from r
	report   func() // called after every read; may be nil
	raw      *counter
	whole    *whole // the file, if it is a plain one; nil for a stream
}

// next returns the next line without its end, valid until the next call. It
// returns false at the end of the stream or when it fails; err tells which.
func (l *lines) next() ([]byte, bool) {
	for l.err == nil {
		rest := l.buf[l.pos:l.end]
		switch k := bytes.IndexByte(rest, '\n'); {
		case k > maxLine || k < 0 && len(rest) > maxLine:
			l.num++
			l.err = l.fail("the line is longer than %d bytes", maxLine)
		case k >= 0:
			l.pos += k + 1
			return l.line(rest[:k]), true
		case !l.atEOF:
			l.fill()
		case len(rest) > 0:
			l.pos = l.end
			return l.line(rest), true
		default:
			return nil, false
		}
	}
	return nil, false
}

func (l *lines) line(b []byte) []byte {
	if n := len(b); n > 0 && b[n-1] == '\r' {
		b = b[:n-1]
	}
	l.num++
	return b
}

// fill reads on behind what is not handed out yet.
func (l *lines) fill() {
	if l.err = l.ctx.Err(); l.err != nil {
		return
	}
	if l.end-l.pos > len(l.buf)/2 {
		l.buf = append(make([]byte, 0, 2*len(l.buf)), l.buf[l.pos:l.end]...)
		l.end -= l.pos
		l.buf = l.buf[:cap(l.buf)]
	} else {
		l.end = copy(l.buf, l.buf[l.pos:l.end])
	}
	l.pos = 0
	n, err := l.r.Read(l.buf[l.end:])
	l.end += n
	l.read += int64(n)
	if err == io.EOF {
		l.atEOF = true
	} else if err != nil {
		l.num += 1 + bytes.Count(l.buf[:l.end], []byte{'\n'})
		l.err = l.fail("cannot be read further: %v", err)
	}
	if l.report != nil {
		l.report()
	}
}

// preview returns the first bytes of the stream without handing them out.
func (l *lines) preview() []byte {
	for l.err == nil && !l.atEOF && l.end < bufferSize/2 {
		l.fill()
	}
	return l.buf[l.pos:l.end]
}

// fail makes the error for the line handed out last; if the stream itself
// failed, that is the reason.
func (l *lines) fail(format string, args ...any) error {
	if l.err != nil {
		return l.err
	}
	return l.failAt(max(l.num, 1), format, args...)
}

func (l *lines) failAt(line int, format string, args ...any) error {
	return &Error{File: l.name, Line: line, Text: fmt.Sprintf(format, args...)}
}

// canHold tells whether count items of at least bytes each can still follow;
// the last needs no separator.
func (l *lines) canHold(count, bytes int64) bool {
	if l.size < 0 {
		return true
	}
	left := l.size - l.read + int64(l.end-l.pos)
	return count <= (left+1)/bytes
}

// onlyBlank checks that nothing follows; % comments pass if allowed.
func (l *lines) onlyBlank(comments bool, after string) error {
	for {
		line, ok := l.next()
		if !ok {
			return l.err
		}
		if blank(line) || comments && line[0] == '%' {
			continue
		}
		return l.fail("%s is followed by %s", after, quoted(line))
	}
}
