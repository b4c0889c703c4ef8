package main

import (
	"bytes"
	"encoding/json"
	"errors"
	"image"
	"io"
	"maps"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"slices"
	"strconv"
	"strings"

	"github.com/rogpeppe/go-internal/testscript"

	"leadline/render/printfile"
)

// cmdCode is "code N COMMAND …": the command ends with exit code N.
func cmdCode(ts *testscript.TestScript, neg bool, args []string) {
	if neg || len(args) < 2 {
		ts.Fatalf("usage: code N COMMAND [ARG …]")
	}
	err := ts.Exec(args[1], args[2:]...)
	got := 0
	var exit *exec.ExitError
	if errors.As(err, &exit) {
		got = exit.ExitCode()
	} else {
		ts.Check(err)
	}
	if strconv.Itoa(got) != args[0] {
		ts.Fatalf("exit code %d, not %s", got, args[0])
	}
}

// cmdAlter is "alter FILE PATTERN NEW": the first match becomes NEW.
func cmdAlter(ts *testscript.TestScript, neg bool, args []string) {
	re, err := regexp.Compile(args[1])
	ts.Check(err)
	old := ts.ReadFile(args[0])
	at := re.FindStringIndex(old)
	if neg || at == nil {
		ts.Fatalf("%s does not hold %q", args[0], args[1])
	}
	ts.Check(os.WriteFile(ts.MkAbs(args[0]), []byte(old[:at[0]]+args[2]+old[at[1]:]), 0o666))
}

// cmdShorten is "shorten FILE N": N bytes of the end go.
func cmdShorten(ts *testscript.TestScript, _ bool, args []string) {
	n, err := strconv.ParseInt(args[1], 10, 64)
	ts.Check(err)
	st, err := os.Stat(ts.MkAbs(args[0]))
	ts.Check(err)
	ts.Check(os.Truncate(ts.MkAbs(args[0]), st.Size()-n))
}

// cmdRepixel is "repixel FILE X Y": one bit of that pixel's blue changes, in an
// otherwise sound file.
func cmdRepixel(ts *testscript.TestScript, _ bool, args []string) {
	x, err := strconv.Atoi(args[1])
	ts.Check(err)
	y, err := strconv.Atoi(args[2])
	ts.Check(err)
	p, err := readPicture(ts.MkAbs(args[0]))
	ts.Check(err)
	p.rows[(y*p.info.Width+x)*6+5] ^= 1
	ts.Check(p.write(ts.MkAbs(args[0])))
}

// cmdStrip is "strip FILE": its texts go, its pixels stay.
func cmdStrip(ts *testscript.TestScript, _ bool, args []string) {
	p, err := readPicture(ts.MkAbs(args[0]))
	ts.Check(err)
	p.info.Texts, p.info.XMP = nil, nil
	ts.Check(p.write(ts.MkAbs(args[0])))
}

// cmdFields is "fields FILE KEY …": each line of FILE, at least one, is a JSON
// object with these keys and no others.
func cmdFields(ts *testscript.TestScript, _ bool, args []string) {
	text := strings.TrimSuffix(ts.ReadFile(args[0]), "\n")
	want := slices.Sorted(slices.Values(args[1:]))
	for line := range strings.SplitSeq(text, "\n") {
		var v map[string]json.RawMessage
		if err := json.Unmarshal([]byte(line), &v); err != nil {
			ts.Fatalf("not a line of JSON: %v: %q", err, line)
		}
		if got := slices.Sorted(maps.Keys(v)); !slices.Equal(got, want) {
			ts.Fatalf("keys %v, not %v", got, want)
		}
	}
}

// cmdPartOf is "part-of SMALL BIG X Y": SMALL's pixels are BIG's from X, Y on.
func cmdPartOf(ts *testscript.TestScript, _ bool, args []string) {
	x, err := strconv.Atoi(args[2])
	ts.Check(err)
	y, err := strconv.Atoi(args[3])
	ts.Check(err)
	part, err := readPicture(ts.MkAbs(args[0]))
	ts.Check(err)
	whole, err := readPicture(ts.MkAbs(args[1]))
	ts.Check(err)
	if !bytes.Equal(part.rows, whole.crop(image.Rect(x, y, x+part.info.Width, y+part.info.Height))) {
		ts.Fatalf("the pixels of %s are not those of %s at %d,%d", args[0], args[1], x, y)
	}
}

// cmdOnly is "only FOLDER NAME …": the folder holds these files and no others,
// hidden ones included.
func cmdOnly(ts *testscript.TestScript, _ bool, args []string) {
	entries, err := os.ReadDir(ts.MkAbs(args[0]))
	ts.Check(err)
	var got []string
	for _, e := range entries {
		got = append(got, filepath.Base(e.Name()))
	}
	if want := slices.Sorted(slices.Values(args[1:])); !slices.Equal(got, want) {
		ts.Fatalf("%s holds %v, not %v", args[0], got, want)
	}
}

// picture is a print in memory.
type picture struct {
	info printfile.Info
	rows []byte
}

func readPicture(path string) (*picture, error) {
	r, err := printfile.Open(path)
	if err != nil {
		return nil, err
	}
	defer r.Close()
	p := &picture{info: r.Info()}
	p.rows = make([]byte, p.info.Width*p.info.Height*6)
	for at := 0; at < len(p.rows); {
		n, err := r.ReadRows(p.rows[at:])
		at += n * p.info.Width * 6
		if err != nil && err != io.EOF || n == 0 {
			return nil, err
		}
	}
	return p, nil
}

func (p *picture) write(path string) error {
	w, err := printfile.Create(path, p.info, 1)
	if err != nil {
		return err
	}
	defer w.Abort()
	if err := w.WriteRows(p.rows); err != nil {
		return err
	}
	_, err = w.Commit()
	return err
}

// crop is the bytes of a rectangle.
func (p *picture) crop(r image.Rectangle) []byte {
	var b []byte
	for y := r.Min.Y; y < r.Max.Y; y++ {
		b = append(b, p.rows[(y*p.info.Width+r.Min.X)*6:(y*p.info.Width+r.Max.X)*6]...)
	}
	return b
}
