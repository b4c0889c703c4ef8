package jobs

import (
	"context"
	"fmt"
	"maps"
	"net"
	"slices"
	"strings"
	"time"

	"github.com/jackc/pgx/v5"
	"github.com/jackc/pgx/v5/pgxpool"
)

// How long a PostgreSQL server waits for a worker that has gone silent, by its
// own parameters: stopped inside a transaction such a worker would hold its
// print's row, and with it everybody who works on that print. An address may
// give others.
var serverPatience = map[string]string{
	"idle_in_transaction_session_timeout": "10s",
	"tcp_keepalives_idle":                 "20s",
	"tcp_keepalives_interval":             "5s",
	"tcp_keepalives_count":                "4",
}

// How long a worker waits for a server's host that has gone silent: 10 s until
// the first question, then one every 5 s, or unanswered data for silentHost.
// The system's own would take more than two hours, and fifteen minutes.
var keepAlive = net.KeepAliveConfig{Enable: true, Idle: 10 * time.Second, Interval: 5 * time.Second, Count: 4}

const silentHost = 30 * time.Second

// patience has both sides give up connections behind which nobody is.
func patience(c *pgxpool.Config) {
	d := net.Dialer{KeepAliveConfig: keepAlive, Control: limitSilence}
	c.ConnConfig.DialFunc = d.DialContext
	given := c.ConnConfig.RuntimeParams
	c.AfterConnect = func(ctx context.Context, conn *pgx.Conn) error {
		var b strings.Builder
		for _, name := range slices.Sorted(maps.Keys(serverPatience)) {
			if _, ok := given[name]; !ok {
				fmt.Fprintf(&b, "SET %s = '%s';", name, serverPatience[name])
			}
		}
		_, err := conn.PgConn().Exec(ctx, b.String()).ReadAll()
		return err
	}
}
