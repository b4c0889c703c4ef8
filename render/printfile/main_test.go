package printfile

import (
	"fmt"
	"os"
	"testing"
)

// childPath, in the environment, makes the test binary a process that begins the
// file of that path, says so, and waits for its end.
const childPath = "PRINTFILE_TEST_CHILD"

func TestMain(m *testing.M) {
	if path := os.Getenv(childPath); path != "" {
		child(path)
		return
	}
	os.Exit(m.Run())
}

func child(path string) {
	w, err := Create(path, Info{Width: 1000, Height: 1000}, 2)
	if err == nil {
		err = w.WriteRows(make([]byte, 400*1000*bpp))
	}
	if err != nil {
		fmt.Println(err)
		os.Exit(1)
	}
	fmt.Println("begun")
	os.Stdin.Read(make([]byte, 1))
}
