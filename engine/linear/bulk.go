package linear

import "unsafe"

// Bulk returns n zeros on large pages where the system has them: the first
// touch of a small page can cost far more than filling it.
func Bulk[T any](n int) []T {
	s := make([]T, n)
	if n > 0 {
		largePages(unsafe.Slice((*byte)(unsafe.Pointer(&s[0])), n*int(unsafe.Sizeof(s[0]))))
	}
	return s
}

// Touch has the system lay the pages of s, whose contents stay as they are,
// where it can: whoever writes there next need not wait for them.
func Touch[T any](s []T) {
	if len(s) > 0 {
		layPages(unsafe.Slice((*byte)(unsafe.Pointer(&s[0])), len(s)*int(unsafe.Sizeof(s[0]))))
	}
}
