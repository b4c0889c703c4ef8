package board

import (
	"math"
	"regexp"
	"strconv"
	"strings"
	"testing"
)

// luminance is WCAG 2.2's relative luminance of #rrggbb.
func luminance(t *testing.T, hex string) float64 {
	t.Helper()
	n, err := strconv.ParseUint(hex[1:], 16, 32)
	if err != nil || len(hex) != 7 {
		t.Fatalf("colour %q", hex)
	}
	sum := 0.0
	for i, weight := range []float64{0.2126, 0.7152, 0.0722} {
		v := float64(n>>(16-8*i)&255) / 255
		if v <= 0.04045 {
			v /= 12.92
		} else {
			v = math.Pow((v+0.055)/1.055, 2.4)
		}
		sum += weight * v
	}
	return sum
}

func contrast(t *testing.T, a, b string) float64 {
	x, y := luminance(t, a), luminance(t, b)
	return (max(x, y) + 0.05) / (min(x, y) + 0.05)
}

// TestContrast measures both schemes by WCAG 2.2: 4.5 for text (1.4.3, AA), 3
// for the bounds of controls, the bar and the focus ring (1.4.11).
func TestContrast(t *testing.T) {
	t.Parallel()
	css, err := assets.ReadFile("assets/board.css")
	if err != nil {
		t.Fatal(err)
	}
	if c := contrast(t, "#000000", "#ffffff"); c != 21 { // WCAG 2.2, definition of contrast ratio
		t.Fatalf("black on white is %v", c)
	}
	roots := regexp.MustCompile(`(?s):root \{(.*?)\}`).FindAllStringSubmatch(string(css), -1)
	if len(roots) != 2 || !strings.Contains(string(css), "prefers-color-scheme: dark") {
		t.Fatalf("%d schemes", len(roots))
	}
	for i, root := range roots {
		c := map[string]string{}
		for _, m := range regexp.MustCompile(`--([a-z]+): (#[0-9a-f]{6});`).FindAllStringSubmatch(root[1], -1) {
			c[m[1]] = m[2]
		}
		if len(c) != 10 {
			t.Fatalf("scheme %d has %d colours", i, len(c))
		}
		for _, pair := range []struct {
			ink, paper string
			least      float64
		}{
			{"ink", "paper", 7}, {"ink", "sheet", 7}, {"ink", "shoal", 4.5}, {"soft", "paper", 4.5}, {"deep", "paper", 4.5},
			{"note", "paper", 4.5}, {"note", "sheet", 4.5}, {"note", "shoal", 4.5}, {"paper", "note", 4.5},
			{"edge", "paper", 3}, {"edge", "sheet", 3}, {"deep", "sheet", 3},
		} {
			if got := contrast(t, c[pair.ink], c[pair.paper]); got < pair.least {
				t.Errorf("scheme %d: %s on %s is %.2f, below %v", i, pair.ink, pair.paper, got, pair.least)
			}
		}
	}
}

// TestNothingFromElsewhere looks for addresses of other hosts, and for what the
// policy would block.
func TestNothingFromElsewhere(t *testing.T) {
	t.Parallel()
	names, err := assets.ReadDir("assets")
	if err != nil || len(names) < 6 {
		t.Fatal(names, err)
	}
	bad := regexp.MustCompile(`(?i)https?:|url\(|@import|\sstyle=|\son[a-z]+=|<style|innerHTML|eval\(`)
	inline := regexp.MustCompile(`<script[^>]*>[^<]`)
	for _, e := range names {
		b, err := assets.ReadFile("assets/" + e.Name())
		if err != nil {
			t.Fatal(err)
		}
		text := strings.ReplaceAll(string(b), `xmlns="http://www.w3.org/2000/svg"`, "")
		if m := bad.FindString(text); m != "" {
			t.Errorf("%s holds %q", e.Name(), m)
		}
		if m := inline.FindString(text); m != "" {
			t.Errorf("%s holds a script", e.Name())
		}
	}
}
