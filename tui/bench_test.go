package tui

import (
	"bytes"
	"context"
	"path/filepath"
	"slices"
	"sync"
	"testing"
	"time"

	tea "github.com/charmbracelet/bubbletea"

	"leadline/render"
	"leadline/render/frame"
	"leadline/tui/engine"
	"leadline/tui/kit"
)

// deskAt is the program over a frame, with a working engine, on 200 x 60 cells.
func deskAt(b *testing.B, name string) (*model, chan *engine.Picture) {
	b.Helper()
	doc, err := frame.Load(filepath.Join("../testdata/frames", name+".frame.json"))
	if err != nil {
		b.Fatal(err)
	}
	light := false
	env := map[string]string{"TERM": "xterm-256color", "COLORTERM": "truecolor", "LANG": "C.UTF-8"}
	m, err := newModel(Options{Frame: doc.Frame, Output: new(bytes.Buffer), Light: &light, Getenv: func(k string) string { return env[k] }})
	if err != nil {
		b.Fatal(err)
	}
	m.desk.Pinned = false
	pictures := make(chan *engine.Picture, 10_000)
	m.desk.Engine = engine.New(func(p *engine.Picture) { pictures <- p })
	b.Cleanup(m.desk.Engine.Close)
	m.Update(tea.WindowSizeMsg{Width: 200, Height: 60})
	return m, pictures
}

// settle takes pictures until one is whole.
func settle(b *testing.B, m *model, pictures chan *engine.Picture) {
	b.Helper()
	for late := time.After(5 * time.Minute); ; {
		select {
		case p := <-pictures:
			m.Update(kit.Drawn{Picture: p})
			if p.Err != nil {
				b.Fatal(p.Err)
			}
			if p.Whole && m.desk.Picture == p {
				return
			}
		case <-late:
			b.Fatal("no whole picture")
		}
	}
}

// BenchmarkKeys presses keys at rest on 200 x 60 cells and takes the time until
// the screen has been drawn with the picture moved and scaled (first paint:
// median and the nine-in-ten bound), and until it is whole.
func BenchmarkKeys(b *testing.B) {
	keys := []tea.KeyMsg{keyOf("+"), keyOf("right"), keyOf("-"), keyOf("t"), keyOf("up"), keyOf("+"), keyOf("u"), keyOf("left"), keyOf("-"), keyOf("T")}
	for _, name := range []string{"gull-archipelago", "barnacle-lamp", "undertow", "samphire-star"} {
		b.Run(name, func(b *testing.B) {
			m, pictures := deskAt(b, name)
			settle(b, m, pictures)
			_ = m.View()
			var first, whole []float64
			size := 0
			b.ReportAllocs()
			for b.Loop() {
				k := keys[len(first)%len(keys)]
				start := time.Now()
				m.Update(k)
				s := m.View()
				first = append(first, float64(time.Since(start).Microseconds())/1000)
				size += len(s)
				settle(b, m, pictures)
				_ = m.View()
				whole = append(whole, float64(time.Since(start).Microseconds())/1000)
			}
			slices.Sort(first)
			slices.Sort(whole)
			b.ReportMetric(first[len(first)/2], "ms-first")
			b.ReportMetric(first[len(first)*9/10], "ms-first90")
			b.ReportMetric(whole[len(whole)/2], "ms-whole")
			b.ReportMetric(float64(size/len(first)), "B/frame")
		})
	}
}

// BenchmarkKeysBesideWork is BenchmarkKeys at one depth while a print takes all
// cores.
func BenchmarkKeysBesideWork(b *testing.B) {
	m, pictures := deskAt(b, "undertow")
	settle(b, m, pictures)
	ctx, cancel := context.WithCancel(b.Context())
	var wg sync.WaitGroup
	wg.Go(func() {
		for ctx.Err() == nil {
			_, _ = render.Print(ctx, m.desk.Frame, render.PrintOptions{Out: filepath.Join(b.TempDir(), "a.png")}) // until it is stopped
		}
	})
	var first, whole []float64
	for b.Loop() {
		start := time.Now()
		m.Update(keyOf([]string{"+", "right", "-", "left"}[len(first)%4]))
		_ = m.View()
		first = append(first, float64(time.Since(start).Microseconds())/1000)
		settle(b, m, pictures)
		whole = append(whole, float64(time.Since(start).Microseconds())/1000)
	}
	cancel()
	wg.Wait()
	slices.Sort(first)
	slices.Sort(whole)
	b.ReportMetric(first[len(first)/2], "ms-first")
	b.ReportMetric(first[len(first)*9/10], "ms-first90")
	b.ReportMetric(whole[len(whole)/2], "ms-whole")
}

// BenchmarkKeysUnderWay presses a key every 30 ms while pictures are under way,
// deeper and deeper: the first paint must not wait for anything.
func BenchmarkKeysUnderWay(b *testing.B) {
	for _, name := range []string{"gull-archipelago", "samphire-star"} {
		b.Run(name, func(b *testing.B) {
			m, pictures := deskAt(b, name)
			settle(b, m, pictures)
			var first []float64
			for b.Loop() {
				for len(pictures) > 0 {
					m.Update(kit.Drawn{Picture: <-pictures})
				}
				_ = m.View()
				was := m.desk.Frame
				start := time.Now()
				m.Update(keyOf([]string{"+", "right", "+", "up"}[len(first)%4]))
				_ = m.View()
				first = append(first, float64(time.Since(start).Microseconds())/1000)
				if m.desk.Frame == was {
					b.Fatal("the key was lost")
				}
				time.Sleep(30 * time.Millisecond)
			}
			slices.Sort(first)
			b.ReportMetric(first[len(first)/2], "ms-first")
			b.ReportMetric(first[len(first)*9/10], "ms-first90")
		})
	}
}
