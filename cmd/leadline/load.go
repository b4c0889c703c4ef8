package main

import (
	"errors"
	"fmt"
	"io"
	"path/filepath"
	"regexp"
	"strings"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/printfile"
)

// loaded is a frame and what it came from.
type loaded struct {
	*frame.Frame
	numerics int // it was printed with; 0: never printed
}

// loadFrame reads the frame of a frame file, a sidecar or a print. A frozen
// frame made under other numerics is named on talk.
func loadFrame(path string, talk io.Writer) (loaded, error) {
	if strings.EqualFold(filepath.Ext(strings.TrimSuffix(path, suspect)), ".png") {
		e, err := render.Gather(path)
		if err != nil {
			return loaded{}, noFrame(err)
		}
		return origin(e.Frame, e.Origin.Numerics, e.Origin.Release, talk), nil
	}
	d, err := frame.Load(path)
	if err != nil {
		return loaded{}, err
	}
	if s := d.Sidecar; s != nil {
		return origin(d.Frame, s.Record.Numerics, s.Record.Release, talk), nil
	}
	return loaded{Frame: d.Frame}, nil
}

// suspect ends the names of a print that failed its audit.
const suspect = ".suspect"

// noFrame turns the verifier's view of a PNG into a reader's: a PNG without a
// frame, or no sound PNG at all, is a bad frame.
func noFrame(err error) error {
	var m *render.MismatchError
	var f *printfile.FormatError
	switch {
	case errors.As(err, &m):
		return frame.Faults{{Message: m.What, Hint: "use the frame file, or the sidecar if it was kept"}}
	case errors.As(err, &f):
		return frame.Faults{{Message: f.Error(), Hint: f.Hint()}}
	}
	return err
}

func origin(f *frame.Frame, numerics int, release string, talk io.Writer) loaded {
	if numerics != render.Numerics {
		fmt.Fprintf(talk, "leadline: warning: this frame was printed with numerics %d (release %s); "+
			"this is numerics %d, so pixels may differ\n", numerics, release, render.Numerics)
	}
	return loaded{f, numerics}
}

// partOfName is what partName puts behind a frame's name.
var partOfName = regexp.MustCompile(`(\.numerics-\d+)?(\.scale-\d+)?(\.crop-(-?\d+,){3}\d+)?$`)

// stem is the name of a frame: the file's without folder, without our endings
// and without the part and scale of an earlier print.
func stem(path string) string {
	s := strings.TrimSuffix(filepath.Base(path), suspect)
	for _, end := range []string{".frame.json", ".sidecar.json", ".json", ".png", ".PNG"} {
		if t, ok := strings.CutSuffix(s, end); ok && t != "" {
			s = t
			break
		}
	}
	if t := partOfName.ReplaceAllString(s, ""); t != "" {
		return t
	}
	return s
}
