package load

import (
	"runtime/debug"
	"sync"
	"sync/atomic"
	"unsafe"

	"dwindle/engine/linear"
)

// chunkSize is how many bytes of a file are parsed at a time: whole pages,
// and few enough to stay in a core's cache.
const chunkSize = 1 << 20

// parser shares the chunks of a file among threads. They are cut by position
// alone, so that nothing depends on the number of threads.
type parser struct {
	h     *mmHeader
	whole *whole
	first int           // where the first line begins
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
	if w == nil || pos >= len(w.text) {
		return nil
	}
	p := &parser{h: h, whole: w, first: pos, out: make([]chan *chunk, (len(w.text)-pos+w.size-1)/w.size)}
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
		c.join(at, k, num+1)
		pos, num = k.end, num+k.lines
		if l.raw.n = int64(pos); l.report != nil {
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

// end returns when no thread looks at the text any more.
func (p *parser) end() {
	p.stop.Store(true)
	p.wait.Wait()
}

func (p *parser) work() {
	debug.SetPanicOnFault(true) // the file may shrink under the map
	for !p.stop.Load() {
		i := int(p.next.Add(1)) - 1
		if i >= len(p.out) {
			return
		}
		p.out[i] <- p.read(i)
	}
}

// read reads chunk i. Where the text is gone the chunk is not in order.
func (p *parser) read(i int) (k *chunk) {
	defer func() {
		if r := recover(); r != nil {
			k = &chunk{fault: r}
			if p.gone(r) {
				k.fault = nil
			}
		}
	}()
	w := p.whole
	lo := p.first + i*w.size
	hi := min(lo+w.size, len(w.text))
	k = p.h.readChunk(w.text, lo, hi)
	if w.forget != nil {
		w.forget(lo, hi)
	}
	return k
}

// gone tells whether a panic comes from looking at the text.
func (p *parser) gone(r any) bool {
	e, ok := r.(interface{ Addr() uintptr })
	if !ok {
		return false
	}
	start := uintptr(unsafe.Pointer(unsafe.SliceData(p.whole.text)))
	return e.Addr() >= start && e.Addr()-start < uintptr(len(p.whole.text))
}
