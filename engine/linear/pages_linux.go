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
	if b := whole(b, largePage); len(b) > 0 {
		unix.Madvise(b, unix.MADV_HUGEPAGE) // advice: it may fail
	}
}

// layPages lays the pages that b covers whole. Systems before Linux 5.14
// cannot, and leave it to the first touch.
func layPages(b []byte) {
	if b := whole(b, unix.Getpagesize()); len(b) > 0 {
		unix.Madvise(b, unix.MADV_POPULATE_WRITE) // as above
	}
}

// whole returns the part of b that pages of this size cover whole.
func whole(b []byte, page int) []byte {
	start, size := uintptr(unsafe.Pointer(&b[0])), uintptr(page)
	lo := (start + size - 1) &^ (size - 1)
	hi := (start + uintptr(len(b))) &^ (size - 1)
	if lo >= hi {
		return nil
	}
	return b[lo-start : hi-start]
}
