//go:build !(linux || darwin || freebsd || netbsd || openbsd)

package load

import "os"

// mapFile never puts a file into memory here: it is read as a stream.
func mapFile(*os.File, int64) (*whole, func()) { return nil, func() {} }
