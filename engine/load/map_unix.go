//go:build linux || darwin || freebsd || netbsd || openbsd

package load

import (
	"math"
	"os"

	"golang.org/x/sys/unix"
)

// mapFile puts a file into memory; nil where that cannot be done. unmap ends
// that.
func mapFile(f *os.File, size int64) (w *whole, unmap func()) {
	if size < 2*chunkSize || size > math.MaxInt {
		return nil, func() {}
	}
	text, err := unix.Mmap(int(f.Fd()), 0, int(size), unix.PROT_READ, unix.MAP_SHARED)
	if err != nil {
		return nil, func() {}
	}
	page := os.Getpagesize()
	forget := func(lo, hi int) {
		if lo, hi = (lo+page-1)/page*page, hi/page*page; lo < hi {
			unix.Madvise(text[lo:hi], unix.MADV_DONTNEED) // a hint: it may fail
		}
	}
	return &whole{text: text, r: f, size: chunkSize, forget: forget}, func() { unix.Munmap(text) }
}
