package main

import (
	"encoding/json"
	"fmt"
	"io"

	"leadline/render"
	"leadline/render/frame"
	"leadline/render/words"
)

// report says what came out.
func report(w io.Writer, r *render.Result, asJSON bool) error {
	if asJSON {
		return json.NewEncoder(w).Encode(r)
	}
	c, a := r.Counts, r.Audit
	_, err := fmt.Fprintf(w, `%s
  %d x %d px, %s, %.1f samples a pixel, %s
  inside %.2f %%, undecided %.2f %% of samples
  %s
  pixels sha256 %s
  sidecar %s
`, r.File, r.Width, r.Height, words.Size(r.Bytes), float64(c.Samples)/float64(c.Pixels), words.Clock(r.Seconds.Total),
		percent(c.Inside, c.Samples), percent(c.Undecided, c.Samples), auditWords(a), r.SHA256, r.Sidecar)
	if err == nil && r.Clipped > 0 {
		_, err = fmt.Fprintf(w, "  %d of %d ramp entries lay outside the sheet's colour space and were brought in\n",
			r.Clipped, frame.RampSize)
	}
	return err
}

// auditWords puts an audit that found nothing wrong into words. Samples that
// direct iteration would take too long for are left out of it.
func auditWords(a frame.Audit) string {
	if a.Asked == 0 {
		return "no audit was asked for"
	}
	s := fmt.Sprintf("audit: of %d samples %d equal direct iteration, %d agree within bounds", a.Asked, a.Equal, a.Within)
	if a.Skipped > 0 {
		s += fmt.Sprintf(", %d were too long to check", a.Skipped)
	}
	return s
}

func percent(part, of int64) float64 { return 100 * float64(part) / float64(max(of, 1)) }
