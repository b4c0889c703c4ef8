package prints

import (
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/tui/cells"
	"leadline/tui/kit"
)

// TestKeyMap has one meaning a key, none of the program's own keys, and says
// what keys do now.
func TestKeyMap(t *testing.T) {
	t.Parallel()
	s := still(t, cells.None, scene())
	if s.Name() != "Queue" {
		t.Errorf("named %q", s.Name())
	}
	means := map[string]string{}
	for _, k := range []string{"1", "2", "3", "4", "tab", "shift+tab", "p", "ctrl+s", "ctrl+o", "ctrl+z", "?", "q", "ctrl+c"} {
		means[k] = "the program's"
	}
	shown := map[string]string{}
	for _, g := range s.Keys() {
		for _, b := range g.Keys {
			shown[b.Help().Key] = b.Help().Desc
			for _, k := range b.Keys() {
				if means[k] != "" {
					t.Errorf("%q is %s and %s", k, means[k], b.Help().Desc)
				}
				means[k] = b.Help().Desc
			}
		}
	}
	if shown["w"] != "work here" || shown["space"] != "pause" {
		t.Errorf("shows %v", shown)
	}
	s.hand = &hand{}
	s.choose(4) // which is paused
	keys := s.Keys()
	if w, p := keys[0].Keys[0].Help().Desc, keys[1].Keys[0].Help().Desc; w != "stop working" || p != "go on" {
		t.Errorf("shows %q and %q", w, p)
	}
	s.Update(keyMsg("x"))
	if keys = s.Keys(); len(keys) != 1 || keys[0].Keys[0].Help().Desc != "cancel it" {
		t.Errorf("shows %v while it asks", keys)
	}
	if s.Typing() {
		t.Error("a question is no typing")
	}
}

// TestLooking moves in the list, and between list, print and workers.
func TestLooking(t *testing.T) {
	t.Parallel()
	s := still(t, cells.None, scene())
	s.View(40, 10)
	for _, c := range []struct {
		key string
		id  int64
		pane
		text string
	}{
		{"end", 11, paneList, "× cancelled"}, {"down", 11, paneList, "▌ 11"}, {"up", 16, paneList, "▌ 16"}, {"home", 12, paneList, "▌ 12"},
		{"enter", 12, panePrint, "── 12  Undertow"}, {"pgdown", 12, panePrint, "pgup ↑ 4 lines"}, {"pgup", 12, panePrint, "► rendering"},
		{"v", 12, paneCrew, "── Workers"}, {"v", 12, paneList, "▌ 12"}, {"v", 12, paneCrew, "here cove/4211"}, {"esc", 12, paneList, "▌ 12"},
	} {
		s.Update(keyMsg(c.key))
		s.now = at(0)
		if got := s.View(40, 10); s.print().ID != c.id || s.pane != c.pane || !strings.Contains(got, c.text) {
			t.Errorf("%s: print %d, pane %d, not %d, %d, %q in\n%s", c.key, s.print().ID, s.pane, c.id, c.pane, c.text, got)
		}
	}
}

// TestWheelPanes scrolls the pane under the wheel on a wide screen.
func TestWheelPanes(t *testing.T) {
	t.Parallel()
	s := still(t, cells.None, scene())
	s.View(120, 20)
	wheel := func(x, y int) string {
		s.Update(tea.MouseMsg{X: x, Y: y, Action: tea.MouseActionPress, Button: tea.MouseButtonWheelDown})
		return s.View(120, 20)
	}
	s.choose(1)
	if got := wheel(100, 10); s.pane == paneCrew || s.below == 0 && strings.Contains(got, "pgdn") {
		t.Errorf("the facts did not scroll\n%s", got)
	}
	if got := wheel(10, 18); s.pane != paneCrew {
		t.Errorf("the workers did not scroll\n%s", got)
	}
	if wheel(100, 10); s.pane != panePrint {
		t.Error("the print is not scrolled again")
	}
}

// TestAway asks seldom while another screen is open, and forgets what was asked
// of the user.
func TestAway(t *testing.T) {
	t.Parallel()
	s := still(t, cells.None, scene())
	s.Update(keyMsg("x"))
	gen := s.beating
	s.Update(kit.Opened("Sheet"))
	if s.question != nil || s.open || s.beating == gen {
		t.Error("still asks")
	}
	s.look.asked = false
	if c := s.Update(tick{gen, at(60)}); c != nil {
		t.Error("two clocks tick")
	}
	s.tick(tick{s.beating, at(60)})
	if got := s.View(80, 24); strings.Contains(got, "no answer") {
		t.Error("complains although it was not looking")
	}
	s.Update(kit.Opened(name))
	s.Ask()
	s.Update(kit.Opened("Sheet"))
	if s.Typing() {
		t.Error("still takes a path")
	}
}
