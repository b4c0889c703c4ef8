package board

import (
	"errors"
	"os"
	"path/filepath"
	"runtime"
	"strings"
	"testing"
)

// TestReadToken tries files that will do and such that will not.
func TestReadToken(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		text string
		mode os.FileMode
		ok   bool
	}{
		{testToken, 0o600, true}, {testToken + "\n", 0o400, true}, {"  " + testToken + "\r\n", 0o600, true},
		{"0123456789abcdef", 0o600, true}, {"0123456789abcde\n", 0o600, false}, {"", 0o600, false},
		{"two words that are long enough", 0o600, false}, {"Übermäßig_lang_und_breit", 0o600, false},
		{testToken + "\nsecond line of it", 0o600, false}, {testToken + "==", 0o600, true}, {"==" + testToken, 0o600, false},
		{testToken, 0o604, false}, {testToken, 0o640, false}, {testToken, 0o620, false}, {testToken, 0o644, false},
	} {
		if c.mode&0o077 != 0 && runtime.GOOS == "windows" {
			continue
		}
		path := filepath.Join(t.TempDir(), "token")
		if err := os.WriteFile(path, []byte(c.text), 0o600); err != nil {
			t.Fatal(err)
		}
		if err := os.Chmod(path, c.mode); err != nil {
			t.Fatal(err)
		}
		token, err := ReadToken(path)
		var refused *OptionError
		switch {
		case c.ok && (err != nil || token != strings.TrimSpace(c.text)):
			t.Errorf("%q, %o: %q, %v", c.text, c.mode, token, err)
		case !c.ok && (!errors.As(err, &refused) || refused.Hint() == ""):
			t.Errorf("%q, %o: %v", c.text, c.mode, err)
		case !c.ok && c.text != "" && strings.Contains(err.Error(), c.text):
			t.Errorf("the error tells the token: %v", err)
		}
	}
	if _, err := ReadToken(filepath.Join(t.TempDir(), "none")); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("a missing file: %v", err)
	}
	var refused *OptionError
	if _, err := ReadToken(t.TempDir()); runtime.GOOS != "windows" && !errors.As(err, &refused) {
		t.Errorf("a folder: %v", err)
	}
}

// TestFreshToken is of 128 random bits or more (rand.Text promises them in 26
// characters of base32, RFC 4648, 6) and never the same.
func TestFreshToken(t *testing.T) {
	t.Parallel()
	seen := map[string]bool{}
	for range 1000 {
		token := freshToken()
		if len(token)*5 < 128 || checkToken(token) != nil || seen[token] {
			t.Fatalf("%q", token)
		}
		seen[token] = true
	}
}
