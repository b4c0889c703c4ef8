package printfile

import (
	"errors"
	"syscall"
)

// syncDir does nothing: the system does not sync a folder.
func syncDir(string) error { return nil }

// Error codes of winerror.h.
const (
	errorNotSameDevice  = syscall.Errno(17)
	errorHandleDiskFull = syscall.Errno(39)
	errorDiskFull       = syscall.Errno(112)
	errorFileTooLarge   = syscall.Errno(223)
)

func isDiskFull(err error) bool {
	return errors.Is(err, errorDiskFull) || errors.Is(err, errorHandleDiskFull)
}

func isTooLarge(err error) bool    { return errors.Is(err, errorFileTooLarge) }
func isOtherDevice(err error) bool { return errors.Is(err, errorNotSameDevice) }
