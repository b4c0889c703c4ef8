//go:build unix

package board

import (
	"fmt"
	"os"
)

// private refuses a file that others than its owner can read or write.
func private(f *os.File) error {
	st, err := f.Stat()
	if err != nil {
		return fmt.Errorf("reading the token: %w", err)
	}
	switch {
	case !st.Mode().IsRegular():
		return &OptionError{fmt.Sprintf("the token file %s is not a file", f.Name()), "give a file that holds the token"}
	case st.Mode().Perm()&0o077 != 0:
		return &OptionError{fmt.Sprintf("the token file %s is open to others (mode %04o)", f.Name(), st.Mode().Perm()), "chmod 600 " + f.Name()}
	}
	return nil
}
