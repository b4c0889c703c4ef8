package kit

import (
	"errors"
	"testing"

	"leadline/render/frame"
)

func start(t *testing.T) *frame.Frame {
	t.Helper()
	f, err := frame.Parse([]byte(`{"format":"leadline.frame/1","set":{"kind":"mandelbrot"},"view":{"centre":{"re":"0","im":"0"},"height":"2"},
		"iteration":{"limit":10},"sheet":{"width":"30mm","height":"20mm"}}`))
	if err != nil {
		t.Fatal(err)
	}
	return f
}

func limit(n int) func(*frame.Frame) error {
	return func(f *frame.Frame) error { f.Iteration.Limit = n; return nil }
}

// TestHistory steps back and forward through all changes; a new change ends the
// way forward, a refused one leaves everything as it is.
func TestHistory(t *testing.T) {
	d := NewDesk(start(t))
	first := d.Frame
	for n := 11; n <= 13; n++ {
		if err := d.Change("set", limit(n)); err != nil {
			t.Fatal(err)
		}
	}
	if err := d.Change("set", limit(13)); err != nil {
		t.Fatal(err)
	}
	if back, _ := d.Steps(); back != 3 {
		t.Errorf("%d steps: doing nothing is none", back)
	}
	refused := errors.New("no")
	if err := d.Change("set", func(*frame.Frame) error { return refused }); err != refused || d.Frame.Iteration.Limit != 13 {
		t.Errorf("%v, limit %d", err, d.Frame.Iteration.Limit)
	}
	if err := d.Change("set", limit(-1)); err == nil || d.Frame.Iteration.Limit != 13 {
		t.Errorf("%v, limit %d", err, d.Frame.Iteration.Limit)
	}
	if d.Back() != "set" || d.Frame.Iteration.Limit != 12 || d.Back() != "set" || d.Frame.Iteration.Limit != 11 {
		t.Errorf("limit %d", d.Frame.Iteration.Limit)
	}
	if d.Forward() != "set" || d.Frame.Iteration.Limit != 12 {
		t.Errorf("limit %d", d.Frame.Iteration.Limit)
	}
	if err := d.Change("other", limit(20)); err != nil {
		t.Fatal(err)
	}
	if back, forward := d.Steps(); back != 3 || forward != 0 || d.Forward() != "" {
		t.Errorf("%d back, %d forward", back, forward)
	}
	for range 3 {
		d.Back()
	}
	if d.Frame != first || d.Back() != "" || d.Unsaved() {
		t.Error("the beginning was not reached")
	}
}

// TestHistoryBound forgets the oldest steps.
func TestHistoryBound(t *testing.T) {
	d := NewDesk(start(t))
	for n := range maxHistory + 50 {
		if err := d.Change("set", limit(100+n)); err != nil {
			t.Fatal(err)
		}
	}
	if back, _ := d.Steps(); back != maxHistory {
		t.Errorf("%d steps", back)
	}
}
