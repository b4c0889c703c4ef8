package jobs

import (
	"errors"
	"fmt"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
	"time"
)

// network is a bridge in a network namespace of its own, to which further
// namespaces are joined as machines are to a switch.
type network struct {
	t    *testing.T
	name string // what the namespaces' names begin with
}

// The addresses are of a block set apart for tests (RFC 2544, RFC 6890); the
// namespaces see nothing of the host's.
const (
	hubAddress = "198.18.0.1"
	subnet     = "198.18.0.0/24"
)

// ip runs a command of package iproute2.
func ip(args ...string) error {
	if out, err := exec.Command("ip", args...).CombinedOutput(); err != nil {
		return fmt.Errorf("ip %s: %w: %s", strings.Join(args, " "), err, out)
	}
	return nil
}

// newNetwork makes the hub, or skips.
func newNetwork(t *testing.T) *network {
	t.Helper()
	for tool, from := range map[string]string{"ip": "iproute2", "setpriv": "util-linux"} {
		if _, err := exec.LookPath(tool); err != nil {
			t.Skipf("package %s is not installed: %v", from, err)
		}
	}
	if os.Geteuid() != 0 {
		t.Skip("root is missing: only it can make network namespaces")
	}
	n := &network{t, fmt.Sprintf("leadline%d", os.Getpid())}
	if err := ip("netns", "add", n.hub()); err != nil {
		t.Skipf("the right to make network namespaces is missing: %v", err)
	}
	t.Cleanup(func() { n.remove(n.hub()) })
	n.must("-n", n.hub(), "link", "set", "lo", "up")
	if err := ip("-n", n.hub(), "link", "add", "switch", "type", "bridge"); err != nil {
		t.Skipf("bridges are missing from the kernel: %v", err)
	}
	n.must("-n", n.hub(), "addr", "add", hubAddress+"/24", "dev", "switch")
	n.must("-n", n.hub(), "link", "set", "switch", "up")
	return n
}

func (n *network) hub() string          { return n.name + "hub" }
func (n *network) machine(i int) string { return fmt.Sprintf("%sw%d", n.name, i) }
func (n *network) remove(space string)  { n.check(ip("netns", "del", space)) }
func (n *network) link(i int, to string) {
	n.must("-n", n.hub(), "link", "set", fmt.Sprintf("port%d", i), to)
}

func (n *network) check(err error) {
	if err != nil {
		n.t.Error(err)
	}
}

func (n *network) must(args ...string) {
	n.t.Helper()
	if err := ip(args...); err != nil {
		n.t.Fatal(err)
	}
}

// join makes machine i and its link to the hub. Links go with their namespace.
func (n *network) join(i int) {
	n.t.Helper()
	space, port := n.machine(i), fmt.Sprintf("port%d", i)
	n.must("netns", "add", space)
	n.t.Cleanup(func() { n.remove(space) })
	n.must("-n", n.hub(), "link", "add", port, "type", "veth", "peer", "name", "eth0", "netns", space)
	n.must("-n", n.hub(), "link", "set", port, "master", "switch", "up")
	n.must("-n", space, "addr", "add", fmt.Sprintf("198.18.0.%d/24", i+2), "dev", "eth0")
	n.must("-n", space, "link", "set", "lo", "up")
	n.must("-n", space, "link", "set", "eth0", "up")
}

