//go:build unix

package render

import (
	"runtime"

	"golang.org/x/sys/unix"
)

// peakMemory is the process's largest resident size so far, in bytes; 0 where
// the system does not tell.
func peakMemory() int64 {
	var u unix.Rusage
	if unix.Getrusage(unix.RUSAGE_SELF, &u) != nil {
		return 0
	}
	if runtime.GOOS == "darwin" || runtime.GOOS == "ios" {
		return int64(u.Maxrss) // bytes there, KiB elsewhere
	}
	return int64(u.Maxrss) << 10
}
