//go:build darwin || dragonfly || freebsd || linux || netbsd || openbsd

package printfile

import (
	"errors"
	"os"
	"syscall"
)

// renamesOpenFiles says that a file can be renamed and removed while open.
const renamesOpenFiles = true

// lockFile takes the exclusive lock of f without waiting.
func lockFile(f *os.File) lockState {
	for {
		err := syscall.Flock(int(f.Fd()), syscall.LOCK_EX|syscall.LOCK_NB)
		switch {
		case err == nil:
			return lockHeld
		case errors.Is(err, syscall.EINTR):
			continue
		case errors.Is(err, syscall.EWOULDBLOCK):
			return lockBusy
		}
		return lockUnknown // a file system without locks
	}
}

// removeIfStale removes a part whose lock is free, holding the lock meanwhile:
// a process that created it an instant ago finds the lock busy or the name
// gone, and begins another.
func removeIfStale(name string) {
	f, err := os.OpenFile(name, os.O_RDWR|syscall.O_NOFOLLOW|syscall.O_NONBLOCK, 0)
	if err != nil {
		return
	}
	defer f.Close()
	if st, err := f.Stat(); err != nil || !st.Mode().IsRegular() {
		return
	}
	// A part renamed to its final name between open and lock has another name now.
	if lockFile(f) == lockHeld && sameFile(f, name) {
		os.Remove(name)
	}
}
