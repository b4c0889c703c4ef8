package kit

import (
	"testing"

	"leadline/tui/cells"
)

// TestContrast holds all text to 4.5:1 (WCAG 2.2, 1.4.3) on the grounds it is
// written on: the terminal's own, from pure black to the chart's dark paper and
// the other way about, the bars, and the chosen line.
func TestContrast(t *testing.T) {
	for _, dark := range []bool{true, false} {
		grounds := map[string]cells.RGB{"paper": paper.tone(dark), "bar": bar.tone(dark), "chosen": chosen.tone(dark), "mat": mat.tone(dark), "pure": {}}
		if !dark {
			grounds["pure"] = cells.RGB{R: 255, G: 255, B: 255}
		}
		letters := map[string]shade{"ink": ink, "pencil": pencil, "shallow": shallow, "magenta": magenta, "buff": buff, "red": red, "green": green}
		for name, c := range letters {
			for on, ground := range grounds {
				if r := cells.Contrast(c.tone(dark), ground); r < 4.5 {
					t.Errorf("dark %v: %s on %s has %.2f", dark, name, on, r)
				}
			}
		}
		if r := cells.Contrast(ink.tone(dark), tab.tone(dark)); r < 4.5 {
			t.Errorf("dark %v: the tab has %.2f", dark, r)
		}
	}
}
