package board

import (
	"math"
	"path/filepath"
	"strconv"
	"time"

	"leadline/jobs"
)

// name is what a print is called: its title, else its file.
func name(p *jobs.Print) string {
	if p.Title != "" {
		return p.Title
	}
	return filepath.Base(p.Out)
}

// moving says whether a print is being worked on, or could be.
func moving(p *jobs.Print) bool {
	return !p.Paused && (p.State == jobs.Planning || p.State == jobs.Rendering || p.State == jobs.Assembling)
}

// share is the finished part of a print, 0 to 1.
func share(p *jobs.Print) float64 {
	if p.Pixels <= 0 {
		return 0
	}
	return min(1, float64(p.Pixel)/float64(p.Pixels))
}

// percent rounds down: 100 % is all.
func percent(share float64) string {
	return strconv.FormatFloat(math.Floor(share*1000)/10, 'f', 1, 64) + " %"
}

// left is the time to go with its range; "" where nothing is known.
func left(p *jobs.Print) string {
	left, between := p.LeftWords()
	switch {
	case left == "":
		return ""
	case between == "":
		return left + " left"
	}
	return left + " left, " + between
}

// when writes a moment in this machine's zone.
func when(t time.Time) string {
	if t.IsZero() {
		return ""
	}
	return t.Local().Format("2 January 2006, 15:04:05 MST")
}
