package inking

import (
	"image"
	"math"
	"testing"

	tea "github.com/charmbracelet/bubbletea"
)

func pointer(s *Screen, action tea.MouseAction, button tea.MouseButton, at image.Point) {
	s.Update(tea.MouseMsg{X: at.X, Y: at.Y, Action: action, Button: button})
}

func click(s *Screen, at image.Point) {
	pointer(s, tea.MouseActionPress, tea.MouseButtonLeft, at)
	pointer(s, tea.MouseActionRelease, tea.MouseButtonNone, at)
}

// mouseScreen is a screen that has been drawn, and its layout.
func mouseScreen(t *testing.T) (*Screen, layout) {
	s := testScreen(t, testFrame(t, "", "srgb"))
	s.View(80, 24)
	return s, lay(80, 24, len(s.rows()))
}

// A stop is dragged along the ramp as one step; the ends stay.
func TestDragStop(t *testing.T) {
	s, l := mouseScreen(t)
	from := image.Pt(l.column(0.25), l.band.Min.Y)
	pointer(s, tea.MouseActionPress, tea.MouseButtonLeft, from)
	if s.hand != (place{aStop, 1}) || s.at != s.hand {
		t.Fatalf("in hand is %v", s.hand)
	}
	for x := range 12 {
		pointer(s, tea.MouseActionMotion, tea.MouseButtonLeft, from.Add(image.Pt(x, 1)))
	}
	pointer(s, tea.MouseActionRelease, tea.MouseButtonNone, from)
	want := l.placeAt(from.X + 11)
	if got := s.desk.Frame.Ink.Ramp.Stops[1].At; math.Abs(got-want) > 1e-6 {
		t.Errorf("it lies at %v, the pointer at %v", got, want)
	}
	if n, _ := s.desk.Steps(); n != 1 {
		t.Errorf("a drag is %d steps", n)
	}
	pointer(s, tea.MouseActionMotion, tea.MouseButtonNone, from)
	click(s, image.Pt(0, l.marks.Min.Y))
	pointer(s, tea.MouseActionPress, tea.MouseButtonLeft, image.Pt(0, l.marks.Min.Y))
	pointer(s, tea.MouseActionMotion, tea.MouseButtonLeft, image.Pt(9, l.marks.Min.Y))
	if n, _ := s.desk.Steps(); n != 1 || s.hand != (place{aStop, 0}) {
		t.Errorf("after the end was pulled: %d steps, %v in hand", n, s.hand)
	}
}

// Two drags are two steps, though of one stop.
func TestTwoDrags(t *testing.T) {
	s, l := mouseScreen(t)
	for _, to := range []int{24, 28} {
		pointer(s, tea.MouseActionPress, tea.MouseButtonLeft, image.Pt(20, l.band.Min.Y))
		pointer(s, tea.MouseActionMotion, tea.MouseButtonLeft, image.Pt(to, l.band.Min.Y))
		pointer(s, tea.MouseActionRelease, tea.MouseButtonNone, image.Pt(to, l.band.Min.Y))
	}
	if n, _ := s.desk.Steps(); n != 2 {
		t.Errorf("%d steps", n)
	}
}

// A line that is clicked is the one under the cursor, a colour's takes it in
// hand; the wheel goes through the list.
func TestClickList(t *testing.T) {
	s, l := mouseScreen(t)
	lines := s.lines(l.list.Dy())
	for y, i := range lines {
		click(s, image.Pt(l.list.Min.X+4, y))
		if got := s.lines(l.list.Dy()); i >= 0 && (s.at != s.rows()[i].place || len(got) != len(lines)) {
			t.Errorf("line %d: the cursor is on %v", y, s.at)
		}
	}
	if click(s, image.Pt(l.list.Min.X+4, 3)); s.hand != (place{aStop, 2}) {
		t.Errorf("in hand is %v", s.hand)
	}
	pointer(s, tea.MouseActionPress, tea.MouseButtonWheelDown, image.Pt(50, 3))
	if s.at != (place{aStop, 3}) {
		t.Errorf("the wheel leads to %v", s.at)
	}
	if n, _ := s.desk.Steps(); n != 0 {
		t.Errorf("clicks made %d steps", n)
	}
}

// A slider is pulled to where the pointer is; its ends are the track's.
func TestDragSlider(t *testing.T) {
	s, l := mouseScreen(t)
	press(t, s, "]")
	track := track(l.mixer.Dx())
	y := l.mixer.Min.Y + 1 + sliderL
	left := l.mixer.Min.X + track.X
	pointer(s, tea.MouseActionPress, tea.MouseButtonLeft, image.Pt(left+5, y))
	pointer(s, tea.MouseActionMotion, tea.MouseButtonLeft, image.Pt(left+9, y))
	pointer(s, tea.MouseActionMotion, tea.MouseButtonLeft, image.Pt(200, y+3))
	if l, _, _ := s.colour().OKLCH(); math.Abs(l-1) > 1e-9 || !s.mixing {
		t.Errorf("at the right end lightness is %v", l)
	}
	pointer(s, tea.MouseActionMotion, tea.MouseButtonLeft, image.Pt(left, y))
	pointer(s, tea.MouseActionRelease, tea.MouseButtonNone, image.Pt(left, y))
	if l, _, _ := s.colour().OKLCH(); l != 0 {
		t.Errorf("at the left end lightness is %v", l)
	}
	if n, _ := s.desk.Steps(); n != 1 {
		t.Errorf("%d steps", n)
	}
}

// In the locker a click tries a ramp on, a second one takes it.
func TestClickLocker(t *testing.T) {
	s, l := mouseScreen(t)
	press(t, s, "k home")
	at := image.Pt(l.list.Min.X+20, 4)
	if click(s, at); s.locker == nil || s.locker.at != 3 || s.locker.proposal == nil {
		t.Fatal("nothing is tried on")
	}
	before := s.desk.Frame
	if click(s, at); s.locker != nil || s.desk.Frame == before {
		t.Error("it is not taken")
	}
}
