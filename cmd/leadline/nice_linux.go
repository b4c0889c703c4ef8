package main

import (
	"fmt"
	"os"
	"strconv"

	"golang.org/x/sys/unix"
)

// beNice lowers the priority of every thread there is; later ones inherit it.
// Linux counts niceness by thread.
func beNice(n int) error {
	threads, err := os.ReadDir("/proc/self/task")
	if err != nil {
		return fmt.Errorf("listing the threads: %w", err)
	}
	for _, t := range threads {
		id, err := strconv.Atoi(t.Name())
		if err != nil {
			return err
		}
		if err := unix.Setpriority(unix.PRIO_PROCESS, id, n); err != nil && err != unix.ESRCH {
			return err
		}
	}
	return nil
}
