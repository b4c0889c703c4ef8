package render

import (
	"context"
	"image"
	"testing"

	"leadline/precision"
	"leadline/render/frame"
	"leadline/render/printfile"
)

// The test frames, found by our own computation: nuclei and points near them,
// walked to from a first period. Each is a small sheet of 48 x 32 pixels.
var testFrames = []struct{ name, set, re, im, height, more string }{
	{"whole", `{"kind":"mandelbrot"}`, "-0.6", "0", "2.6", `"iteration":{"limit":600}`},
	{"double", `{"kind":"mandelbrot"}`,
		"-1.2657434006703225312498966208983257319501599678178995046817859118442",
		"0.0435780518717391346970082171108054810106326917096562049848192832773", "3.99e-54",
		`"iteration":{"limit":17000}`},
	{"turned", `{"kind":"mandelbrot"}`,
		"-1.065866806713369518631862256074814764050936243311911509",
		"0.257348696811149856006601197899205546087486980835796257", "8.89e-41",
		`"iteration":{"limit":6000}`},
	// The tip: z = -2 + 1e-400, far into extended range.
	{"deep", `{"kind":"mandelbrot"}`, "-2", "0", "4e-400", `"iteration":{"limit":3000}`},
	{"cube", `{"kind":"mandelbrot","power":3}`, "0.38", "0.9", "0.5e-6", `"iteration":{"limit":900}`},
	{"julia", `{"kind":"julia","parameter":{"re":"-0.12","im":"0.74"}}`, "0", "0", "2.4", `"iteration":{"limit":900}`},
	// A repelling fixed point of z² - 2 is 2: the Julia set's right end.
	{"julia-deep", `{"kind":"julia","parameter":{"re":"-2","im":"0"}}`, "2", "0", "3e-30", `"iteration":{"limit":900}`},
}

// testFrame parses the frame of a name; extra members of the document follow.
func testFrame(t testing.TB, name string) *frame.Frame {
	t.Helper()
	for _, f := range testFrames {
		if f.name != name {
			continue
		}
		turn := "0deg"
		if name == "turned" {
			turn = "-33.5deg"
		}
		doc := `{"format":"leadline.frame/1","set":` + f.set + `,"view":{"centre":{"re":"` + f.re +
			`","im":"` + f.im + `"},"height":"` + f.height + `","turn":"` + turn + `"},` + f.more +
			`,"sampling":{"least":2,"most":8},"ink":{"edge":{"width":"0.3px","colour":"#f0e8d8"}},` +
			`"sheet":{"width":"48px","height":"32px","bleed":"3px","space":"display-p3"}}`
		v, err := frame.Parse([]byte(doc))
		if err != nil {
			t.Fatal(err)
		}
		return v
	}
	t.Fatalf("no test frame %q", name)
	return nil
}

// testPlan is the plan of a test frame.
func testPlan(t testing.TB, name string) *Plan {
	t.Helper()
	p, err := NewPlan(context.Background(), testFrame(t, name), Options{Workers: 2})
	if err != nil {
		t.Fatal(err)
	}
	return p
}

// rowsOf renders r through the bands and returns its rows and their hash.
func rowsOf(t testing.TB, p *Plan, r image.Rectangle, k, workers int) ([]byte, string) {
	t.Helper()
	var all []byte
	var h printfile.Hasher
	_, err := p.Bands(context.Background(), r, k, Options{Workers: workers}, func(rows []byte) error {
		all = append(all, rows...)
		_, err := h.Write(rows)
		return err
	})
	if err != nil {
		t.Fatal(err)
	}
	return all, h.Hex()
}

func mustDecimal(t testing.TB, s string) precision.Decimal {
	t.Helper()
	d, err := precision.ParseDecimal(s)
	if err != nil {
		t.Fatal(err)
	}
	return d
}
