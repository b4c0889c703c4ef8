package kit

import "errors"

// Hint finds the cure that the failing package knows.
func Hint(err error) (string, bool) {
	var h interface{ Hint() string }
	if errors.As(err, &h) && h.Hint() != "" {
		return h.Hint(), true
	}
	return "", false
}
