package jobs

import (
	"context"
	"errors"
	"fmt"
	"net"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"sync"
	"testing"
	"time"

	"github.com/jackc/pgx/v5"
)

// server is a PostgreSQL server of Debian's package, on loopback, in a folder
// of its own.
type server struct {
	bin, dir string
	port     int
	more     []string // arguments of the server
	under    []string // a command that runs it
	cmd      *exec.Cmd
}

var (
	errNoPostgres = errors.New("package postgresql is not installed")
	sharedServer  = sync.OnceValues(startServer)
	emptyCluster  = sync.OnceValues(makeCluster)
	serversInUse  []*server // for TestMain to stop
	databases     struct {
		sync.Mutex
		n int
	}
)

// startServer makes a cluster and runs it.
func startServer() (*server, error) {
	s, err := newServer()
	if err != nil {
		return nil, err
	}
	return s, s.start()
}

// newServer is a server on a copy of an empty cluster. By default nothing is
// made to last (-F).
func newServer() (*server, error) {
	from, err := emptyCluster()
	if err != nil {
		return nil, err
	}
	s, err := newFolder(from.bin)
	if err != nil {
		return nil, err
	}
	if out, err := exec.Command("cp", "-a", filepath.Join(from.dir, "data"), s.dir).CombinedOutput(); err != nil {
		return nil, fmt.Errorf("copying a cluster: %w: %s", err, out)
	}
	return s, nil
}

// newFolder is a server without a cluster. TestMain removes it.
func newFolder(bin string) (*server, error) {
	dir, err := os.MkdirTemp("", "leadline-pg")
	if err != nil {
		return nil, err
	}
	s := &server{bin: bin, dir: dir, more: []string{"-F"}}
	databases.Lock()
	defer databases.Unlock()
	serversInUse = append(serversInUse, s)
	return s, unprivileged(dir)
}

// makeCluster makes an empty cluster.
func makeCluster() (*server, error) {
	found, err := filepath.Glob("/usr/lib/postgresql/*/bin/initdb")
	if err != nil || len(found) == 0 {
		return nil, errNoPostgres
	}
	s, err := newFolder(filepath.Dir(found[len(found)-1]))
	if err != nil {
		return nil, err
	}
	init := exec.Command(filepath.Join(s.bin, "initdb"), "-D", filepath.Join(s.dir, "data"), "-U", "maker", "-A", "trust", "-N", "-E", "UTF8", "--locale=C")
	lower(init)
	init.Dir = s.dir
	if out, err := init.CombinedOutput(); err != nil {
		return nil, fmt.Errorf("initdb: %w: %s", err, out)
	}
	return s, nil
}

// start runs the server and waits until it answers.
func (s *server) start() error {
	if s.port == 0 {
		l, err := net.Listen("tcp", "127.0.0.1:0")
		if err != nil {
			return err
		}
		s.port = l.Addr().(*net.TCPAddr).Port
		l.Close()
	}
	line := append(slices.Clone(s.under), filepath.Join(s.bin, "postgres"), "-D", filepath.Join(s.dir, "data"), "-h", "127.0.0.1",
		"-p", fmt.Sprint(s.port), "-k", s.dir, "-c", "max_connections=200")
	line = append(line, s.more...)
	s.cmd = exec.Command(line[0], line[1:]...)
	if s.under == nil {
		lower(s.cmd)
	}
	s.cmd.Dir = s.dir
	if err := s.cmd.Start(); err != nil {
		return err
	}
	var err error
	for range 200 {
		var c *pgx.Conn
		if c, err = pgx.Connect(context.Background(), s.local("postgres")); err == nil {
			return c.Close(context.Background())
		}
		time.Sleep(50 * time.Millisecond)
	}
	return err
}

// stop ends the server at once (SIGINT: a fast shutdown, by its manual).
func (s *server) stop() error {
	if s.cmd == nil {
		return nil
	}
	if err := s.cmd.Process.Signal(os.Interrupt); err != nil {
		return err
	}
	err := s.cmd.Wait()
	s.cmd = nil
	return err
}

func (s *server) url(database string) string {
	return fmt.Sprintf("postgres://maker@127.0.0.1:%d/%s?sslmode=disable", s.port, database)
}

// local is an address on this machine, whatever its network.
func (s *server) local(database string) string {
	return fmt.Sprintf("postgres:///%s?host=%s&port=%d&user=maker", database, s.dir, s.port)
}

// postgres is the server that tests share.
func postgres(t testing.TB) *server {
	t.Helper()
	s, err := sharedServer()
	if errors.Is(err, errNoPostgres) {
		t.Skip(err)
	}
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// freshPostgres is the address of an empty schema, or with own of an empty
// database.
func freshPostgres(t testing.TB, own bool) string {
	t.Helper()
	s := postgres(t)
	databases.Lock()
	databases.n++
	name := fmt.Sprintf("queue%d", databases.n)
	databases.Unlock()
	c, err := pgx.Connect(t.Context(), s.url("postgres"))
	if err != nil {
		t.Fatal(err)
	}
	defer c.Close(t.Context())
	if own {
		_, err = c.Exec(t.Context(), "CREATE DATABASE "+name)
	} else {
		_, err = c.Exec(t.Context(), "CREATE SCHEMA "+name)
	}
	if err != nil {
		t.Fatal(err)
	}
	if own {
		return s.url(name)
	}
	return s.url("postgres") + "&search_path=" + name
}
