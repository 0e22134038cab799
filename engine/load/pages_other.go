//go:build !linux

package load

// largePages does nothing here.
func largePages([]byte) {}
