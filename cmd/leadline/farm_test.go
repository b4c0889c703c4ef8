//go:build linux

package main

import (
	"fmt"
	"net"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"syscall"
	"testing"
	"time"
)

// cluster is a Slurm of one node on the loopback interface.
type cluster struct {
	t   *testing.T
	dir string // of its state, and where its jobs run
	env []string
}

// slurmConf has what slurm.conf(5) calls for and nothing that needs a real
// machine: no accounting, no cgroups, eight CPUs whether they are there or not.
const slurmConf = `ClusterName=loop
SlurmctldHost=%[1]s(127.0.0.1)
SlurmctldPort=%[3]d
SlurmdPort=%[4]d
SlurmUser=root
SlurmdUser=root
AuthType=auth/munge
AuthInfo=socket=%[2]s/munge.sock
CredType=cred/munge
StateSaveLocation=%[2]s/state
SlurmdSpoolDir=%[2]s/spool
SlurmctldPidFile=%[2]s/slurmctld.pid
SlurmdPidFile=%[2]s/slurmd.pid
ProctrackType=proctrack/pgid
TaskPlugin=task/none
JobAcctGatherType=jobacct_gather/none
AccountingStorageType=accounting_storage/none
SelectType=select/cons_tres
SelectTypeParameters=CR_CPU
SchedulerParameters=batch_sched_delay=0,bf_interval=1
MpiDefault=none
SlurmdParameters=config_overrides
NodeName=%[1]s NodeAddr=127.0.0.1 CPUs=8 RealMemory=1000 State=UNKNOWN
PartitionName=all Nodes=%[1]s Default=YES State=UP
`

// startCluster starts one, or skips and says what is missing.
func startCluster(t *testing.T) *cluster {
	t.Helper()
	if testing.Short() {
		t.Skip("left out by -short: it starts a scheduler")
	}
	if os.Geteuid() != 0 {
		t.Skip("root is missing: only it can start a Slurm of its own")
	}
	for program, pkg := range map[string]string{"munged": "munge", "slurmctld": "slurmctld", "slurmd": "slurmd", "sbatch": "slurm-client"} {
		if _, err := exec.LookPath(program); err != nil {
			t.Skipf("%s is missing (Debian package %s)", program, pkg)
		}
	}
	dir, err := os.MkdirTemp("", "farm") // short: a socket's path has 107 characters (unix(7))
	if err != nil {
		t.Fatal(err)
	}
	t.Cleanup(func() { os.RemoveAll(dir) })
	host, err := os.Hostname()
	if err != nil {
		t.Fatal(err)
	}
	host, _, _ = strings.Cut(host, ".")
	c := &cluster{t: t, dir: dir}
	c.file("munge.key", strings.Repeat("a key for one test alone. ", 50), 0o400)
	c.file("slurm.conf", fmt.Sprintf(slurmConf, host, dir, freePort(t), freePort(t)), 0o600)
	for _, d := range []string{"state", "spool"} {
		if err := os.Mkdir(filepath.Join(dir, d), 0o700); err != nil {
			t.Fatal(err)
		}
	}
	c.env = slices.DeleteFunc(os.Environ(), func(v string) bool { return strings.HasPrefix(v, "SLURM_") || strings.HasPrefix(v, "SBATCH_") })
	c.env = append(c.env, "SLURM_CONF="+dir+"/slurm.conf", "PATH="+filepath.Dir(executable(t))+":"+os.Getenv("PATH"))
	c.daemon("munged", "--foreground", "--force", "--num-threads=1", "--socket="+dir+"/munge.sock", "--key-file="+dir+"/munge.key",
		"--pid-file="+dir+"/munged.pid", "--log-file="+dir+"/munged.log", "--seed-file="+dir+"/munged.seed")
	c.await("munged", func() bool { _, err := os.Stat(dir + "/munge.sock"); return err == nil })
	c.daemon("slurmctld", "-D")
	c.daemon("slurmd", "-D")
	c.await("the node", func() bool { return strings.Contains(c.run("sinfo", "-h", "-o", "%T"), "idle") })
	return c
}

func (c *cluster) file(name, text string, mode os.FileMode) {
	c.t.Helper()
	if err := os.WriteFile(filepath.Join(c.dir, name), []byte(text), mode); err != nil {
		c.t.Fatal(err)
	}
}

