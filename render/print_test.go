package render

import (
	"context"
	"errors"
	"image"
	"image/png"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"time"

	"leadline/render/frame"
	"leadline/render/printfile"
)

// printed prints a test frame into a fresh folder.
func printed(t *testing.T, name string, o PrintOptions) (*Result, error) {
	t.Helper()
	if o.Out == "" {
		o.Out = filepath.Join(t.TempDir(), name+".png")
	}
	return Print(context.Background(), testFrame(t, name), o)
}

// TestPrintAndVerify prints, reads the file with the standard library, and
// verifies from the sidecar, from the PNG alone, whole and in tiles.
func TestPrintAndVerify(t *testing.T) {
	r, err := printed(t, "double", PrintOptions{Audit: 8})
	if err != nil {
		t.Fatal(err)
	}
	if r.Audit.Checked != 8 || r.Audit.Failed != 0 || r.Audit.Equal+r.Audit.Within != 8 {
		t.Errorf("audit %+v", r.Audit)
	}
	if n := r.Counts; n.Pixels != 54*38 || n.Samples != n.Escaped+n.Inside+n.Undecided || n.Samples < 2*n.Pixels {
		t.Errorf("counts %+v", n)
	}
	file, err := os.Open(r.File)
	if err != nil {
		t.Fatal(err)
	}
	defer file.Close()
	img, err := png.Decode(file)
	if err != nil || img.Bounds() != image.Rect(0, 0, 54, 38) {
		t.Fatal(img.Bounds(), err)
	}
	verifies(t, r.Sidecar, 0)
	verifies(t, r.File, 0)
	verifies(t, r.File, 3)
	if err := os.Remove(r.Sidecar); err != nil {
		t.Fatal(err)
	}
	verifies(t, r.File, 0)
}

func verifies(t *testing.T, path string, sample int) {
	t.Helper()
	e, err := Gather(path)
	if err != nil {
		t.Fatal(err)
	}
	if _, err := Verify(context.Background(), e, sample, 5, Options{}); err != nil {
		t.Errorf("%s, %d tiles: %v", filepath.Base(path), sample, err)
	}
}

// TestVerifyFindsOnePixel changes one code of one pixel by one.
func TestVerifyFindsOnePixel(t *testing.T) {
	r, err := printed(t, "double", PrintOptions{})
	if err != nil {
		t.Fatal(err)
	}
	in, err := printfile.Open(r.File)
	if err != nil {
		t.Fatal(err)
	}
	rows := make([]byte, r.Width*r.Height*BytesPerPixel)
	if err := readRows(in, rows); err != nil {
		t.Fatal(err)
	}
	info := in.Info()
	in.Close()
	rows[(20*r.Width+11)*BytesPerPixel+3] ^= 1
	w, err := printfile.Create(r.File, info, 1)
	if err != nil {
		t.Fatal(err)
	}
	if err := w.WriteRows(rows); err != nil {
		t.Fatal(err)
	}
	if _, err := w.Commit(); err != nil {
		t.Fatal(err)
	}
	e, err := Gather(r.File)
	if err != nil {
		t.Fatal(err)
	}
	_, err = Verify(context.Background(), e, 0, 0, Options{})
	var m *MismatchError
	if !errors.As(err, &m) || m.What != "pixels: 1 of 2052 differ from a fresh render, the first at 8,17" {
		t.Errorf("one changed pixel: %v", err)
	}
}

// TestVerifyRefusesOtherNumerics names both releases.
func TestVerifyRefusesOtherNumerics(t *testing.T) {
	e := &Evidence{Frame: testFrame(t, "whole"), Origin: Origin{"9.9", Numerics + 1, frame.Pixels{Width: 1, Height: 1, Scale: 1}}}
	var m *MismatchError
	if _, err := Verify(context.Background(), e, 0, 0, Options{}); !errors.As(err, &m) {
		t.Errorf("other numerics: %v", err)
	}
}

// TestAuditCatches feeds the audit rows with one wrong code a pixel.
func TestAuditCatches(t *testing.T) {
	p := testPlan(t, "double")
	rect := p.Geometry.Full()
	rows, _ := rowsOf(t, p, rect, 1, 2)
	for i := range rows {
		rows[i] ^= byte(i & 1) // the low byte of each code
	}
	a := newAuditor(p, rect, 1, 6, []byte("x"))
	a.watch(rows)
	if r, err := a.run(context.Background(), Options{}); err != nil || r.Failed != 6 {
		t.Errorf("audit of wrong pixels: %+v, %v", r, err)
	}
}

