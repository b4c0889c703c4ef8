package palette

// NamedRamp is a ramp of the house.
type NamedRamp struct {
	Name string // unique, for people and for configuration
	Note string // one line: what it is good for
	Ramp Ramp
}

// Ramps lists the ramps of the house, the default first. The slice is the
// caller's own.
func Ramps() []NamedRamp {
	return []NamedRamp{
		{"Eelgrass Vespers", "kelp black over verdigris and straw to cream, back through madder and mulberry; repeats without a seam",
			smooth(
				at(0, "oklch(0.165 0.022 212)"),
				at(0.10, "oklch(0.285 0.043 202)"),
				at(0.24, "oklch(0.475 0.068 178)"),
				at(0.37, "oklch(0.665 0.082 137)"),
				at(0.48, "oklch(0.835 0.088 102)"),
				at(0.57, "oklch(0.955 0.036 93)"),
				at(0.66, "oklch(0.820 0.088 72)"),
				at(0.76, "oklch(0.605 0.122 42)"),
				at(0.86, "oklch(0.405 0.110 22)"),
				at(0.94, "oklch(0.250 0.060 350)"),
				at(1, "oklch(0.165 0.022 212)"),
			)},
		{"Smoke over Larch", "warm black to bone by umber and old gold; one rise, like a gravure",
			smooth(
				at(0, "oklch(0.150 0.012 40)"),
				at(0.22, "oklch(0.310 0.036 48)"),
				at(0.48, "oklch(0.540 0.076 66)"),
				at(0.72, "oklch(0.760 0.088 84)"),
				at(0.90, "oklch(0.915 0.048 94)"),
				at(1, "oklch(0.975 0.014 98)"),
			)},
		{"Foxglove Weir", "plum and foxglove against river slate; repeats without a seam",
			smooth(
				at(0, "oklch(0.175 0.036 318)"),
				at(0.14, "oklch(0.330 0.092 335)"),
				at(0.30, "oklch(0.540 0.138 352)"),
				at(0.44, "oklch(0.740 0.096 10)"),
				at(0.56, "oklch(0.945 0.024 52)"),
				at(0.68, "oklch(0.780 0.040 196)"),
				at(0.82, "oklch(0.530 0.056 222)"),
				at(0.93, "oklch(0.300 0.052 262)"),
				at(1, "oklch(0.175 0.036 318)"),
			)},
		{"Rain on Copper", "burnt copper turning to verdigris and chalk; one rise",
			smooth(
				at(0, "oklch(0.155 0.022 28)"),
				at(0.18, "oklch(0.325 0.078 36)"),
				at(0.36, "oklch(0.500 0.088 52)"),
				at(0.54, "oklch(0.625 0.052 128)"),
				at(0.72, "oklch(0.745 0.070 172)"),
				at(0.88, "oklch(0.880 0.046 170)"),
				at(1, "oklch(0.972 0.012 150)"),
			)},
		{"Graphite Psalter", "greys, cool in the shadow and warm in the light, for matte black and for carbon inks; repeats without a seam",
			smooth(
				at(0, "oklch(0.160 0.008 262)"),
				at(0.22, "oklch(0.400 0.014 255)"),
				at(0.42, "oklch(0.680 0.008 130)"),
				at(0.58, "oklch(0.960 0.010 88)"),
				at(0.76, "oklch(0.620 0.018 66)"),
				at(0.92, "oklch(0.290 0.014 20)"),
				at(1, "oklch(0.160 0.008 262)"),
			)},
	}
}

// RampByName finds a ramp of the house.
func RampByName(name string) (Ramp, bool) {
	for _, r := range Ramps() {
		if r.Name == name {
			return r.Ramp, true
		}
	}
	return Ramp{}, false
}

// DefaultRamp is the ramp of a frame that names none: the first of Ramps.
func DefaultRamp() Ramp { return Ramps()[0].Ramp }

// DefaultInside is the colour of points that do not escape, for a frame that
// names none: a shade below the darkest of DefaultRamp, so that the two meet
// without a step and ink still lies on the paper.
func DefaultInside() Colour { return MustColour("#070d10") }

func at(place float64, css string) Stop { return Stop{At: place, Colour: MustColour(css)} }

func smooth(stops ...Stop) Ramp { return Ramp{Stops: stops, Smooth: true} }