// freePort is a port that nobody listens on now.
func freePort(t *testing.T) int {
	t.Helper()
	l, err := net.Listen("tcp", "127.0.0.1:0")
	if err != nil {
		t.Fatal(err)
	}
	defer l.Close()
	return l.Addr().(*net.TCPAddr).Port
}

// daemon starts a daemon that ends with the test.
func (c *cluster) daemon(name string, args ...string) {
	c.t.Helper()
	cmd := exec.Command(name, args...)
	log, err := os.Create(filepath.Join(c.dir, name+".out"))
	if err != nil {
		c.t.Fatal(err)
	}
	cmd.Dir, cmd.Env, cmd.Stdout, cmd.Stderr = c.dir, c.env, log, log
	if err := cmd.Start(); err != nil {
		c.t.Fatal(err)
	}
	c.t.Cleanup(func() {
		cmd.Process.Signal(syscall.SIGTERM)
		late := time.AfterFunc(10*time.Second, func() { cmd.Process.Kill() })
		cmd.Wait()
		late.Stop()
		log.Close()
		if text, err := os.ReadFile(log.Name()); err == nil && c.t.Failed() {
			c.t.Logf("%s said:\n%s", name, text)
		}
	})
}

// run runs a command to its end and returns what it says.
func (c *cluster) run(name string, args ...string) string {
	cmd := exec.Command(name, args...)
	cmd.Dir, cmd.Env = c.dir, c.env
	out, _ := cmd.CombinedOutput() // judged by what it says
	return string(out)
}

// await waits until something is so.
func (c *cluster) await(what string, so func() bool) {
	c.t.Helper()
	for end := time.Now().Add(patience); !so(); time.Sleep(200 * time.Millisecond) {
		if time.Now().After(end) {
			c.t.Fatalf("waited in vain for %s\n%s", what, c.run("squeue"))
		}
	}
}

// submit runs the example script and waits until the queue is empty.
func (c *cluster) submit(settings ...string) {
	c.t.Helper()
	script, err := filepath.Abs(filepath.Join(farm, "slurm.sh"))
	if err != nil {
		c.t.Fatal(err)
	}
	if out := c.run("env", append(settings, "sh", script)...); !strings.Contains(out, "Submitted batch job") {
		c.t.Fatalf("submitting: %s", out)
	}
	c.await("an empty queue", func() bool { return c.run("squeue", "-h") == "" })
}

// TestSlurmScript runs the example script under a real Slurm: an array and its
// join, some parts alone, and a wrong call, which nothing is made of.
func TestSlurmScript(t *testing.T) {
	t.Parallel()
	c := startCluster(t)
	frame, err := os.ReadFile("testdata/small.frame.json")
	if err != nil {
		t.Fatal(err)
	}
	c.file("tide.frame.json", string(frame), 0o600)
	command(t, c.dir, "render", "tide.frame.json", "--scale", "1/2", "--out", "whole.png")
	whole, err := os.ReadFile(filepath.Join(c.dir, "whole.png"))
	if err != nil {
		t.Fatal(err)
	}
	is := func(name string) {
		t.Helper()
		if b, err := os.ReadFile(filepath.Join(c.dir, name)); err != nil || string(b) != string(whole) {
			t.Errorf("%s is not what one process renders: %v\n%s", name, err, c.run("sh", "-c", "tail -n 5 *.log"))
		}
	}
	settings := []string{"FRAME=tide.frame.json", "DIR=" + c.dir + "/parts", "OPTIONS=--scale 1/2"}
	c.submit(append(settings, "PARTS=5")...)
	is("tide.png")
	command(t, c.dir, "verify", "tide.png")

	if err := os.Remove(filepath.Join(c.dir, "parts", "part-0002-of-0005")); err != nil {
		t.Fatal(err)
	}
	c.submit(append(settings, "PARTS=5", "ARRAY=2", "OUT=again.png")...)
	is("again.png")

	c.submit(append(settings, "PARTS=2", "OUT=never.png")...)
	if _, err := os.Stat(filepath.Join(c.dir, "never.png")); err == nil {
		t.Error("a join ran although no task succeeded")
	}
	if said := c.run("sh", "-c", "cat *.log"); strings.Count(said, "holds parts of another print: parts 5 there, 2 here") != 2 {
		t.Errorf("the tasks of a wrong call said:\n%s", said)
	}
}
