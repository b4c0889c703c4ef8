package parts

import (
	"context"
	"os"
	"path/filepath"
	"testing"

	"leadline/render"
	"leadline/render/frame"
)

// The frames of these tests: all of the set, and its tip at a depth of 400
// digits, whose reference orbit and extended range the parts must share.
const (
	whole = `"re":"-0.6","im":"0"},"height":"2.6"},"iteration":{"limit":600}`
	deep  = `"re":"-2","im":"0"},"height":"4e-400"},"iteration":{"limit":3000}`
)

// testFrame is a frame of 48 x 32 pixels and 3 of bleed.
func testFrame(t testing.TB, where string) *frame.Frame {
	t.Helper()
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},"view":{"centre":{` + where +
		`,"sampling":{"least":2,"most":4},"sheet":{"width":"48px","height":"32px","bleed":"3px"}}`))
	if err != nil {
		t.Fatal(err)
	}
	return f
}

// task is a part of a test's print in dir.
func task(dir string, i, n int) Task {
	return Task{Options: render.Options{Workers: 2}, Dir: dir, Which: Which{i, n}, Name: "tide.png", Scale: 1, Audit: 8}
}

// mustRender renders a part.
func mustRender(t testing.TB, f *frame.Frame, task Task) *Done {
	t.Helper()
	d, err := Render(context.Background(), f, task)
	if err != nil {
		t.Fatal(err)
	}
	return d
}

// fill renders all n parts of a frame's print.
func fill(t testing.TB, f *frame.Frame, dir string, n int) {
	t.Helper()
	for i := n; i >= 1; i-- { // any order will do
		mustRender(t, f, task(dir, i, n))
	}
}

// joined joins dir into out.
func joined(t testing.TB, dir, out string) (*render.Result, error) {
	t.Helper()
	return Join(context.Background(), dir, JoinOptions{Out: out, Audit: -1})
}

// files is every file of a folder, hidden ones included.
func files(t testing.TB, dir string) map[string]string {
	t.Helper()
	entries, err := os.ReadDir(dir)
	if err != nil {
		t.Fatal(err)
	}
	all := map[string]string{}
	for _, e := range entries {
		all[e.Name()] = string(must(os.ReadFile(filepath.Join(dir, e.Name())))(t))
	}
	return all
}

// must is for results that cannot fail in a test.
func must[T any](v T, err error) func(testing.TB) T {
	return func(t testing.TB) T {
		t.Helper()
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
}
