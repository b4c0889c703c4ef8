package parts

import (
	"bytes"
	"crypto/sha256"
	"encoding/hex"
	"encoding/json"
	"errors"
	"fmt"
	"image"
	"io"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/printfile"
)

// Format names the layout of a folder of parts, in its print.json.
const Format = "leadline.parts/1"

// printName and sharedName are the folder's files beside the parts.
const (
	printName  = "print.json"
	sharedName = "shared"
)

// maxPrint bounds print.json, in bytes.
const maxPrint = 64 << 10

// Print says what the folder's parts are parts of. Everything but Name decides
// what is made of them, and is the same for every task.
type Print struct {
	Format   string       `json:"format"`
	Name     string       `json:"name"` // of the PNG, where nobody gives another
	Parts    int          `json:"parts"`
	Pixels   frame.Pixels `json:"pixels"` // of the whole print
	Audit    int          `json:"audit"`  // pixels, by the join
	Release  string       `json:"release"`
	Numerics int          `json:"numerics"`
	Frame    string       `json:"frame"` // SHA-256 of the frame in its canonical form, hex
}

// identity ties shared and parts to their print.
type identity [sha256.Size]byte

func (p Print) identity() identity {
	p.Name = ""
	return sha256.Sum256(p.marshal())
}

// rect is the whole print, in the lattice at its scale.
func (p Print) rect() image.Rectangle {
	q := p.Pixels
	return image.Rect(q.X, q.Y, q.X+q.Width, q.Y+q.Height)
}

// marshal is the one way a Print is written.
func (p Print) marshal() []byte {
	b, err := json.MarshalIndent(p, "", "  ")
	if err != nil {
		panic(err) // texts and integers can always be written
	}
	return append(b, '\n')
}

// newPrint describes the print of a frame.
func newPrint(f *frame.Frame, o render.PrintOptions, name string, n int) (Print, error) {
	rect, err := o.Part(f)
	if err != nil {
		return Print{}, err
	}
	if n > rect.Dy() {
		return Print{}, &WhichError{Which{n, n}.String(), fmt.Sprintf("the print has %d rows: at most as many parts", rect.Dy())}
	}
	doc, err := f.Marshal()
	if err != nil {
		return Print{}, err
	}
	sum := sha256.Sum256(doc)
	return Print{Format, name, n,
		frame.Pixels{X: rect.Min.X, Y: rect.Min.Y, Width: rect.Dx(), Height: rect.Dy(), Scale: max(o.Scale, 1)},
		o.Audit, render.Release, render.Numerics, hex.EncodeToString(sum[:])}, nil
}

// parsePrint reads what marshal wrote and nothing else.
func parsePrint(b []byte) (Print, error) {
	var p Print
	if err := json.Unmarshal(b, &p); err != nil {
		return p, err
	}
	q := p.Pixels
	const most = printfile.MaxSide
	switch {
	case p.Format != Format:
		return p, fmt.Errorf("the format is %q, not %q", p.Format, Format)
	case !bytes.Equal(b, p.marshal()):
		return p, errors.New("it is not as it was written")
	case q.Width < 1 || q.Height < 1 || q.Width > most || q.Height > most || q.Scale < 1 || max(q.X, -q.X, q.Y, -q.Y) > most:
		return p, fmt.Errorf("it has impossible pixels: %v", q)
	case p.Parts < 1 || p.Parts > min(MaxParts, q.Height) || p.Audit < 0:
		return p, fmt.Errorf("it has %d parts and %d audited pixels", p.Parts, p.Audit)
	case p.Name != filepath.Base(p.Name) || strings.ContainsAny(p.Name, `/\`) || !strings.EqualFold(filepath.Ext(p.Name), ".png"):
		return p, fmt.Errorf("%q is not the name of a PNG", p.Name)
	}
	return p, nil
}

// readPrint reads the folder's print.json. The error is fs.ErrNotExist where
// there is none, a *render.MismatchError where it is something else.
func readPrint(dir string) (Print, error) {
	path := filepath.Join(dir, printName)
	b, err := readSmall(path, maxPrint)
	if err != nil {
		return Print{}, err
	}
	p, err := parsePrint(b)
	if err != nil {
		return p, &render.MismatchError{What: fmt.Sprintf("%s does not describe a print: %v", path, err),
			Cure: "use an empty folder; if this was one of parts, remove " + path + " and render a part again"}
	}
	return p, nil
}

// readSmall reads a file, of a long one a little more than limit bytes.
func readSmall(path string, limit int64) ([]byte, error) {
	f, err := os.Open(path)
	if err != nil {
		return nil, err
	}
	defer f.Close()
	return io.ReadAll(io.LimitReader(f, limit+1))
}

// begin makes the folder this print's, or finds that it is; another print's is
// refused with a *render.MismatchError.
func begin(dir string, want Print) error {
	if err := os.MkdirAll(dir, 0o777); err != nil {
		return folderError(dir, err)
	}
	have, err := readPrint(dir)
	if errors.Is(err, fs.ErrNotExist) {
		if err := printfile.WriteFile(filepath.Join(dir, printName), want.marshal()); err != nil {
			return err
		}
		have, err = readPrint(dir) // another task's may have come in between
	}
	if err != nil {
		return err
	}
	return want.match(dir, have)
}

// folderError says that the folder cannot be made.
func folderError(dir string, err error) error {
	var pe *fs.PathError
	if errors.As(err, &pe) {
		err = pe.Err
	}
	return &printfile.WriteError{Op: "create", Path: filepath.Join(dir, printName), Err: err}
}

// match says how the folder's print differs from the one wanted.
func (p Print) match(dir string, have Print) error {
	var differ []string
	for _, c := range []struct {
		what       string
		have, want any
	}{
		{"frame", short(have.Frame), short(p.Frame)},
		{"parts", have.Parts, p.Parts},
		{"scale", fmt.Sprintf("1/%d", have.Pixels.Scale), fmt.Sprintf("1/%d", p.Pixels.Scale)},
		{"pixels", have.rect(), p.rect()},
		{"audit", have.Audit, p.Audit},
		{"release", have.Release, p.Release},
		{"numerics", have.Numerics, p.Numerics},
	} {
		if c.have != c.want {
			differ = append(differ, fmt.Sprintf("%s %v there, %v here", c.what, c.have, c.want))
		}
	}
	if len(differ) == 0 && have.identity() == p.identity() {
		return nil
	}
	return &render.MismatchError{What: fmt.Sprintf("%s holds parts of another print: %s", dir, strings.Join(differ, "; ")),
		Cure: "give every task of a print the same frame and options, and each print a folder of its own"}
}

// short is the beginning of a hash, enough to see that two differ.
func short(hash string) string { return hash[:min(len(hash), 12)] }
