package load

import "io"

// whole is a plain file that can be looked at anywhere.
type whole struct {
	text   []byte           // all its bytes
	r      io.ReaderAt      // the same, by reading
	size   int              // bytes of text that are parsed at a time
	forget func(lo, hi int) // text[lo:hi] is not needed soon
}

// leap goes on reading at pos, 0-based, of the file; the line before it is
// number num.
func (l *lines) leap(pos, num int) {
	l.raw.r = io.NewSectionReader(l.whole.r, int64(pos), l.size-int64(pos))
	l.raw.n, l.read = int64(pos), int64(pos)
	l.r = l.raw
	l.pos, l.end, l.num, l.atEOF = 0, 0, num, false
}

// position is where the line begins that is handed out next.
func (l *lines) position() int { return int(l.read) - (l.end - l.pos) }
