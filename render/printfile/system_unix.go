//go:build unix

package printfile

import (
	"errors"
	"os"
	"syscall"
)

// syncDir makes a rename in dir last through a power cut.
func syncDir(dir string) error {
	d, err := os.Open(dir)
	if err != nil {
		return err
	}
	defer d.Close()
	err = d.Sync()
	// Some file systems cannot sync a folder, and say so; they have no better.
	if errors.Is(err, syscall.EINVAL) || errors.Is(err, syscall.ENOTSUP) {
		return nil
	}
	return err
}

func isDiskFull(err error) bool {
	return errors.Is(err, syscall.ENOSPC) || errors.Is(err, syscall.EDQUOT)
}

func isTooLarge(err error) bool    { return errors.Is(err, syscall.EFBIG) }
func isOtherDevice(err error) bool { return errors.Is(err, syscall.EXDEV) }
