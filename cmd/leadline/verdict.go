package main

import (
	"encoding/json"
	"errors"
	"fmt"
	"io"

	"leadline/render"
)

// verdict is what verify came to.
type verdict struct {
	g        verifyFlags
	evidence *render.Evidence
	found    *render.Verdict // nil where something differs
}

// verdictLine is verify's line of JSON.
type verdictLine struct {
	Matches bool `json:"matches"`
	*render.Verdict
	Differs string  `json:"differs,omitempty"` // what differs, in words
	Hint    string  `json:"hint,omitempty"`
	Seed    *uint64 `json:"seed,omitempty"` // of the tiles
}

// say writes the verdict. A mismatch goes to standard output as JSON only: in
// words it is an error.
func (v verdict) say(w io.Writer, err error) error {
	var m *render.MismatchError
	switch {
	case err != nil && !errors.As(err, &m), err != nil && !v.g.json:
		return nil
	case !v.g.json:
		_, err := fmt.Fprintln(w, "matches:", v.words())
		return err
	}
	line := verdictLine{Matches: m == nil}
	if m == nil {
		line.Verdict = v.found
	} else {
		line.Differs, line.Hint = m.What, m.Cure
	}
	if v.g.sample > 0 {
		line.Seed = &v.g.seed
	}
	return json.NewEncoder(w).Encode(line)
}

// words says what was compared, and what could not be.
func (v verdict) words() string {
	n, file := v.found.Pixels, v.evidence.File
	switch {
	case !v.found.Whole:
		return fmt.Sprintf("%d random tiles of %s, %d pixels (--seed %d)", v.found.Tiles, file, n, v.g.seed)
	case file == "":
		return fmt.Sprintf("the recorded hash, of %d pixels (the PNG is not beside the sidecar)", n)
	case v.evidence.SHA256 == "":
		return fmt.Sprintf("all %d pixels of %s (no sidecar is beside it)", n, file)
	}
	return fmt.Sprintf("all %d pixels of %s, and the recorded hash", n, file)
}