// TestCompareCatches judges fields that are wrong by one count, by a little
// smooth count, or in their state.
func TestCompareCatches(t *testing.T) {
	p := testPlan(t, "double")
	x, y := 11.5, 20.5
	e, err := p.Exact(context.Background(), x, y)
	if err != nil {
		t.Fatal(err)
	}
	f := p.Field(x, y)
	if a, robust := p.Compare(f, e); a != Equal || !robust {
		t.Fatalf("a right field is judged %v (robust %v)", a, robust)
	}
	for name, wrong := range map[string]func(){
		"count":  func() { f.N++ },
		"smooth": func() { f.Smooth += 1e-6 },
		"state":  func() { f.State = 1 },
	} {
		f = p.Field(x, y)
		wrong()
		if a, _ := p.Compare(f, e); a != Wrong {
			t.Errorf("a wrong %s is judged %v", name, a)
		}
	}
}

// TestScaledPrintLooksAlike: a print at 1/4 is the mean of the whole, within
// what the sampling leaves.
func TestScaledPrintLooksAlike(t *testing.T) {
	p := testPlan(t, "julia")
	g := p.Geometry.Scaled(4)
	if g.TrimW != 12 || g.TrimH != 8 {
		t.Fatal(g)
	}
	small, _ := rowsOf(t, p, g.Trim(), 4, 2)
	large, _ := rowsOf(t, p, p.Geometry.Trim(), 1, 2)
	var a, b float64
	for i := 0; i < len(small); i += 2 {
		a += p.Space.Decode(uint16(small[i])<<8 | uint16(small[i+1]))
	}
	for i := 0; i < len(large); i += 2 {
		b += p.Space.Decode(uint16(large[i])<<8 | uint16(large[i+1]))
	}
	a, b = a/float64(len(small)), b/float64(len(large))
	if a < 0.9*b || a > 1.1*b {
		t.Errorf("mean light %v at 1/4, %v whole", a, b)
	}
}

// TestCancelStopsSoon interrupts a frame whose every sample runs long.
func TestCancelStopsSoon(t *testing.T) {
	f := testFrame(t, "whole")
	f.View.Centre.Re = mustDecimal(t, "-0.75") // where the cardioid meets the disc: slow
	f.View.Height = mustDecimal(t, "1e-5")
	f.Iteration.Limit = 3_000_000
	p, err := NewProbe(context.Background(), f, Options{})
	if err != nil {
		t.Fatal(err)
	}
	ctx, cancel := context.WithTimeout(context.Background(), 100*time.Millisecond)
	defer cancel()
	start := time.Now()
	_, err = p.Survey(ctx, Options{})
	if !errors.Is(err, context.DeadlineExceeded) {
		t.Fatalf("a survey of slow samples ended with %v", err)
	}
	if d := time.Since(start); d > 5*time.Second {
		t.Errorf("stopped only after %v", d)
	}
}

// TestSinkErrorEndsTheRender: what the writer says comes back, and soon.
func TestSinkErrorEndsTheRender(t *testing.T) {
	p := testPlan(t, "whole")
	full := errors.New("disk full")
	_, err := p.Bands(context.Background(), p.Geometry.Full(), 1, Options{}, func([]byte) error { return full })
	if !errors.Is(err, full) {
		t.Errorf("got %v", err)
	}
}

// TestFrozenFrameIsComplete: a frozen frame written and read again resolves to
// the same values, and holds each default that decides a pixel.
func TestFrozenFrameIsComplete(t *testing.T) {
	p := testPlan(t, "double")
	b, err := p.Frame().Marshal()
	if err != nil {
		t.Fatal(err)
	}
	f, err := frame.Parse(b)
	if err != nil {
		t.Fatal(err)
	}
	if !f.Frozen() || f.Set.Power == 0 || f.Iteration.Bailout == 0 || f.Sampling.Tolerance == nil ||
		f.Sampling.Filter == "" || f.Ink.Ramp == nil || f.Ink.Inside == nil || f.Sheet.PPI == 0 || f.Sheet.Space == "" {
		t.Errorf("frozen frame leaves something open:\n%s", b)
	}
}

// TestVerifyReadsTheRecord alters counts and reference of a sidecar, one at a
// time.
func TestVerifyReadsTheRecord(t *testing.T) {
	r, err := printed(t, "double", PrintOptions{})
	if err != nil {
		t.Fatal(err)
	}
	for name, alter := range map[string]func(*frame.Record){
		"counts":    func(v *frame.Record) { v.Counts.Samples++; v.Counts.Escaped++ },
		"reference": func(v *frame.Record) { v.Reference.Bits++ },
	} {
		e, err := Gather(r.Sidecar)
		if err != nil {
			t.Fatal(err)
		}
		alter(e.Record)
		var m *MismatchError
		if _, err := Verify(context.Background(), e, 0, 0, Options{}); !errors.As(err, &m) || !strings.Contains(m.What, name) {
			t.Errorf("altered %s: %v", name, err)
		}
	}
}
