package cells

import (
	"fmt"
	"image"
	"math/rand/v2"
	"strconv"
	"strings"
	"testing"
)

// seen is what a terminal has in a cell after a line was written to it.
type seen struct {
	text string
	pen  pen
}

// interpret is a terminal for one line: SGR by ECMA-48 §8.3.117 and the indexed and
// direct colours of ISO 8613-6. It refuses anything else.
func interpret(line string) (cells []seen, end pen, err error) {
	for len(line) > 0 {
		if body, ok := strings.CutPrefix(line, "\x1b["); ok {
			params, rest, found := strings.Cut(body, "m")
			if !found {
				return nil, end, fmt.Errorf("no end of sequence in %q", line)
			}
			before := end
			if err := end.set(strings.Split(params, ";")); err != nil {
				return nil, end, fmt.Errorf("%q: %w", params, err)
			}
			if end == before {
				return nil, end, fmt.Errorf("%q changes nothing", params)
			}
			line = rest
			continue
		}
		r := []rune(line)[0]
		line = line[len(string(r)):]
		if runeWidth(r) == 0 {
			if len(cells) == 0 || r < ' ' {
				return nil, end, fmt.Errorf("%U has no letter", r)
			}
			cells[len(cells)-1].text += string(r)
			continue
		}
		cells = append(cells, seen{string(r), end})
		if runeWidth(r) == 2 {
			cells = append(cells, seen{"", end})
		}
	}
	return cells, end, nil
}

func (p *pen) set(params []string) error {
	for len(params) > 0 {
		n, err := strconv.Atoi("0" + params[0])
		if err != nil {
			return err
		}
		params = params[1:]
		switch {
		case n == 0:
			*p = pen{}
		case n == 1, n == 4, n == 7:
			p.attr |= map[int]Attr{1: Bold, 4: Underline, 7: Inverse}[n]
		case n == 22, n == 24, n == 27:
			p.attr &^= map[int]Attr{22: Bold, 24: Underline, 27: Inverse}[n]
		case n == 38, n == 48:
			var colour uint32
			if colour, params, err = longColour(params); err != nil {
				return err
			}
			p.paint(n < 40, colour)
		case n >= 30 && n < 50:
			colour := uint32(0) // 39 and 49
			if n%10 < 8 {
				colour = pen16 | uint32(n%10)
			}
			p.paint(n < 40, colour)
		case n >= 90 && n < 98, n >= 100 && n < 108:
			p.paint(n < 100, pen16|uint32(n%10+8))
		default:
			return fmt.Errorf("unknown parameter %d", n)
		}
	}
	return nil
}

func (p *pen) paint(letter bool, colour uint32) {
	if letter {
		p.fg = colour
	} else {
		p.bg = colour
	}
}

func longColour(params []string) (colour uint32, rest []string, err error) {
	count, kind := 1, uint32(pen256)
	if params[0] == "2" {
		count, kind = 3, penTrue
	} else if params[0] != "5" {
		return 0, nil, fmt.Errorf("unknown kind of colour %s", params[0])
	}
	for _, s := range params[1 : 1+count] {
		n, err := strconv.ParseUint(s, 10, 8)
		if err != nil {
			return 0, nil, err
		}
		colour = colour<<8 | uint32(n)
	}
	return kind | colour, params[1+count:], nil
}

// expect is what the terminal ought to have for a cell.
func expect(g *Grid, c Cell) seen {
	want := seen{pen: pen{g.code(c.FG), g.code(c.BG), c.Attr}}
	if c.Rune == Tail {
		return want
	}
	want.text = string(max(c.Rune, ' '))
	for _, m := range c.marks {
		if m != 0 {
			want.text += string(m)
		}
	}
	alike := want.pen.fg == want.pen.bg && want.pen.fg != 0 && c.Attr&(Underline|Inverse) == 0
	if _, parts := coverage(c.Rune); parts > 0 && alike {
		want.text = " "
	}
	return want
}

// compareLine reads a line back and compares it with row y, but for the letter's
// colour and weight where there is no letter.
func compareLine(t *testing.T, g *Grid, y int, line string) {
	t.Helper()
	got, end, err := interpret(line)
	if err != nil {
		t.Fatalf("row %d: %v", y, err)
	}
	if end != (pen{}) {
		t.Errorf("row %d leaves the terminal at %v", y, end)
	}
	if len(got) != g.Size().X {
		t.Fatalf("row %d is %d cells wide, want %d", y, len(got), g.Size().X)
	}
	for x := range got {
		want, have := expect(g, g.At(x, y)), got[x]
		if want.text == " " && want.pen.attr&(Underline|Inverse) == 0 {
			have.pen.fg, have.pen.attr = want.pen.fg, have.pen.attr&^Bold|want.pen.attr&Bold
		}
		if have != want {
			t.Fatalf("row %d column %d: the terminal has %+v, want %+v", y, x, have, want)
		}
	}
}

