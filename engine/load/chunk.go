package load

import (
	"bytes"
	"context"
)

// chunk holds what the lines say that begin in one stretch of a coordinate
// file. Positions in it, of entries and lines, count from its own start.
type chunk struct {
	ok    bool // every line is in order
	end   int  // where its last line ends in the file
	lines int
	c     collector
	at    lineTable
	fault any // what a panic left, if one did
}

// readChunk reads the lines of text that begin in [lo, hi). What is wrong with
// a line is not told: whoever reads on from there will find it.
func (h *mmHeader) readChunk(text []byte, lo, hi int) *chunk {
	from, ok := lineStart(text, lo)
	to, ends := lineStart(text, hi)
	if !ok || !ends {
		return &chunk{}
	}
	k := &chunk{end: to, c: h.collector(), at: lineTable{next: 1}}
	l := &lines{ctx: context.Background(), buf: text[from:to], end: to - from, atEOF: true}
	most := min(bytes.Count(l.buf, []byte{'\n'})+1, len(l.buf)/int(h.lineBytes())+1)
	k.c.t.grow(min(most, h.stored))
	err := h.entries(l, &k.c, &k.at, h.stored)
	k.lines = l.num
	k.ok = err == nil && l.err == nil && l.pos == l.end
	return k
}

// lineStart returns where the first line starts that begins at pos or behind
// it; ok is false where that is too far to be a line.
func lineStart(text []byte, pos int) (start int, ok bool) {
	if pos >= len(text) {
		return len(text), true
	}
	if pos == 0 {
		return 0, true
	}
	within := text[pos-1 : min(pos+maxLine+1, len(text))]
	k := bytes.IndexByte(within, '\n')
	if k < 0 {
		return len(text), pos-1+len(within) == len(text)
	}
	return pos + k, true
}

// join adds what a chunk holds, whose first line is number first, 1-based, of
// the file.
func (c *collector) join(at *lineTable, k *chunk, first int) {
	for _, j := range k.at.jumps {
		at.jumps = append(at.jumps, jump{c.t.n + j.entry, first - 1 + j.line})
	}
	at.next = first - 1 + k.at.next
	o := &k.c
	c.t.pieces = append(c.t.pieces, o.t.pieces...)
	c.t.n += o.t.n
	c.lower, c.upper = c.lower+o.lower, c.upper+o.upper
	c.zeros, c.tiny = c.zeros+o.zeros, c.tiny+o.tiny
	c.digits.join(o.digits)
}
