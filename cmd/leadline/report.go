package main

import (
	"encoding/json"
	"fmt"
	"io"
	"time"

	"leadline/render"
	"leadline/render/frame"
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
  sha256 %s
  sidecar %s
`, r.File, r.Width, r.Height, byteSize(r.Bytes), float64(c.Samples)/float64(c.Pixels), clock(r.Seconds.Total),
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

func byteSize(n int64) string {
	switch {
	case n >= 1e9:
		return fmt.Sprintf("%.2f GB", float64(n)/1e9)
	case n >= 1e6:
		return fmt.Sprintf("%.1f MB", float64(n)/1e6)
	}
	return fmt.Sprintf("%.1f kB", float64(n)/1e3)
}

// quantity writes a rate.
func quantity(v float64, unit string) string {
	switch {
	case v >= 1e6:
		return fmt.Sprintf("%.1f M %s", v/1e6, unit)
	case v >= 1e4:
		return fmt.Sprintf("%.0f k %s", v/1e3, unit)
	}
	return fmt.Sprintf("%.0f %s", v, unit)
}

// clock writes seconds as a person would say them.
func clock(s float64) string {
	switch d := time.Duration(s * float64(time.Second)); {
	case d < 10*time.Second:
		return fmt.Sprintf("%.1f s", s)
	case d < 2*time.Minute:
		return fmt.Sprintf("%.0f s", s)
	case d < 2*time.Hour:
		return fmt.Sprintf("%d min %02d s", int(d.Minutes()), int(d.Seconds())%60)
	}
	return fmt.Sprintf("%d h %02d min", int(s/3600), int(s/60)%60)
}
