package ink

import (
	"math"
	"slices"

	"leadline/render/frame"
)

// Fit lays a ramp over surveyed smooth counts: the base is the whole number
// below the least of them (or the one given), the ends are the wanted
// percentiles of the scaled counts, by nearest rank. Without counts it returns
// a range that shows nothing wrong.
func Fit(d frame.ResolvedDrive, base *float64, counts []float64) frame.Fitted {
	if len(counts) == 0 {
		return frame.Fitted{Low: 0, High: 1}
	}
	s := Scale{Kind: d.Scale, Exponent: d.Exponent}
	switch {
	case base != nil:
		s.Base = *base
	case d.Scale != frame.Linear:
		s.Base = math.Floor(slices.Min(counts))
	}
	scaled := make([]float64, len(counts))
	for i, c := range counts {
		scaled[i] = s.Of(c)
	}
	slices.Sort(scaled)
	f := frame.Fitted{Base: s.Base, Low: percentile(scaled, d.Fit.Low), High: percentile(scaled, d.Fit.High)}
	if !(f.High > f.Low) {
		f.High = f.Low + 1
	}
	return f
}

// percentile is the nearest-rank percentile of sorted values.
func percentile(sorted []float64, p float64) float64 {
	i := int(math.Ceil(float64(p/100*float64(len(sorted))))) - 1
	return sorted[min(max(i, 0), len(sorted)-1)]
}
