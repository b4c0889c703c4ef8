package tui

import (
	tea "github.com/charmbracelet/bubbletea"

	"leadline/render/frame"
	"leadline/tui/engine"
	"leadline/tui/kit"
)

// keptPictures is how many whole pictures are kept to carry over from.
const keptPictures = 12

// follow asks for another preview where the desk's frame, or the room for its
// picture, is no longer what was asked for, and puts what is known of it on the
// desk at once: the picture before, moved and scaled.
func (m *model) follow() tea.Cmd {
	d := m.desk
	if d.View.X < 1 || d.View.Y < 1 {
		return nil
	}
	r := engine.Request{Frame: d.Frame, Size: d.View, Pinned: d.Pinned}
	if r == m.asked {
		return nil
	}
	changed := m.asked.Frame != d.Frame
	if m.asked.Frame != nil && r.Size == m.asked.Size && r.Pinned == m.asked.Pinned && sameFields(r.Frame, m.asked.Frame) {
		m.asked = r // another ink: the fields are those there are
	} else {
		m.asked = r
		old := m.recent
		if d.Picture != nil {
			old = append(old[:len(old):len(old)], d.Picture)
		}
		if p := engine.Carry(old, r); p != nil {
			d.Picture = p
		}
		if d.Engine != nil {
			d.Engine.Show(r)
		}
	}
	if !changed {
		return nil
	}
	m.session.dirty = true
	return m.all(kit.Changed{})
}

// sameFields says whether two frames have the same fields everywhere.
func sameFields(a, b *frame.Frame) bool {
	same := func(f *frame.Frame) frame.Frame {
		return frame.Frame{Set: frame.Set{Kind: f.Set.Kind, Power: f.Set.Power}, View: f.View, Iteration: f.Iteration,
			Sheet: frame.Sheet{Width: f.Sheet.Width, Height: f.Sheet.Height, PPI: f.Sheet.PPI, Bleed: f.Sheet.Bleed}}
	}
	x, y := same(a), same(b)
	if (a.Set.Parameter == nil) != (b.Set.Parameter == nil) || (a.Set.Parameter != nil && *a.Set.Parameter != *b.Set.Parameter) {
		return false
	}
	return x.Set == y.Set && x.View == y.View && x.Iteration == y.Iteration && x.Sheet == y.Sheet
}

// drawn takes a picture of the engine's, if it is still of what is asked for.
// The limit that was found becomes the frame's.
func (m *model) drawn(p *engine.Picture) tea.Cmd {
	if p.Size != m.asked.Size || !sameFields(p.Frame, m.asked.Frame) {
		return nil
	}
	d := m.desk
	d.Picture = p
	if p.Err != nil {
		return tea.Batch(kit.Fail(p.Err), m.all(kit.Drawn{Picture: p}))
	}
	if p.Whole {
		if m.recent = append(m.recent, p); len(m.recent) > keptPictures {
			m.recent = m.recent[1:]
		}
		if !d.Pinned && p.Limit > 0 && p.Limit != d.Frame.Iteration.Limit {
			f := d.Frame.Clone()
			f.Iteration.Limit = p.Limit
			d.Amend(f)
			m.asked.Frame = f
			m.session.dirty = true
		}
	}
	return m.all(kit.Drawn{Picture: p})
}