func depths() []Depth { return []Depth{None, C16, C256, TrueColour} }

func TestLinesReadBack(t *testing.T) {
	for _, m := range Meshes() {
		for _, d := range depths() {
			for _, dither := range []bool{false, true} {
				g := Draw(scene(m, 64, 20), m, d, Options{Dither: dither})
				g.Box(image.Rect(3, 2, 30, 12), Style{FG: Against, BG: Under})
				g.Text(5, 4, "été à 東京 e\u0301", Style{FG: RGB{9, 9, 9}.Solid(), BG: RGB{240, 230, 200}.Solid(), Attr: Bold})
				g.Text(50, 5, "over the edge …", Style{Attr: Inverse | Underline})
				for y, line := range g.Lines() {
					compareLine(t, g, y, line)
				}
			}
		}
	}
}

// TestRandomGridsReadBack covers every change from one pen to another.
func TestRandomGridsReadBack(t *testing.T) {
	rng := rand.New(rand.NewPCG(9, 10))
	paints := []Paint{Own, RGB{0, 0, 0}.Solid(), RGB{255, 255, 255}.Solid(), RGB{200, 0, 0}.Solid(), RGB{90, 90, 255}.Solid()}
	letters := []rune{0, ' ', 'a', '▀', '█', '▌', '東', '─', Tail, '\a', '\u0301', 0x1FB00}
	for _, d := range depths() {
		g := NewGrid(200, 20, d)
		for range 8000 {
			g.Set(rng.IntN(200), rng.IntN(20), Cell{
				Rune: letters[rng.IntN(len(letters))],
				FG:   paints[rng.IntN(len(paints))], BG: paints[rng.IntN(len(paints))],
				Attr: Attr(rng.IntN(8)),
			})
		}
		for y, line := range g.Lines() {
			compareLine(t, g, y, line)
		}
	}
}

// TestFewBytes pins the sequences themselves (ECMA-48 SGR, by hand).
func TestFewBytes(t *testing.T) {
	a, b := RGB{1, 20, 255}, RGB{255, 255, 255}
	for _, c := range []struct {
		depth Depth
		cells []Cell
		want  string
	}{
		{TrueColour, []Cell{{}, {Rune: 'x'}}, " x"},
		{TrueColour, []Cell{{Rune: ' ', BG: a.Solid()}, {Rune: ' ', FG: b.Solid(), BG: a.Solid()}}, "\x1b[48;2;1;20;255m  \x1b[m"},
		{TrueColour, []Cell{{Rune: '▀', FG: a.Solid(), BG: b.Solid()}, {Rune: '▀', FG: b.Solid(), BG: b.Solid()}}, "\x1b[38;2;1;20;255;48;2;255;255;255m▀ \x1b[m"},
		{C256, []Cell{{Rune: '▀', FG: b.Solid(), BG: RGB{255, 0, 0}.Solid()}, {Rune: 'y'}}, "\x1b[38;5;231;48;5;196m▀\x1b[my"},
		{C16, []Cell{{Rune: 'a', FG: b.Solid(), BG: RGB{205, 0, 0}.Solid()}, {Rune: 'b', FG: RGB{205, 0, 0}.Solid()}}, "\x1b[97;41ma\x1b[31;49mb\x1b[m"},
		{C16, []Cell{{Rune: 'a', BG: b.Solid(), Attr: Bold}, {Rune: 'b', BG: b.Solid(), Attr: Underline}}, "\x1b[1;107ma\x1b[22;4mb\x1b[m"},
		{C16, []Cell{{Rune: 'a', Attr: Bold}, {}, {Rune: 'b', Attr: Bold}}, "\x1b[1ma b\x1b[m"},
		{None, []Cell{{Rune: 'a', FG: b.Solid(), BG: a.Solid()}, {Rune: 'b', Attr: Inverse}}, "a\x1b[7mb\x1b[m"},
	} {
		g := NewGrid(len(c.cells), 1, c.depth)
		for x, cell := range c.cells {
			g.Set(x, 0, cell)
		}
		if got := g.Lines()[0]; got != c.want {
			t.Errorf("%s %v:\n got %q\nwant %q", c.depth, c.cells, got, c.want)
		}
	}
}

func TestAppendLineAppends(t *testing.T) {
	g := NewGrid(3, 2, None)
	g.Text(0, 1, "abc", Style{})
	if got := string(g.AppendLine([]byte("> "), 1)); got != "> abc" {
		t.Errorf("got %q", got)
	}
}
