package linear

import (
	"unsafe"

	"golang.org/x/sys/unix"
)

// largePage is the size of a large page on most machines. A system whose pages
// have other sizes takes the advice for what fits.
const largePage = 2 << 20

// largePages advises the system to put large pages under the part of b that
// they can cover whole, so that no memory is taken for others.
func largePages(b []byte) {
	start := uintptr(unsafe.Pointer(&b[0]))
	lo := (start + largePage - 1) &^ (largePage - 1)
	hi := (start + uintptr(len(b))) &^ (largePage - 1)
	if lo < hi {
		unix.Madvise(b[lo-start:hi-start], unix.MADV_HUGEPAGE) // advice: it may fail
	}
}
