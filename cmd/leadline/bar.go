package main

import (
	"fmt"
	"strings"
	"time"

	"leadline/render"
	"leadline/render/words"
)

const (
	barMost  = 28 // characters of the line at its longest
	barLeast = 6  // and at its shortest, before it is left out
)

// barLine draws progress in fewer than columns characters: a lead that goes
// out along its line. Where there is little room the rate gives way, then the time
// left; the line takes what remains.
func barLine(p render.Progress, spent time.Duration, columns int, plain bool) string {
	share := float64(p.Done) / float64(max(p.Total, 1))
	parts := []string{fmt.Sprintf("%-9s", p.Phase), fmt.Sprintf("%3d %%", int(share*100))}
	switch perSecond, left := rate(p, spent); {
	case left >= 0 && unitOf(p.Phase) != "":
		parts = append(parts, words.Clock(left)+" left", words.Amount(perSecond, unitOf(p.Phase))+"/s")
	case spent >= 2*time.Second:
		parts = append(parts, words.Clock(spent.Truncate(time.Second).Seconds())+" so far")
	}
	text := strings.Join(parts, "  ")
	for len(text) >= columns && len(parts) > 1 {
		parts = parts[:len(parts)-1]
		text = strings.Join(parts, "  ")
	}
	if len(text) >= columns {
		return text[:max(0, columns-1)]
	}
	width := min(barMost, columns-1-len(text)-1) // beside the lead itself
	if width < barLeast {
		return text
	}
	return parts[0] + " " + leadAt(share, width, plain) + " " + strings.Join(parts[1:], "  ")
}

// leadAt is the line itself, width characters and the lead.
func leadAt(share float64, width int, plain bool) string {
	paid, lead, free := "─", "●", "·"
	if plain {
		paid, lead, free = "-", "o", "."
	}
	at := min(int(share*float64(width)), width)
	return strings.Repeat(paid, at) + lead + strings.Repeat(free, width-at)
}

// unitOf is what a phase counts; "" for one that is done at a stroke.
func unitOf(phase string) string {
	switch phase {
	case render.PhasePixels:
		return "px"
	case render.PhaseReference:
		return "steps"
	case render.PhaseSurvey, render.PhaseAudit:
		return "samples"
	}
	return ""
}
