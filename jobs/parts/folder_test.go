package parts

import (
	"context"
	"errors"
	"fmt"
	"image"
	"maps"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"sync"
	"testing"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/printfile"
)

// frameCrop is a part of a test frame, in its bleed too.
var frameCrop = image.Rect(-2, 5, 31, 30)

// TestNamesOfTheFolder: what is in it, and that a second run of a task finds
// its part and changes nothing.
func TestNamesOfTheFolder(t *testing.T) {
	dir, f := filepath.Join(t.TempDir(), "new", "folder"), testFrame(t, deep)
	fill(t, f, dir, 2)
	before := files(t, dir)
	want := []string{"part-0001-of-0002", "part-0002-of-0002", "print.json", "shared"}
	if got := slices.Sorted(maps.Keys(before)); !slices.Equal(got, want) {
		t.Errorf("files %v", got)
	}
	k := task(dir, 1, 2)
	k.Progress = func(p render.Progress) { t.Errorf("a finished part computes: %+v", p) }
	d := mustRender(t, f, k)
	if d.Rendered || d.Bytes != int64(len(before["part-0001-of-0002"])) {
		t.Errorf("a finished part: %+v", d)
	}
	if !maps.Equal(before, files(t, dir)) {
		t.Error("a finished part was touched")
	}
}

// TestAnotherPrintIsRefused: every option that decides a pixel or the record.
func TestAnotherPrintIsRefused(t *testing.T) {
	dir, f := t.TempDir(), testFrame(t, whole)
	mustRender(t, f, task(dir, 1, 3))
	before := files(t, dir)
	for name, c := range map[string]struct {
		f      *frame.Frame
		change func(*Task)
		want   string
	}{
		"frame": {testFrame(t, deep), func(*Task) {}, "frame "},
		"n":     {f, func(k *Task) { k.Which = Which{1, 4} }, "parts 3 there, 4 here"},
		"scale": {f, func(k *Task) { k.Scale = 2 }, "scale 1/1 there, 1/2 here"},
		"crop":  {f, func(k *Task) { k.Crop = &frameCrop }, "pixels "},
		"audit": {f, func(k *Task) { k.Audit = 9 }, "audit 8 there, 9 here"},
	} {
		k := task(dir, 2, 3)
		c.change(&k)
		_, err := Render(context.Background(), c.f, k)
		var m *render.MismatchError
		if !errors.As(err, &m) || !strings.Contains(m.What, c.want) || m.Hint() == "" {
			t.Errorf("%s: %v", name, err)
		}
	}
	k := task(dir, 2, 3)
	k.Name = "another.png"
	delete(before, "part-0002-of-0003")
	if d := mustRender(t, f, k); !d.Rendered {
		t.Error("another name is no other print")
	}
	after := files(t, dir)
	delete(after, "part-0002-of-0003")
	if !maps.Equal(before, after) {
		t.Errorf("refusals changed the folder: %v", slices.Sorted(maps.Keys(after)))
	}
}

// TestAnotherReleaseIsRefused, by tasks and by the join.
func TestAnotherReleaseIsRefused(t *testing.T) {
	for name, change := range map[string]func(*Print){
		"release":  func(p *Print) { p.Release = "0.0.9" },
		"numerics": func(p *Print) { p.Numerics++ },
	} {
		dir, f := t.TempDir(), testFrame(t, whole)
		fill(t, f, dir, 1)
		p := must(readPrint(dir))(t)
		change(&p)
		write(t, dir, printName, string(p.marshal()))
		var m *render.MismatchError
		if _, err := Render(context.Background(), f, task(dir, 1, 1)); !errors.As(err, &m) || !strings.Contains(m.What, name) {
			t.Errorf("%s: a task says %v", name, err)
		}
		if _, err := joined(t, dir, filepath.Join(t.TempDir(), "a.png")); !errors.As(err, &m) || !strings.Contains(m.What, name) {
			t.Errorf("%s: the join says %v", name, err)
		}
	}
}

// TestMorePartsThanRows are refused before anything is made.
func TestMorePartsThanRows(t *testing.T) {
	dir := filepath.Join(t.TempDir(), "parts")
	_, err := Render(context.Background(), testFrame(t, whole), task(dir, 1, 39))
	var e *WhichError
	if !errors.As(err, &e) || !strings.Contains(e.Hint(), "38 rows") {
		t.Errorf("39 parts of 38 rows: %v", err)
	}
	if _, err := os.Stat(dir); !errors.Is(err, os.ErrNotExist) {
		t.Errorf("the folder was made: %v", err)
	}
}

