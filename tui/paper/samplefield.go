package paper

import (
	"fmt"
	"strconv"
	"strings"

	"leadline/render/frame"
)

func shownLeast(s *Screen) (string, string) { return strconv.Itoa(s.resolve().Least), "every pixel" }
func shownMost(s *Screen) (string, string) {
	return strconv.Itoa(s.resolve().Most), "where it is restless"
}

func setLeast(f *frame.Frame, n int) { f.Sampling.Least = n }
func setMost(f *frame.Frame, n int)  { f.Sampling.Most = n }

func readCount(set func(*frame.Frame, int)) func(*Screen, string) (edit, error) {
	return func(_ *Screen, text string) (edit, error) {
		n, err := whole(text)
		return edit{frame: func(f *frame.Frame) { set(f, n) }}, err
	}
}

// nextCount doubles and halves, along the powers of two.
func nextCount(of func(*frame.Resolved) int, set func(*frame.Frame, int)) func(*Screen, int) edit {
	var powers []float64
	for n := 1; n <= frame.MaxSamples; n *= 2 {
		powers = append(powers, float64(n))
	}
	return func(s *Screen, by int) edit {
		to := int(beside(powers, float64(of(s.resolve())), by))
		return edit{frame: func(f *frame.Frame) { set(f, to) }}
	}
}

func short(v float64) string { return strconv.FormatFloat(v, 'g', -1, 64) }

func shownTolerance(s *Screen) (string, string) {
	t := s.resolve().Tolerance
	if t == 0 {
		return "0", "every pixel gets the most"
	}
	return short(t), fmt.Sprintf("%s %% of full light", short(100*t))
}

func textTolerance(s *Screen) string { return short(s.resolve().Tolerance) }

func readTolerance(_ *Screen, text string) (edit, error) {
	t := strings.TrimSpace(text)
	if t == "" {
		return edit{frame: func(f *frame.Frame) { f.Sampling.Tolerance = nil }}, nil
	}
	v, err := strconv.ParseFloat(t, 64)
	if err != nil {
		return edit{}, &entryError{fmt.Sprintf("%.40q is not a number", text), "write a number from 0 to 1, or nothing for the default"}
	}
	return edit{frame: func(f *frame.Frame) { f.Sampling.Tolerance = &v }}, nil
}

func nextTolerance(s *Screen, by int) edit {
	to := beside([]float64{0, 0.001, 0.002, 0.004, 0.008, 0.016, 0.032}, s.resolve().Tolerance, by)
	return edit{frame: func(f *frame.Frame) { f.Sampling.Tolerance = &to }}
}
