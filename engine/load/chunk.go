package load

import (
	"bytes"
	"context"
)

// chunk holds what a run of whole lines of a coordinate file says. Positions
// in it, of entries and lines, count from its own start.
type chunk struct {
	ok    bool  // every line is in order
	end   int64 // where its last line ends in the file
	lines int
	c     collector
	at    lineTable
	fault any // what a panic left, if one did
}

// readChunk reads the lines of text. What is wrong with a line is not told:
// whoever reads on from there will find it.
func (h *mmHeader) readChunk(text []byte, s *store) *chunk {
	k := &chunk{c: h.collector(), at: lineTable{next: 1}}
	most := bytes.Count(text, []byte{'\n'})
	if n := len(text); n > 0 && text[n-1] != '\n' {
		most++
	}
	k.c.t.pieces = []piece{s.piece(min(most, len(text)/int(h.lineBytes())+1))}
	l := &lines{ctx: context.Background(), buf: text, end: len(text), atEOF: true}
	err := h.entries(l, &k.c, &k.at, h.stored)
	k.lines = l.num
	k.ok = err == nil && l.err == nil && l.pos == l.end
	return k
}

// join adds what a chunk holds, before which lines lines stand in the file.
func (c *collector) join(at *lineTable, k *chunk, lines int) {
	for _, j := range k.at.jumps {
		at.jumps = append(at.jumps, jump{c.t.n + j.entry, lines + j.line})
	}
	at.next = lines + k.at.next
	o := &k.c
	c.t.pieces = append(c.t.pieces, o.t.pieces...)
	c.t.n += o.t.n
	c.lower, c.upper = c.lower+o.lower, c.upper+o.upper
	c.zeros, c.tiny = c.zeros+o.zeros, c.tiny+o.tiny
	c.digits.join(o.digits)
}