// TestStrictPrint: print.json is read as it was written or not at all, and a
// stranger's is left alone.
func TestStrictPrint(t *testing.T) {
	good := string(must(newPrint(testFrame(t, whole), render.PrintOptions{Audit: 3}, "tide.png", 3))(t).marshal())
	if p, err := parsePrint([]byte(good)); err != nil || string(p.marshal()) != good {
		t.Fatalf("%v: %v", p, err)
	}
	for name, pair := range map[string][2]string{
		"empty":       {good, ""},
		"cut":         {good, good[:len(good)/2]},
		"another":     {Format, "leadline.parts/2"},
		"key":         {`"parts"`, `"more": 1, "parts"`},
		"twice":       {`"parts": 3`, `"parts": 3, "parts": 3`},
		"space":       {`"parts": 3`, `"parts":  3`},
		"end":         {good, good + "{}"},
		"no parts":    {`"parts": 3`, `"parts": 0`},
		"many parts":  {`"parts": 3`, `"parts": 39`},
		"no width":    {`"width": 54`, `"width": 0`},
		"huge":        {`"height": 38`, `"height": 99999999999`},
		"far":         {`"x": -3`, `"x": -99999999999`},
		"scale":       {`"scale": 1`, `"scale": 0`},
		"audit":       {`"audit": 3`, `"audit": -1`},
		"folder":      {"tide.png", "../tide.png"},
		"backslashes": {"tide.png", `..\\tide.png`},
		"no png":      {"tide.png", "tide"},
	} {
		if !strings.Contains(good, pair[0]) {
			t.Fatalf("%s changes nothing in %s", name, good)
		}
		bad := strings.Replace(good, pair[0], pair[1], 1)
		dir := t.TempDir()
		write(t, dir, printName, bad)
		var m *render.MismatchError
		if _, err := Render(context.Background(), testFrame(t, whole), task(dir, 1, 3)); !errors.As(err, &m) || m.Hint() == "" {
			t.Errorf("%s: a task says %v", name, err)
		}
		if _, err := joined(t, dir, filepath.Join(t.TempDir(), "a.png")); !errors.As(err, &m) {
			t.Errorf("%s: the join says %v", name, err)
		}
		if got := files(t, dir); len(got) != 1 || got[printName] != bad {
			t.Errorf("%s: the folder was touched: %v", name, got)
		}
	}
}

// TestFolderThatCannotBe: a disk's error is neither a mismatch nor work left.
func TestFolderThatCannotBe(t *testing.T) {
	file := filepath.Join(t.TempDir(), "file")
	if err := os.WriteFile(file, nil, 0o666); err != nil {
		t.Fatal(err)
	}
	_, err := Render(context.Background(), testFrame(t, whole), task(filepath.Join(file, "parts"), 1, 1))
	var w *printfile.WriteError
	if !errors.As(err, &w) || w.Hint() == "" {
		t.Errorf("%v", err)
	}
}

// TestRaceOfAllParts runs every task twice at once in an empty folder: they
// leave exactly what they leave one after the other.
func TestRaceOfAllParts(t *testing.T) {
	const n = 3
	f, one, many := testFrame(t, deep), t.TempDir(), t.TempDir()
	fill(t, f, one, n)
	var wg sync.WaitGroup
	fails := make([]error, 2*n)
	for i := range fails {
		wg.Go(func() { _, fails[i] = Render(context.Background(), f, task(many, i%n+1, n)) })
	}
	wg.Wait()
	if err := errors.Join(fails...); err != nil {
		t.Fatal(err)
	}
	if want, got := files(t, one), files(t, many); !maps.Equal(want, got) {
		t.Errorf("a race leaves %v, not the same as %v", slices.Sorted(maps.Keys(got)), slices.Sorted(maps.Keys(want)))
	}
}

// write replaces a file of the folder.
func write(t testing.TB, dir, name, text string) {
	t.Helper()
	if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
		t.Fatal(err)
	}
}

// TestCleanSparesStrangers removes our files, those of killed tasks too, and
// nothing else.
func TestCleanSparesStrangers(t *testing.T) {
	for _, strangers := range [][]string{nil, {"part-1", "shared.txt", ".part-0001-of-0002.part", "tide.png"}} {
		dir, f := t.TempDir(), testFrame(t, whole)
		fill(t, f, dir, 2)
		for i, name := range []string{"part-0001-of-0002", "shared", "print.json"} {
			write(t, dir, fmt.Sprintf(".%s.%016x.part", name, i), "killed")
		}
		for _, s := range strangers {
			write(t, dir, s, "not ours")
		}
		r, err := Join(context.Background(), dir, JoinOptions{Out: filepath.Join(t.TempDir(), "a.png"), Audit: -1, Clean: true})
		if err != nil || r.Width != 54 {
			t.Fatalf("%+v, %v", r, err)
		}
		entries, err := os.ReadDir(dir)
		if len(strangers) == 0 && !errors.Is(err, os.ErrNotExist) {
			t.Errorf("the empty folder stays: %v, %v", entries, err)
		}
		if len(entries) != len(strangers) {
			t.Errorf("there stay %v, not %v", entries, strangers)
		}
	}
}
