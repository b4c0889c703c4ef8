package prints

import (
	"flag"
	"fmt"
	"io"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
	"github.com/charmbracelet/lipgloss"
	"github.com/charmbracelet/x/ansi"

	"leadline/tui/cells"
	"leadline/tui/kit"
)

var update = flag.Bool("update", false, "write the golden files")

// TestGolden holds what the screen shows, without colour, to what was looked at
// and found right.
func TestGolden(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		name string
		w, h int
		keys []string
	}{
		{"list-200x60", 200, 60, nil},
		{"list-80x24", 80, 24, nil},
		{"failed-80x24", 80, 24, []string{"down", "down"}},
		{"workers-80x24", 80, 24, []string{"v"}},
		{"cancel-80x24", 80, 24, []string{"x"}},
		{"done-120x30", 120, 30, []string{"down"}},
		{"list-40x10", 40, 10, nil},
		{"print-40x10", 40, 10, []string{"down", "down", "enter"}},
		{"workers-40x10", 40, 10, []string{"v", "pgdown"}},
		{"path-40x10", 40, 10, []string{"n"}},
	} {
		s := still(t, cells.None, scene())
		s.View(c.w, c.h) // keys may depend on what is shown
		for _, k := range c.keys {
			if cmd := s.Update(keyMsg(k)); cmd != nil {
				if v, ok := cmd().(sight); ok {
					v.at, s.now = at(0), at(0)
					s.Update(v)
				}
			}
		}
		got := s.View(c.w, c.h) + "\n" + s.Status() + "\n"
		path := filepath.Join("testdata", c.name+".golden")
		if *update {
			if err := os.WriteFile(path, []byte(got), 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(path)
		if err != nil {
			t.Fatal(err)
		}
		if got != string(want) {
			t.Errorf("%s is now\n%s", c.name, got)
		}
	}
}

// sgr is the one kind of escape sequence a view may hold.
var sgr = regexp.MustCompile("\x1b\\[[0-9;:]*m")

// hostile is a queue whose texts would harm a terminal that obeyed them.
func hostile() *fake {
	f := scene()
	bad := "\x1b]0;owned\x07\x1b[2J\r\n\t海の星\u202eevil\u200b " + strings.Repeat("long", 100) + "\xff"
	for i := range f.prints {
		p := &f.prints[i]
		p.Title, p.Out, p.Reason, p.Hint, p.File = bad, "/tmp/"+bad+".png", bad, bad, bad
		p.ID += 1_000_000
		p.Tiles, p.Done = 1_234_567, 1_000_000
	}
	f.workers[0].Name, f.workers[0].Holding = bad, []string{bad, bad}
	return f
}

// TestShape draws every size, pane and depth: exactly the height asked for, no
// line wider than the width, and nothing a terminal would obey but colours.
func TestShape(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		f     *fake
		depth cells.Depth
	}{{scene(), cells.TrueColour}, {&fake{}, cells.None}, {hostile(), cells.C16}, {hostile(), cells.TrueColour}} {
		s := still(t, c.depth, c.f)
		for _, w := range []int{1, 40, 76, 116, 240} {
			for _, h := range []int{1, 7, 16, 27, 70} {
				for i := range 6 {
					s.pane, s.below, s.question = pane(i%3), i*7, nil
					s.editor.Close()
					switch {
					case i == 4:
						s.Ask()
					case i == 5 && s.print() != nil:
						s.cancel(&c.f.prints[0])
					default:
						s.at, s.follow = i%max(1, len(c.f.prints)), true
					}
					checkShape(t, fmt.Sprintf("%v, %dx%d, %d", c.depth, w, h, i), s.View(w, h), w, h)
				}
			}
		}
	}
}

func checkShape(t *testing.T, what, view string, w, h int) {
	t.Helper()
	lines := strings.Split(view, "\n")
	if len(lines) != h {
		t.Fatalf("%s: %d lines\n%s", what, len(lines), view)
	}
	for i, l := range lines {
		if n := ansi.StringWidth(l); n > w {
			t.Fatalf("%s: line %d is %d wide: %q", what, i, n, l)
		}
		for _, r := range sgr.ReplaceAllString(l, "") {
			if r < ' ' || r >= 0x7f && r < 0xa0 || r == '\u202e' || r == '\u200b' {
				t.Fatalf("%s: line %d holds %U: %q", what, i, r, l)
			}
		}
	}
}

// TestFullLines says that every line fills the width, so that nothing of what
// was there before shines through.
func TestFullLines(t *testing.T) {
	t.Parallel()
	for i, l := range strings.Split(still(t, cells.TrueColour, scene()).View(200, 60), "\n") {
		if n := ansi.StringWidth(l); n != 200 {
			t.Errorf("line %d is %d wide", i, n)
		}
	}
}

