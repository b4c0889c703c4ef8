package jobs

import (
	"syscall"

	"golang.org/x/sys/unix"
)

// limitSilence sets TCP_USER_TIMEOUT (tcp(7)).
func limitSilence(_, _ string, c syscall.RawConn) error {
	return c.Control(func(fd uintptr) {
		_ = unix.SetsockoptInt(int(fd), unix.IPPROTO_TCP, unix.TCP_USER_TIMEOUT, int(silentHost.Milliseconds())) // a Unix socket has none
	})
}
