package cells

import "testing"

// TestDetect: NO_COLOR by no-color.org, CLICOLOR by bixense.com/clicolors, the
// locale by POSIX; names of terminals from terminfo.
func TestDetect(t *testing.T) {
	type env = map[string]string
	for _, c := range []struct {
		env  env
		want Terminal
	}{
		{env{}, Terminal{None, Plain, true}},
		{env{"LANG": "en_GB.UTF-8"}, Terminal{None, Plain, false}},
		{env{"TERM": "dumb", "LANG": "C.UTF-8"}, Terminal{None, Plain, false}},
		{env{"TERM": "vt220", "LANG": "C.UTF-8", "COLORTERM": "truecolor"}, Terminal{None, Plain, false}},
		{env{"TERM": "xterm-mono", "LANG": "C.UTF-8"}, Terminal{None, Plain, false}},
		{env{"TERM": "xterm", "LANG": "C.UTF-8"}, Terminal{C16, Half, false}},
		{env{"TERM": "linux", "LANG": "C.UTF-8"}, Terminal{C16, Half, false}},
		{env{"TERM": "xterm-256color", "LANG": "C.utf8"}, Terminal{C256, Half, false}},
		{env{"TERM": "xterm-256color", "COLORTERM": "truecolor", "LANG": "C.UTF-8"}, Terminal{TrueColour, Half, false}},
		{env{"TERM": "xterm", "COLORTERM": "24bit", "LANG": "C.UTF-8"}, Terminal{TrueColour, Half, false}},
		{env{"TERM": "xterm", "COLORTERM": "yes", "LANG": "C.UTF-8"}, Terminal{C16, Half, false}},
		{env{"TERM": "xterm-direct", "LANG": "C.UTF-8"}, Terminal{TrueColour, Half, false}},
		{env{"TERM": "xterm-kitty", "LANG": "C.UTF-8"}, Terminal{TrueColour, Quadrant, false}},
		{env{"TERM": "foot-extra", "LANG": "C.UTF-8"}, Terminal{TrueColour, Quadrant, false}},
		{env{"TERM": "footage", "LANG": "C.UTF-8"}, Terminal{C16, Half, false}},
		{env{"TERM": "screen", "COLORTERM": "truecolor", "LANG": "C.UTF-8"}, Terminal{C256, Half, false}},
		{env{"TERM": "screen-256color", "COLORTERM": "truecolor", "TMUX": "/tmp/s", "LANG": "C.UTF-8"}, Terminal{TrueColour, Half, false}},
		{env{"WT_SESSION": "id"}, Terminal{TrueColour, Half, false}},
		{env{"TERM": "xterm-256color", "LANG": "C"}, Terminal{C256, Plain, true}},
		{env{"TERM": "xterm-256color", "LC_ALL": "C", "LANG": "C.UTF-8"}, Terminal{C256, Plain, true}},
		{env{"TERM": "xterm-256color", "LC_CTYPE": "C.UTF-8", "LANG": "C"}, Terminal{C256, Half, false}},
		{env{"TERM": "xterm-kitty", "NO_COLOR": "1", "LANG": "C.UTF-8"}, Terminal{None, Plain, false}},
		{env{"TERM": "xterm-kitty", "NO_COLOR": "0", "CLICOLOR_FORCE": "1", "LANG": "C.UTF-8"}, Terminal{None, Plain, false}},
		{env{"TERM": "xterm", "NO_COLOR": "", "LANG": "C.UTF-8"}, Terminal{C16, Half, false}},
		{env{"TERM": "xterm", "CLICOLOR": "0", "LANG": "C.UTF-8"}, Terminal{None, Plain, false}},
		{env{"TERM": "xterm", "CLICOLOR": "0", "CLICOLOR_FORCE": "1", "LANG": "C.UTF-8"}, Terminal{C16, Half, false}},
		{env{"TERM": "xterm", "CLICOLOR": "0", "CLICOLOR_FORCE": "0", "LANG": "C.UTF-8"}, Terminal{None, Plain, false}},
	} {
		if got := Detect(func(k string) string { return c.env[k] }); got != c.want {
			t.Errorf("%v: %+v, want %+v", c.env, got, c.want)
		}
	}
}