// TestContrast holds what is written on the chosen line to 4.5:1 (WCAG 2.2,
// 1.4.3), on dark and on light grounds.
func TestContrast(t *testing.T) {
	t.Parallel()
	for _, dark := range []bool{true, false} {
		s := kit.NewStyle(lipgloss.NewRenderer(io.Discard), dark)
		ground := rgbOf(s.Chosen.GetBackground())
		for what, st := range map[string]lipgloss.Style{"text": s.Text, "lead": s.Lead, "warn": s.Warn, "bad": s.Bad, "good": s.Good} {
			if c := cells.Contrast(rgbOf(st.GetForeground()), ground); c < 4.5 {
				t.Errorf("%s has %.2f:1 on the chosen line (dark: %v)", what, c, dark)
			}
		}
	}
}

// TestThumbnail draws what is finished in its colours and the rest as paper.
func TestThumbnail(t *testing.T) {
	t.Parallel()
	s := still(t, cells.TrueColour, scene())
	blank := blankTone(s.desk.Style, cells.TrueColour)
	p := sampled(s.sight.picture.img, 24, 16, blank)
	for y := range 16 {
		for x := range 24 {
			c := p.Pix[y*24+x]
			if y >= 8 && c != blank {
				t.Fatalf("%d, %d is %v although nothing of it is done", x, y, c)
			}
			// Two columns of 5·2x and 5·(2x+1), whose root mean square lies between them.
			if v := int(c.R); y < 8 && (v < 10*x || v > 10*x+5) {
				t.Fatalf("%d, %d is %v", x, y, c)
			}
		}
	}
	lines := s.thumb(s.print(), 60, 30)
	if len(lines) != 20 || ansi.StringWidth(lines[0]) != 60 {
		t.Errorf("3:2 takes %d lines of %d cells, not 20 of 60", len(lines), ansi.StringWidth(lines[0]))
	}
	s.desk.Depth = cells.None
	if got := s.thumb(s.print(), 62, 22); len(got) != 22 || ansi.StringWidth(got[0]) != 62 || !strings.HasPrefix(ansi.Strip(got[0]), "┌──") {
		t.Errorf("no neatline around\n%s", strings.Join(got, "\n"))
	}
	if s.thumb(s.print(), 4, 30) != nil || s.thumb(s.print(), 60, 2) != nil {
		t.Error("draws where there is no room")
	}
}

// TestMouse chooses by a click on a line and scrolls what the wheel is over.
func TestMouse(t *testing.T) {
	t.Parallel()
	for _, size := range [][2]int{{200, 60}, {80, 24}, {40, 10}} {
		s := still(t, cells.None, scene())
		lines := strings.Split(s.View(size[0], size[1]), "\n")
		for y, l := range lines {
			if !strings.Contains(l, "Gull") {
				continue
			}
			s.Update(tea.MouseMsg{X: 12, Y: y, Action: tea.MouseActionPress, Button: tea.MouseButtonLeft})
			break
		}
		if s.print().ID != 9 {
			t.Errorf("%v: a click chose print %d", size, s.print().ID)
		}
		s.Update(tea.MouseMsg{X: 12, Y: 0, Action: tea.MouseActionPress, Button: tea.MouseButtonLeft})
		s.Update(tea.MouseMsg{X: 12, Y: size[1] - 1, Action: tea.MouseActionPress, Button: tea.MouseButtonLeft})
		if s.print().ID != 9 && size[1] != 10 {
			t.Errorf("%v: a click beside the list chose print %d", size, s.print().ID)
		}
	}
	s := still(t, cells.None, scene())
	s.View(80, 16)
	s.Update(tea.MouseMsg{X: 9, Y: 4, Action: tea.MouseActionPress, Button: tea.MouseButtonWheelDown})
	if got := s.View(80, 16); strings.Contains(got, "Undertow  ") || !strings.Contains(got, "Wreck") || s.print().ID != 12 {
		t.Errorf("the wheel did not scroll the list\n%s", got)
	}
	s.Update(tea.MouseMsg{X: 9, Y: 4, Action: tea.MouseActionPress, Button: tea.MouseButtonWheelUp})
	s.Update(keyMsg("v"))
	s.Update(keyMsg("enter"))
	s.choose(2)
	s.View(60, 18)
	s.Update(tea.MouseMsg{X: 50, Y: 15, Action: tea.MouseActionPress, Button: tea.MouseButtonWheelDown})
	if got := s.View(60, 18); !strings.Contains(got, "pgup ↑ 3 lines") {
		t.Errorf("the wheel did not scroll the facts\n%s", got)
	}
}

// BenchmarkView draws the largest screen, as after every key.
func BenchmarkView(b *testing.B) {
	s := still(b, cells.TrueColour, scene())
	for b.Loop() {
		s.View(240, 70)
	}
}

// BenchmarkPicture draws it with a picture that has changed.
func BenchmarkPicture(b *testing.B) {
	s := still(b, cells.TrueColour, scene())
	for b.Loop() {
		s.cached = thumbnail{}
		s.View(240, 70)
	}
}
