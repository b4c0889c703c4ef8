//go:build darwin || dragonfly || freebsd || linux || netbsd || openbsd

package parts

import (
	"errors"
	"os"
	"syscall"
)

// lock takes the exclusive lock of a file without waiting. busy says that
// another process has it; a file system without locks never is.
func lock(path string) (unlock func(), busy bool) {
	f, err := os.OpenFile(path, os.O_RDWR, 0) // NFS locks only what could be written
	if err != nil {
		return func() {}, false
	}
	for {
		err := syscall.Flock(int(f.Fd()), syscall.LOCK_EX|syscall.LOCK_NB)
		if errors.Is(err, syscall.EINTR) {
			continue
		}
		if errors.Is(err, syscall.EWOULDBLOCK) {
			f.Close()
			return nil, true
		}
		return func() { f.Close() }, false
	}
}
