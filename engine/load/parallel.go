package load

import (
	"sync"
	"sync/atomic"

	"dwindle/engine/linear"
)

// parser shares the chunks of a file among threads. They are cut by position
// alone, so that nothing depends on the number of threads.
type parser struct {
	h     *mmHeader
	whole *whole
	store store
	first int64         // where the first line begins
	out   []chan *chunk // one a chunk, in file order
	next  atomic.Int64  // the first chunk not yet taken
	stop  atomic.Bool
	wait  sync.WaitGroup
}

// parallel reads a coordinate file on all threads as far as it is in order,
// whole chunks only, and leaves l behind what was read. Errors of the file
// are not told: reading on from there tells the first of them.
func (h *mmHeader) parallel(l *lines, c *collector, at *lineTable) error {
	w := l.whole
	pos, num := l.position(), l.num
	if w == nil || pos >= w.size {
		return nil
	}
	p := &parser{h: h, whole: w, first: pos, store: store{expect: h.stored}}
	p.out = make([]chan *chunk, (w.size-pos-1)/int64(w.chunk)+1)
	p.start(linear.Threads())
	defer p.end()
	for _, out := range p.out {
		var k *chunk
		select {
		case k = <-out:
		case <-l.ctx.Done():
		}
		if err := l.ctx.Err(); err != nil {
			return err
		}
		if k.fault != nil {
			panic(k.fault)
		}
		if !k.ok || c.t.n+k.c.t.n > h.stored {
			break
		}
		c.join(at, k, num)
		pos, num = k.end, num+k.lines
		if l.raw.n = max(l.raw.n, pos); l.report != nil {
			l.report()
		}
	}
	l.leap(pos, num)
	return nil
}

// start sets threads to work.
func (p *parser) start(threads int) {
	for i := range p.out {
		p.out[i] = make(chan *chunk, 1)
	}
	for range min(threads, len(p.out)) {
		p.wait.Go(p.work)
	}
}

// end returns when no thread is at work any more.
func (p *parser) end() {
	p.stop.Store(true)
	p.wait.Wait()
}

// work reads one chunk after the other.
func (p *parser) work() {
	buf := make([]byte, p.whole.chunk+longLine+1)
	for !p.stop.Load() {
		i := p.next.Add(1) - 1
		if i >= int64(len(p.out)) {
			return
		}
		p.out[i] <- p.read(buf, i)
	}
}

// read reads chunk i; a panic is kept for the caller of parallel.
func (p *parser) read(buf []byte, i int64) (k *chunk) {
	defer func() {
		if r := recover(); r != nil {
			k = &chunk{fault: r}
		}
	}()
	w := p.whole
	lo := p.first + i*int64(w.chunk)
	text, end, ok := w.lines(buf, lo, min(lo+int64(w.chunk), w.size))
	if !ok {
		return &chunk{}
	}
	k = p.h.readChunk(text, &p.store)
	k.end = end
	return k
}
