package paper

import "image"

// layout is where the parts stand on the screen, in cells; parts that there is
// no room for are empty.
type layout struct {
	form     image.Rectangle // the fields, and below them what has no place of its own
	sheet    image.Rectangle // the drawn sheet
	facts    image.Rectangle // empty: below the fields
	findings image.Rectangle // empty: below the facts
}

// Widths and heights that the layouts go by.
const (
	formWide    = 44
	formRoomy   = 50
	twoFrom     = 72 // columns
	roomyFrom   = 100
	threeFrom   = 140
	factsWide   = 52
	factsRows   = 7  // with their heading
	leastSheet  = 9  // rows of the drawn sheet
	leastFinds  = 6  // rows of findings
	narrowSheet = 28 // rows of a narrow screen, from which the sheet is drawn above the form
	stackedFrom = 29 // rows, from which the consequences stand below the form with its headings
	tallFrom    = 42 // rows, from which everything that is read stands in one column
)

// lay shares the screen out; finds is how many rows the findings would like.
func lay(width, height, finds int) layout {
	all := image.Rect(0, 0, width, height)
	switch {
	case width >= roomyFrom && height >= tallFrom:
		l := layout{form: all, sheet: all}
		l.form.Max.X = formRoomy
		l.sheet.Min.X = formRoomy + 2
		return l
	case width >= threeFrom && height >= factsRows+leastFinds+1 && height < stackedFrom:
		return layThree(all)
	case width >= twoFrom:
		return layTwo(all, finds)
	case height >= narrowSheet:
		l := layout{form: all, sheet: all}
		l.sheet.Max.Y = height / 3
		l.form.Min.Y = l.sheet.Max.Y + 1
		return l
	}
	return layout{form: all}
}

// layThree: form, sheet, and consequences above findings.
func layThree(all image.Rectangle) layout {
	l := layout{form: all, sheet: all, facts: all, findings: all}
	l.form.Max.X = formRoomy
	l.facts.Min.X = all.Max.X - factsWide
	l.findings.Min.X = l.facts.Min.X
	l.sheet.Min.X, l.sheet.Max.X = l.form.Max.X+2, l.facts.Min.X-2
	l.facts.Max.Y = factsRows
	l.findings.Min.Y = factsRows + 1
	return l
}

// layTwo: form with the consequences below it, sheet above findings.
func layTwo(all image.Rectangle, finds int) layout {
	l := layout{form: all, sheet: all, findings: all}
	l.form.Max.X = formWide
	if all.Dx() >= roomyFrom {
		l.form.Max.X = formRoomy
	}
	l.sheet.Min.X, l.findings.Min.X = l.form.Max.X+1, l.form.Max.X+1
	rows := min(max(finds, leastFinds), max(leastFinds, all.Dy()-max(leastSheet, all.Dy()/2)-1))
	if all.Dy() < leastSheet+leastFinds {
		l.sheet = image.Rectangle{}
		return l
	}
	l.findings.Min.Y = all.Max.Y - rows
	l.sheet.Max.Y = l.findings.Min.Y - 1
	return l
}
