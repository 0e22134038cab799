package load

import (
	"bytes"
	"io"
)

const (
	// chunkSize is how many bytes of a file are parsed at a time: few enough
	// to stay in a core's cache.
	chunkSize = 1 << 20
	// longLine is the length of a line that may reach over the end of a chunk.
	longLine = 4 << 10
)

// whole is a plain file that can be read anywhere. Reading pieces into a
// buffer that stays in the cache costs less than the page faults of a mapped
// file, and a file that shrinks meanwhile is an error, not a crash.
type whole struct {
	r     io.ReaderAt
	size  int64 // bytes
	chunk int   // bytes that are parsed at a time
}

// lines reads the lines that begin in [lo, hi), lo > 0, and says where the
// last one ends. It returns false where that cannot be told.
func (w *whole) lines(buf []byte, lo, hi int64) (text []byte, end int64, ok bool) {
	last := min(hi+longLine, w.size)
	buf = buf[:last-lo+1] // from the byte before lo, to see whether a line begins at lo
	if n, _ := w.r.ReadAt(buf, lo-1); n < len(buf) {
		return nil, 0, false
	}
	from, ok := lineStart(buf, 0, last == w.size)
	to, ends := lineStart(buf, int(hi-lo), last == w.size)
	return buf[from:to], lo - 1 + int64(to), ok && ends
}

// lineStart returns where the first line of text begins behind at. Without
// one it is the end of the text, which is right at the end of a file only.
func lineStart(text []byte, at int, atEnd bool) (start int, ok bool) {
	if k := bytes.IndexByte(text[at:], '\n'); k >= 0 {
		return at + k + 1, true
	}
	return len(text), atEnd
}

// position is where the line begins that is handed out next.
func (l *lines) position() int64 { return l.read - int64(l.end-l.pos) }

// leap goes on reading at pos, 0-based, of the file; the line before it is
// number num.
func (l *lines) leap(pos int64, num int) {
	l.raw.r = io.NewSectionReader(l.whole.r, pos, l.size-pos)
	l.read = pos
	l.r = l.raw
	l.pos, l.end, l.num, l.atEOF = 0, 0, num, false
}
