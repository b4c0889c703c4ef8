package jobs

import (
	"errors"
	"fmt"
	"io/fs"
	"net/url"
	"os"
	"path/filepath"
	"strings"

	"github.com/jackc/pgx/v5/pgconn"
)

// ReachError says that a database does not answer, or refuses.
type ReachError struct {
	Where string // without a password
	Err   error
}

// Error is the server's own word where it gave one, else the last of what was
// tried.
func (e *ReachError) Error() string {
	return fmt.Sprintf("the queue at %s: %s", e.Where, reason(e.Err))
}

// Unwrap returns the cause.
func (e *ReachError) Unwrap() error { return e.Err }

// Hint says what to look at: for what the server said (PostgreSQL's manual,
// appendix A), else for the way to it.
func (e *ReachError) Hint() string {
	var p *pgconn.PgError
	if !errors.As(e.Err, &p) {
		return "check that the server runs, and the address's host, port, user and database; passwords may stand in ~/.pgpass"
	}
	switch p.Code {
	case "28P01", "28000":
		return "check the user, and the password: it stands in the address, in PGPASSWORD, or in ~/.pgpass (HOST:PORT:DATABASE:USER:PASSWORD)"
	case "3D000":
		return "createdb makes the database, leadline queue migrate its tables"
	case "53300":
		return "the server has no connection left; raise its max_connections, or run fewer workers"
	}
	return "ask the server's administrator, or its log"
}

// reason is one line of an error that may have many.
func reason(err error) string {
	var p *pgconn.PgError
	if errors.As(err, &p) {
		return p.Message
	}
	lines := strings.Split(strings.TrimSpace(err.Error()), "\n")
	return strings.TrimSpace(lines[len(lines)-1])
}

// checkPasswords refuses a password file that others can read, as libpq does
// (PostgreSQL's manual, "The Password File"). An address with a password needs
// none.
func checkPasswords(where string) error {
	u, err := url.Parse(where)
	if err != nil {
		return nil // the address is refused by who reads it
	}
	if _, given := u.User.Password(); given || os.Getenv("PGPASSWORD") != "" {
		return nil
	}
	path := os.Getenv("PGPASSFILE")
	if path == "" {
		home, err := os.UserHomeDir()
		if err != nil {
			return nil
		}
		path = filepath.Join(home, ".pgpass")
	}
	st, err := os.Stat(path)
	switch {
	case errors.Is(err, fs.ErrNotExist), err == nil && (st.Mode().Perm()&0o077 == 0 || filepath.Separator == '\\'):
		return nil
	case err != nil:
		return fmt.Errorf("looking for a password: %w", err)
	}
	return &OptionError{fmt.Sprintf("the password file %s is open to others (mode %04o)", path, st.Mode().Perm()), "chmod 600 " + path}
}
