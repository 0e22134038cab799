//go:build !linux

package linear

// largePages does nothing here.
func largePages([]byte) {}

// layPages does nothing here.
func layPages([]byte) {}