// server runs PostgreSQL in the hub, listening on the bridge.
func (n *network) server() *server {
	n.t.Helper()
	id, ok := other()
	if !ok {
		n.t.Skip("the user postgres is missing (Debian package postgresql)")
	}
	s, err := newServer()
	if errors.Is(err, errNoPostgres) {
		n.t.Skip(err)
	}
	if err != nil {
		n.t.Fatal(err)
	}
	hba, err := os.OpenFile(filepath.Join(s.dir, "data", "pg_hba.conf"), os.O_WRONLY|os.O_APPEND, 0)
	if err == nil {
		_, err = fmt.Fprintf(hba, "host all all %s trust\n", subnet)
		err = errors.Join(err, hba.Close())
	}
	if err != nil {
		n.t.Fatal(err)
	}
	s.under = []string{"ip", "netns", "exec", n.hub(), "setpriv", fmt.Sprintf("--reuid=%d", id.Uid), fmt.Sprintf("--regid=%d", id.Gid),
		"--clear-groups", "--pdeathsig", "QUIT", "--"}
	s.more = append(s.more, "-c", "listen_addresses="+hubAddress)
	if err := s.start(); err != nil {
		n.t.Fatal(err)
	}
	n.t.Cleanup(func() {
		if err := s.stop(); err != nil {
			n.t.Log(err) // its exit status after a fast shutdown
		}
	})
	return s
}

// spawn starts a worker process on machine i.
func (n *network) spawn(i int, s *server, env ...string) *process {
	n.t.Helper()
	self, err := os.Executable()
	if err != nil {
		n.t.Fatal(err)
	}
	where := fmt.Sprintf("postgres://maker@%s:%d/postgres?sslmode=disable&idle_in_transaction_session_timeout=1s", hubAddress, s.port)
	return run(n.t, exec.Command("ip", "netns", "exec", n.machine(i), self),
		append(env, childWhere+"="+where, childQuick+"=1", fmt.Sprintf("%s=machine %d", childName, i))...)
}

// TestCutOffWorker has three workers on three machines. The links of two, one
// with a tile in hand that takes for ever and one that is between tiles, go down
// for longer than their leases; the third does the tile meanwhile.
func TestCutOffWorker(t *testing.T) {
	if testing.Short() {
		t.Skip("left out by -short: it starts a server of its own, and machines")
	}
	t.Parallel()
	f, want := square(t)
	n := newNetwork(t)
	s := n.server()
	d := database{"postgres", s.local("postgres")}
	if err := Migrate(t.Context(), d.where); err != nil {
		t.Fatal(err)
	}
	q := d.open(t)
	id, err := q.Add(t.Context(), f, AddOptions{Out: filepath.Join(t.TempDir(), "a.png"), Tile: 16})
	if err != nil {
		t.Fatal(err)
	}
	for i := range 3 {
		n.join(i)
	}
	all := []*process{n.spawn(0, s, childHang+"=10")}
	all[0].says("begin 10") // and hangs in it until its lease is gone
	for i := 1; i < 3; i++ {
		all = append(all, n.spawn(i, s, childSlow+"=80ms"))
		all[i].saysAny()
	}
	n.link(0, "down")
	n.link(1, "down")
	down := time.Now()
	after := func() time.Duration {
		for {
			var state string
			if err := one(t.Context(), q.e.read(), `SELECT state FROM leadline_tile WHERE print = ? AND idx = 10`, []any{id}, &state); err != nil {
				t.Fatal(err)
			}
			if since := time.Since(down); state == "done" || since > 20*time.Second {
				return since
			}
			time.Sleep(20 * time.Millisecond)
		}
	}()
	time.Sleep(2*quick.silence - after)
	if p := show(t, q, id); p.State != Rendering || p.Workers != 1 {
		t.Errorf("while the links are down: %+v", p)
	}
	n.link(0, "up")
	n.link(1, "up")
	up := time.Now()
	all[0].says("stopped 10") // it has heard that its lease is gone
	t.Logf("done by another after %v, the worker knows %v after the link is back", after, time.Since(up))
	p := until(t, q, id, "done", inState(Done))
	once(t, q, p, want)
	for _, c := range all {
		for c.lines.Scan() {
		}
		if err := c.cmd.Wait(); err != nil {
			t.Error(err)
		}
	}
	if p.Rescued < 1 || p.Attempts < int64(p.Tiles)+2+p.Rescued { // on a busy machine others may be late with their beats
		t.Errorf("%d rescued, %d attempts", p.Rescued, p.Attempts)
	}
}
