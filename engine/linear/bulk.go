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
