package jobs

import (
	"bufio"
	"cmp"
	"context"
	"flag"
	"fmt"
	"os"
	"os/exec"
	"os/user"
	"strconv"
	"strings"
	"syscall"
	"testing"
	"time"
)

// unprivileged gives a folder to the user that runs the server: PostgreSQL
// refuses to run as root.
func unprivileged(dir string) error {
	id, ok := other()
	if !ok {
		return nil
	}
	return os.Chown(dir, int(id.Uid), int(id.Gid))
}

// other is the user postgres, whom Debian's package makes, where this is root.
func other() (*syscall.Credential, bool) {
	if os.Geteuid() != 0 {
		return nil, false
	}
	u, err := user.Lookup("postgres")
	if err != nil {
		return nil, false
	}
	uid, _ := strconv.ParseUint(u.Uid, 10, 32)
	gid, _ := strconv.ParseUint(u.Gid, 10, 32)
	return &syscall.Credential{Uid: uint32(uid), Gid: uint32(gid)}, true
}

// lower makes a command run as that user, and end with this process.
func lower(c *exec.Cmd) {
	c.SysProcAttr = &syscall.SysProcAttr{Pdeathsig: syscall.SIGQUIT}
	if id, ok := other(); ok {
		c.SysProcAttr.Credential = id
	}
}

// Environment of a worker process; see child.
const (
	childWhere = "LEADLINE_TEST_QUEUE"
	childHang  = "LEADLINE_TEST_HANG"
	childQuick = "LEADLINE_TEST_QUICK"
	childSlow  = "LEADLINE_TEST_SLOW"
	childHold  = "LEADLINE_TEST_HOLD"
	childName  = "LEADLINE_TEST_NAME"
)

// TestMain is also the main function of the worker processes.
func TestMain(m *testing.M) {
	if where := os.Getenv(childWhere); where != "" {
		if err := child(where); err != nil {
			fmt.Fprintln(os.Stderr, err)
			os.Exit(1)
		}
		os.Exit(0)
	}
	flag.Parse()
	if err := flag.Set("test.parallel", "8"); err != nil { // these tests wait more than they compute
		panic(err)
	}
	code := m.Run()
	for _, s := range serversInUse {
		if err := s.stop(); err != nil {
			fmt.Fprintln(os.Stderr, "stopping postgres:", err)
		}
		os.RemoveAll(s.dir)
	}
	os.Exit(code)
}

// child works, naming each task as it begins; it hangs in one tile, takes its
// time over each, or stops itself inside a transaction.
func child(where string) error {
	ctx := context.Background()
	q, err := Open(ctx, where, Options{})
	if err != nil {
		return err
	}
	defer q.Close()
	if os.Getenv(childQuick) != "" {
		q.time = quick
	}
	hang, slow := os.Getenv(childHang), time.Duration(0)
	if s := os.Getenv(childSlow); s != "" {
		if slow, err = time.ParseDuration(s); err != nil {
			return err
		}
	}
	name := cmp.Or(os.Getenv(childName), "child")
	return q.Work(ctx, WorkOptions{Slots: 1, Drain: true, Name: name, before: func(ctx context.Context, k ticket) {
		fmt.Println("begin", k.Index)
		if fmt.Sprint(k.Index) == os.Getenv(childHold) {
			err := q.change(ctx, k.Print, func(tx, *order) error {
				fmt.Println("holding")
				defer time.Sleep(100 * time.Millisecond) // the signal reaches this thread a little later
				return syscall.Kill(os.Getpid(), syscall.SIGSTOP)
			})
			fmt.Println("held", err == nil)
		}
		if fmt.Sprint(k.Index) == hang {
			<-ctx.Done()
			fmt.Println("stopped", k.Index)
		}
		time.Sleep(slow)
	}})
}

// process is a worker process.
type process struct {
	t     testing.TB
	cmd   *exec.Cmd
	lines *bufio.Scanner
}

// spawn starts a worker process.
func spawn(t testing.TB, d database, env ...string) *process {
	t.Helper()
	self, err := os.Executable()
	if err != nil {
		t.Fatal(err)
	}
	return run(t, exec.Command(self), append(env, childWhere+"="+d.where)...)
}

// run starts a command that ends in a worker process.
func run(t testing.TB, c *exec.Cmd, env ...string) *process {
	t.Helper()
	c.Env = append(os.Environ(), env...)
	c.Stderr = os.Stderr
	c.SysProcAttr = &syscall.SysProcAttr{Pdeathsig: syscall.SIGKILL}
	out, err := c.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := c.Start(); err != nil {
		t.Fatal(err)
	}
	p := &process{t, c, bufio.NewScanner(out)}
	t.Cleanup(func() { p.signal(syscall.SIGKILL); _ = c.Wait() })
	return p
}

// says waits for a line.
func (p *process) says(want string) {
	p.t.Helper()
	for p.lines.Scan() {
		if p.lines.Text() == want {
			return
		}
	}
	p.t.Fatalf("the worker never said %q", want)
}

// stopped waits until the process has been stopped: proc(5), field 3.
func (p *process) stopped() {
	p.t.Helper()
	for range 500 {
		b, err := os.ReadFile(fmt.Sprintf("/proc/%d/stat", p.cmd.Process.Pid))
		if err != nil {
			p.t.Fatal(err)
		}
		if _, rest, ok := strings.Cut(string(b), ") "); ok && strings.HasPrefix(rest, "T") {
			return
		}
		time.Sleep(10 * time.Millisecond)
	}
	p.t.Fatal("the worker never stopped")
}

// saysAny waits for a line, whatever it is.
func (p *process) saysAny() {
	p.t.Helper()
	if !p.lines.Scan() {
		p.t.Fatal("the worker said nothing")
	}
}

func (p *process) signal(s syscall.Signal) { _ = p.cmd.Process.Signal(s) } // it may have ended
