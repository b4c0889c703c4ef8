//go:build unix

package main

import (
	"bufio"
	"context"
	"io"
	"net/http"
	"net/http/cookiejar"
	"net/url"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"syscall"
	"testing"
	"time"
)

// boardProcess is a board under way.
type boardProcess struct {
	cmd   *exec.Cmd
	first string // line of standard output
	out   *bufio.Reader
	errs  *strings.Builder
}

// startBoard runs the command and waits for its address.
func startBoard(t *testing.T, dir string, args ...string) *boardProcess {
	t.Helper()
	b := &boardProcess{errs: &strings.Builder{}}
	b.cmd = exec.Command(executable(t), append([]string{"board", "--queue", "sqlite:queue.db"}, args...)...)
	b.cmd.Dir, b.cmd.Stderr = dir, b.errs
	pipe, err := b.cmd.StdoutPipe()
	if err != nil {
		t.Fatal(err)
	}
	if err := b.cmd.Start(); err != nil {
		t.Fatal(err)
	}
	late := time.AfterFunc(patience, func() { b.cmd.Process.Kill() })
	t.Cleanup(func() { late.Stop(); b.cmd.Process.Kill() })
	b.out = bufio.NewReader(pipe)
	if b.first, err = b.out.ReadString('\n'); err != nil {
		b.cmd.Wait() // its error is in errs
		t.Fatalf("no address: %v\n%s", err, b.errs)
	}
	b.first = strings.TrimSuffix(b.first, "\n")
	return b
}

// end sends a signal and waits; it returns the exit code and what was printed
// behind the address.
func (b *boardProcess) end(t *testing.T, s os.Signal) (code int, rest string) {
	t.Helper()
	if err := b.cmd.Process.Signal(s); err != nil {
		t.Fatal(err)
	}
	text, err := io.ReadAll(b.out)
	if err != nil {
		t.Fatal(err)
	}
	b.cmd.Wait() // its error is the code
	return b.cmd.ProcessState.ExitCode(), string(text)
}

// TestBoard opens the printed address as a browser would, looks at a queued
// print, and ends the board politely: that is its normal end.
func TestBoard(t *testing.T) {
	t.Parallel()
	for _, s := range []syscall.Signal{syscall.SIGINT, syscall.SIGTERM} {
		t.Run(s.String(), func(t *testing.T) {
			t.Parallel()
			dir := t.TempDir()
			command(t, dir, "queue", "add", testdata(t, "small.frame.json"), "--queue", "sqlite:queue.db", "-o", "tide.png")
			b := startBoard(t, dir, "--listen", "127.0.0.1:0")
			u, err := url.Parse(b.first)
			if err != nil || u.Hostname() != "127.0.0.1" || len(u.Query().Get("token")) < 26 {
				t.Fatalf("address %q, %v", b.first, err)
			}
			jar, err := cookiejar.New(nil)
			if err != nil {
				t.Fatal(err)
			}
			browser := &http.Client{Jar: jar, Timeout: 20 * time.Second}
			get := func(url string) (*http.Response, string) {
				t.Helper()
				a, err := browser.Get(url)
				if err != nil {
					t.Fatal(err)
				}
				defer a.Body.Close()
				text, err := io.ReadAll(a.Body)
				if err != nil {
					t.Fatal(err)
				}
				return a, string(text)
			}
			home := "http://" + u.Host + "/"
			if a, _ := get(home); a.StatusCode != http.StatusUnauthorized {
				t.Errorf("without the token: %s", a.Status)
			}
			if a, page := get(b.first); a.StatusCode != http.StatusOK || a.Request.URL.String() != home || !strings.Contains(page, "tide.png") {
				t.Errorf("the address leads to %s, %s", a.Request.URL, a.Status)
			}
			if a, page := get(home + "river/"); a.StatusCode != http.StatusOK || !strings.Contains(page, "/river/api") {
				t.Errorf("River's page: %s", a.Status)
			}
			if code, rest := b.end(t, s); code != exitDone || rest != "" || strings.Contains(b.errs.String(), "error") {
				t.Errorf("exit code %d, %q\n%s", code, rest, b.errs)
			}
		})
	}
}

// TestBoardOverTLS gives the whole to openssl and curl: a certificate that
// openssl made, a token of the user's, and curl's own view of the cookies.
func TestBoardOverTLS(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	certificate, key := filepath.Join(dir, "board.pem"), filepath.Join(dir, "board.key")
	tool(t, "openssl", "openssl", "req", "-x509", "-newkey", "ec", "-pkeyopt", "ec_paramgen_curve:P-256", "-nodes", "-days", "2",
		"-subj", "/CN=localhost", "-addext", "subjectAltName=DNS:localhost", "-keyout", key, "-out", certificate)
	const token = "0123456789abcdef0123456789abcdef"
	if err := os.WriteFile(filepath.Join(dir, "board.token"), []byte(token+"\n"), 0o600); err != nil {
		t.Fatal(err)
	}
	b := startBoard(t, dir, "--listen", "0.0.0.0:0", "--certificate", certificate, "--key", key, "--token-file", "board.token")
	u, err := url.Parse(b.first)
	if err != nil || u.Scheme != "https" || strings.Contains(b.first, token) {
		t.Fatalf("address %q, %v", b.first, err)
	}
	at := "https://localhost:" + u.Port()
	curl := func(args ...string) string {
		t.Helper()
		return tool(t, "curl", "curl", append([]string{"-sS", "--cacert", certificate, "--noproxy", "*", "--max-time", "20"}, args...)...)
	}
	if out := curl("-o", os.DevNull, "-w", "%{http_code}", at+"/"); out != "401" {
		t.Errorf("without the token: %s", out)
	}
	if out := curl("-H", "Authorization: Bearer "+token, at+"/prints.json"); strings.TrimSpace(out) != `{"prints":[],"workers":[]}` {
		t.Errorf("with the token: %s", out)
	}
	cookies := filepath.Join(dir, "cookies")
	out := curl("-L", "-c", cookies, "-w", "\n%{url_effective}", "--data-urlencode", "token="+token, at+"/enter")
	if !strings.Contains(out, "The queue is empty") || !strings.HasSuffix(out, at+"/") {
		t.Errorf("by the form:\n%s", out)
	}
	jar, err := os.ReadFile(cookies)
	if err != nil || !strings.Contains(string(jar), "#HttpOnly_localhost\tFALSE\t/\tTRUE\t0\t__Host-leadline-") || strings.Contains(string(jar), token) {
		t.Errorf("curl keeps %v\n%s", err, jar)
	}
	if code, _ := b.end(t, os.Interrupt); code != exitDone {
		t.Errorf("exit code %d\n%s", code, b.errs)
	}
}

// TestBoardPortTaken says that a port is in use, and what to do.
func TestBoardPortTaken(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	b := startBoard(t, dir, "--listen", "127.0.0.1:0")
	u, err := url.Parse(b.first)
	if err != nil {
		t.Fatal(err)
	}
	var out, errs strings.Builder
	code := run(context.Background(), []string{"board", "--queue", "sqlite:" + filepath.Join(dir, "queue.db"), "--listen", u.Host}, &out, &errs)
	if code != exitFailed || out.Len() > 0 || !strings.Contains(errs.String(), "in use") || !strings.Contains(errs.String(), "takes any free port") {
		t.Errorf("code %d: %s%s", code, out.String(), errs.String())
	}
	if code, _ := b.end(t, os.Interrupt); code != exitDone {
		t.Errorf("exit code %d", code)
	}
}
