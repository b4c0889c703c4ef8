package board

import (
	"context"
	"net/http"
	"net/http/httptest"
	"os/exec"
	"regexp"
	"strings"
	"testing"
	"time"

	"leadline/jobs"
)

// TestBrowser opens the board in a real browser, which enforces the policy and
// runs the script: what changes in the queue appears without loading the page
// again, a hostile title runs nothing, and the token leaves the address.
func TestBrowser(t *testing.T) {
	t.Parallel()
	chromium, err := exec.LookPath("chromium")
	switch {
	case err != nil:
		t.Skip("package chromium is not installed")
	case testing.Short():
		t.Skip("starts a browser")
	}
	f := &fake{prints: []jobs.Print{rendering(7, `<img src=x onerror=document.title="broken">`), rendering(8, "Wreck")}, tiles: 4}
	later := []jobs.Print{rendering(9, "Skerry"), f.prints[0]}
	later[1].State = jobs.Assembling
	loads := make(chan string, 1000)
	h := (&guard{pass: newPass(testToken), local: true, port: "0"}).around(newPages(f, nil, discard))
	s := httptest.NewServer(http.HandlerFunc(func(w http.ResponseWriter, r *http.Request) {
		if loads <- r.URL.String() + " " + r.Header.Get("Sec-Fetch-Dest"); r.Header.Get("Sec-Fetch-Dest") == "empty" {
			f.set(func() { f.tiles, f.prints = 9, later }) // what the script's own requests find
			time.Sleep(sightAge)                           // the server's look at the queue grows old
		}
		h.ServeHTTP(w, r)
	}))
	t.Cleanup(s.Close)
	ctx, cancel := context.WithTimeout(t.Context(), time.Minute)
	defer cancel()
	dom, err := exec.CommandContext(ctx, chromium, "--headless", "--no-sandbox", "--disable-gpu", "--disable-dev-shm-usage", "--no-first-run",
		"--disable-background-networking", "--user-data-dir="+t.TempDir(), "--virtual-time-budget=5000", "--dump-dom", s.URL+"/?token="+testToken).Output()
	if err != nil {
		t.Fatal(err)
	}
	s.Close()
	close(loads)
	var documents, looks []string
	for l := range loads {
		switch path, kind, _ := strings.Cut(l, " "); kind {
		case "document":
			documents = append(documents, path)
		case "empty":
			looks = append(looks, path)
		}
	}
	if len(documents) != 2 || documents[1] != "/" || len(looks) < 1 || looks[0] != "/" {
		t.Errorf("loaded %v, looked at %v", documents, looks)
	}
	page := string(dom)
	for _, want := range []string{"Skerry", `class="state assembling"`, `&lt;img src=x onerror=`} {
		if !strings.Contains(page, want) {
			t.Errorf("the page lacks %q:\n%s", want, page)
		}
	}
	if strings.Contains(page, "Wreck") || strings.Contains(page, "<title>broken") || strings.Contains(page, testToken) {
		t.Errorf("the page is\n%s", page)
	}
	if ids := regexp.MustCompile(`id="print-\d+"`).FindAllString(page, -1); len(ids) != 2 || ids[0] != `id="print-9"` {
		t.Errorf("prints %v", ids)
	}
}
