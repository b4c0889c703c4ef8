package inking

import (
	"fmt"
	"math"
	"strings"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/palette"
	"leadline/render/frame"
	"leadline/render/sheet"
)

// hasColour tells whether a line of the list is of a colour.
func (k kind) hasColour() bool { return k == aStop || k == inside || k == edgeColour }

// hold takes a colour in hand, and its line under the cursor.
func (s *Screen) hold(p place) {
	s.hand, s.at = p, p
}

// mixed is the sliders' state for the colour in hand.
func (s *Screen) mixed() mix {
	s.mix = mixOf(s.colour(), s.mix)
	return s.mix
}

// colour is the colour in hand.
func (s *Screen) colour() palette.Colour {
	v := s.now()
	switch s.hand.kind {
	case inside:
		return v.resolved.Inside
	case edgeColour:
		return v.resolved.Edge.Colour
	}
	return v.ramp.Stops[s.stop()].Colour
}

// handWords names the colour in hand.
func (s *Screen) handWords() string {
	switch s.hand.kind {
	case inside:
		return "inside"
	case edgeColour:
		return "edge line"
	}
	return fmt.Sprintf("stop %d of %d", s.stop()+1, len(s.now().ramp.Stops))
}

// setColour gives the colour in hand another value.
func (s *Screen) setColour(k *frame.Ink, c palette.Colour) error {
	switch s.hand.kind {
	case inside:
		k.Inside = &c
	case edgeColour:
		if k.Edge == nil {
			return &refusal{"there is no edge line", "give it a width first"}
		}
		k.Edge.Colour = c
	default:
		return s.setRamp(k, func(r palette.Ramp) (palette.Ramp, error) {
			return recoloured(r, s.stop(), c, r.Cyclic() && !s.free), nil
		})
	}
	return nil
}

// recoloured is what the history says of a new colour in hand.
func (s *Screen) recolouredWords() string {
	switch s.hand.kind {
	case inside:
		return "inside recoloured"
	case edgeColour:
		return "edge line recoloured"
	}
	return "stop recoloured"
}

// slide moves the slider by steps, to its ends where fine is not asked for and
// by is infinite.
func (s *Screen) slide(by int, fine bool) tea.Cmd {
	w := sliders[s.slider]
	return s.slideTo(s.slider, s.mixed().v[s.slider]+float64(by)*pick(fine, w.fine, w.coarse))
}

// slideEnd moves the slider to its lower end, or to the last value that the
// sheet's space holds.
func (s *Screen) slideEnd(up bool) tea.Cmd {
	switch {
	case !up:
		return s.slideTo(s.slider, 0)
	case s.slider == sliderC:
		return s.slideTo(sliderC, math.Floor(s.mixed().limit(s.now().resolved.Space)/sliders[sliderC].fine)*sliders[sliderC].fine)
	case s.slider == sliderL:
		return s.slideTo(sliderL, s.lightest())
	}
	return s.slideTo(sliderH, 359.5)
}

// lightest is the last lightness of the mix's chroma and hue that the sheet's
// space holds, 1 where it holds none.
func (s *Screen) lightest() float64 {
	for v := 1.0; v > 0; v -= sliders[sliderL].fine {
		if _, in := s.mixed().at(sliderL, v).In(s.now().resolved.Space); in {
			return v
		}
	}
	return 1
}

func (s *Screen) slideTo(slider int, v float64) tea.Cmd {
	s.slider = slider
	m := s.mixed().with(slider, v)
	cmd := s.change(fmt.Sprint("slider ", slider, s.hand), s.recolouredWords(), func(k *frame.Ink) error { return s.setColour(k, m.of) })
	if cmd == nil {
		s.mix = m
	}
	return cmd
}

// askColour asks for the colour in hand as text.
func (s *Screen) askColour(proposal string) tea.Cmd {
	if s.at.kind == edgeWidth && s.desk.Frame.Ink.Edge != nil {
		s.hand = place{kind: edgeColour}
	}
	put := func(text string) func(k *frame.Ink) error {
		return func(k *frame.Ink) error {
			c, err := palette.ParseColour(strings.TrimSpace(text))
			if err != nil {
				return err
			}
			return s.setColour(k, c)
		}
	}
	return s.ask.Ask("colour of "+s.handWords()+":", proposal, func(text string) error { return s.try(put(text)) },
		func(text string) tea.Cmd {
			cmd := s.change("", s.recolouredWords(), put(text))
			s.settle()
			return cmd
		})
}

// askValue asks for the value of the line under the cursor.
func (s *Screen) askValue() tea.Cmd {
	rows := s.rows()
	r := rows[indexOf(rows, s.at)]
	if r.typed == nil {
		return nil
	}
	put := func(text string) func(k *frame.Ink) error {
		return func(k *frame.Ink) error { return r.typed(k, text) }
	}
	return s.ask.Ask(r.label+":", r.plain, func(text string) error { return s.try(put(text)) },
		func(text string) tea.Cmd {
			cmd := s.change("", r.what, put(text))
			s.settle()
			return cmd
		})
}

// stepEdge makes the edge line wider or narrower, in millimetres. None is 0.
func (s *Screen) stepEdge(by float64) tea.Cmd {
	return s.change("edge", "edge line changed", func(k *frame.Ink) error {
		mm := 0.0
		if k.Edge != nil {
			mm = k.Edge.Width.MM(s.now().resolved.Sheet.PPI)
		}
		mm = min(max(math.Round((mm+by)*100)/100, 0), 1000)
		return s.setEdge(k, sheet.MustLength(decimals(mm, 2)+"mm"))
	})
}

// typeEdge is the edge line's width as text.
func (s *Screen) typeEdge(k *frame.Ink, text string) error {
	text = strings.TrimSpace(text)
	if text == "none" || text == "0" || text == "" {
		k.Edge = nil
		return nil
	}
	l, err := sheet.ParseLength(text)
	if err != nil {
		return err
	}
	return s.setEdge(k, l)
}

// setEdge gives the edge line a width; it begins in the colour of the inside,
// which it bounds.
func (s *Screen) setEdge(k *frame.Ink, l sheet.Length) error {
	switch {
	case l.MM(s.now().resolved.Sheet.PPI) == 0:
		k.Edge = nil
	case k.Edge == nil:
		k.Edge = &frame.Edge{Width: l, Colour: s.now().resolved.Inside}
	default:
		k.Edge = &frame.Edge{Width: l, Colour: k.Edge.Colour}
	}
	return nil
}

// warning says that the colour in hand leaves the sheet's space, and how far;
// "" where it does not.
func (s *Screen) warning() string {
	space := s.now().resolved.Space
	d := beyond(s.colour(), space)
	if d == 0 {
		return ""
	}
	return fmt.Sprintf("ΔE %s outside %s; prints duller", deltaWords(d), space)
}

func deltaWords(d float64) string {
	if d < 0.1 {
		return "under 0.1"
	}
	return fmt.Sprintf("%.1f", d)
}
