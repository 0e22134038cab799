//go:build !linux

package linear

// largePages does nothing here.
func largePages([]byte) {}
