//go:build !(darwin || dragonfly || freebsd || linux || netbsd || openbsd)

package parts

// lock takes no lock: these systems have no flock.
func lock(string) (unlock func(), busy bool) { return func() {}, false }
