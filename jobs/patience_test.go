package jobs

import (
	"strings"
	"testing"
)

// TestServerPatience asks the server what it was told, and leaves alone what
// the address says.
func TestServerPatience(t *testing.T) {
	t.Parallel()
	where := freshPostgres(t, true)
	if err := Migrate(t.Context(), where); err != nil {
		t.Fatal(err)
	}
	for more, want := range map[string]string{"": "10s", "&idle_in_transaction_session_timeout=7s": "7s"} {
		q := database{"postgres", where + more}.open(t)
		for name, value := range serverPatience {
			if strings.HasPrefix(name, "idle") {
				value = want
			}
			var s string
			if err := one(t.Context(), q.e.read(), `SELECT current_setting(?)`, []any{name}, &s); err != nil {
				t.Fatal(err)
			}
			if strings.TrimSuffix(s, "s") != strings.TrimSuffix(value, "s") {
				t.Errorf("%s is %s, not %s", name, s, value)
			}
		}
	}
}
