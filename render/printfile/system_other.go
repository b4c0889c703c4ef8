//go:build !unix && !windows

package printfile

// syncDir does nothing: these systems do not sync a folder.
func syncDir(string) error { return nil }

// These systems have no common codes for what a disk refuses: the cause itself
// is all there is to say.
func isDiskFull(error) bool    { return false }
func isTooLarge(error) bool    { return false }
func isOtherDevice(error) bool { return false }
