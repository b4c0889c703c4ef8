package paper

import (
	"testing"

	tea "github.com/charmbracelet/bubbletea"
)

// BenchmarkKey moves the cursor and draws the whole screen.
func BenchmarkKey(b *testing.B) {
	r := newRig(b, document)
	r.colour()
	r.resize(200, 57)
	r.draw(r.picture(nil))
	for b.Loop() {
		r.send(tea.KeyMsg{Type: tea.KeyDown})
		r.s.View(200, 57)
	}
}
