package compose

import (
	"fmt"
	"math"
	"strings"

	"leadline/tui/kit"
)

// scaleTop is the least depth that the sounding line's foot stands for.
const scaleTop = 10

// niceSteps are the distances, in decades, between the line's figures.
var niceSteps = []float64{1, 2, 5, 10, 20, 50, 100, 200, 500, 1000, 2000, 5000}

// sounding is the scale of the line: its foot, and the distance of figures.
func sounding(now float64, marks []kit.Mark, rows int) (foot, step float64) {
	foot = math.Max(scaleTop, now*1.2)
	for _, m := range marks {
		foot = math.Max(foot, depth(m.View)*1.02)
	}
	for _, step = range niceSteps {
		if foot/step <= float64(rows)/3 {
			break
		}
	}
	return math.Ceil(foot/step) * step, step
}

// soundingLine draws the line: figures of depth, the marked places, and the
// lead on its cord at the present depth.
func (s *Screen) soundingLine(width, rows int) string {
	if width == 0 {
		return ""
	}
	st := s.desk.Style
	now := math.Max(0, depth(s.desk.Frame.View))
	foot, step := sounding(now, s.desk.Marks, rows)
	row := func(d float64) int { return min(rows-1, max(0, int(math.Round(d/foot*float64(rows-1))))) }
	figures, names := map[int]string{}, map[int]string{}
	for d := 0.0; d <= foot; d += step {
		figures[row(d)] = fmt.Sprintf("%.0f", d)
	}
	for _, m := range s.desk.Marks {
		names[row(depth(m.View))] = m.Name
	}
	lead := row(now)
	signs := []string{"◆", "│", "┊", "┼", "▸"} // lead, cord, water below, figure, mark
	if s.desk.ASCII {
		signs = []string{"O", "|", ":", "+", ">"}
	}
	lines := make([]string, rows)
	for y := range lines {
		cord, knot := signs[2], st.Faint
		switch {
		case y == lead:
			cord, knot = signs[0], st.Lead
		case y < lead:
			cord, knot = signs[1], st.Lead
		}
		left, style := figures[y], st.Faint
		if left != "" && y != lead {
			cord = signs[3]
		}
		if y == lead {
			left, style = depthFigure(now, width-2), st.Lead
		} else if name, ok := names[y]; ok {
			left, style, cord = name, st.Warn, signs[4]
		}
		figure := kit.Fit(left, width-2)
		if len(left) < width-2 {
			figure = strings.Repeat(" ", width-2-len([]rune(left))) + left
		}
		lines[y] = style.Render(figure) + knot.Render(cord) + " "
	}
	return strings.Join(lines, "\n")
}

// depthFigure writes a depth in at most width characters.
func depthFigure(d float64, width int) string {
	for places := 2; places > 0; places-- {
		if s := fmt.Sprintf("%.*f", places, d); len(s) <= width {
			return s
		}
	}
	return fmt.Sprintf("%.0f", d)
}
