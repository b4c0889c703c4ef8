//go:build unix

package board

import (
	"fmt"
	"os"
)

// private refuses a file that others than its owner can read or write; what
// says what it holds.
func private(f *os.File, what string) error {
	st, err := f.Stat()
	if err != nil {
		return fmt.Errorf("reading the %s: %w", what, err)
	}
	switch {
	case !st.Mode().IsRegular():
		return &OptionError{fmt.Sprintf("the %s file %s is not a file", what, f.Name()), "give a file that holds the " + what}
	case st.Mode().Perm()&0o077 != 0:
		return &OptionError{fmt.Sprintf("the %s file %s is open to others (mode %04o)", what, f.Name(), st.Mode().Perm()), "chmod 600 " + f.Name()}
	}
	return nil
}
