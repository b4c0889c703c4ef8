//go:build !(darwin || dragonfly || freebsd || linux || netbsd || openbsd)

package printfile

import (
	"os"
	"runtime"
)

// renamesOpenFiles says that a file can be renamed and removed while open.
const renamesOpenFiles = false

// lockFile takes no lock: these systems have no flock.
func lockFile(*os.File) lockState { return lockUnknown }

// removeIfStale removes the part where the system itself refuses to remove a
// file that a process holds open; elsewhere nothing tells a stale part from one
// in work, and it stays.
func removeIfStale(name string) {
	if runtime.GOOS == "windows" {
		os.Remove(name)
	}
}
