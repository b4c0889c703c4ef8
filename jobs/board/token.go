package board

import (
	"bytes"
	"crypto/hmac"
	"crypto/rand"
	"crypto/sha256"
	"crypto/subtle"
	"encoding/base64"
	"fmt"
	"io"
	"os"
	"regexp"
)

// leastToken is the fewest characters of a token that is given.
const leastToken = 16

// tokenForm is what can stand behind "Bearer" (b64token of RFC 6750, 2.1).
var tokenForm = regexp.MustCompile(`^[A-Za-z0-9._~+/-]+=*$`)

// ReadToken reads a token from a file that is its owner's alone: at least 16
// letters, digits or -._~+/ on one line. *OptionError where the file will not do.
func ReadToken(path string) (string, error) {
	f, err := os.Open(path)
	if err != nil {
		return "", fmt.Errorf("reading the token: %w", err)
	}
	defer f.Close()
	if err := private(f, "token"); err != nil {
		return "", err
	}
	b, err := io.ReadAll(io.LimitReader(f, 4096))
	if err != nil {
		return "", fmt.Errorf("reading the token: %w", err)
	}
	token := string(bytes.TrimSpace(b))
	return token, checkToken(token)
}

func checkToken(token string) error {
	const cure = "for instance: (umask 077; openssl rand -hex 24 > board.token)"
	switch {
	case len(token) < leastToken:
		return &OptionError{fmt.Sprintf("the token has %d characters, fewer than %d", len(token), leastToken), cure}
	case !tokenForm.MatchString(token):
		return &OptionError{"the token holds other characters than letters, digits and -._~+/", cure}
	}
	return nil
}

// pass knows the right token without showing it to anybody.
type pass struct {
	token  [sha256.Size]byte // hashes have one length, so that comparing takes one time
	cookie [sha256.Size]byte
	value  string // of the cookie
}

// newPass returns the pass of a token. The cookie's value follows from the
// token, so that it outlives the board, but does not tell it: browsers send
// cookies to every port of a host (RFC 6265, 8.5).
func newPass(token string) *pass {
	h := hmac.New(sha256.New, []byte(token))
	h.Write([]byte("leadline board cookie"))
	v := base64.RawURLEncoding.EncodeToString(h.Sum(nil))
	return &pass{token: sha256.Sum256([]byte(token)), cookie: sha256.Sum256([]byte(v)), value: v}
}

// opens and admits compare in constant time.
func (p *pass) opens(token string) bool {
	h := sha256.Sum256([]byte(token))
	return subtle.ConstantTimeCompare(h[:], p.token[:]) == 1
}

func (p *pass) admits(cookie string) bool {
	h := sha256.Sum256([]byte(cookie))
	return subtle.ConstantTimeCompare(h[:], p.cookie[:]) == 1
}

// freshToken has at least 128 random bits.
func freshToken() string { return rand.Text() }
