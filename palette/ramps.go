package palette

import (
	"slices"
	"sync"
)

// Ramps lists the ramps of the house, the default first. The slice is the
// caller's own. Each is drawn in OKLCH: lightness runs smoothly and far, so that
// a print's detail is there in grey as well; chroma stays up between hues that
// would else meet in mud, or passes through near-white or near-black, where
// grey is no loss; and everything lies within sRGB, so that no sheet's space
// changes it.
func Ramps() []NamedRamp {
	all := slices.Clone(house())
	for i := range all {
		all[i].Ramp.Stops = slices.Clone(all[i].Ramp.Stops)
	}
	return all
}

// house reads the ramps' colours once; frames are resolved often.
var house = sync.OnceValue(func() []NamedRamp { return append(roundRamps(), risingRamps()...) })

// roundRamps end in the colour they begin with: a drive with a period repeats
// them without a seam.
func roundRamps() []NamedRamp {
	return []NamedRamp{
		{"Eelgrass Vespers", "kelp black over verdigris and straw to cream, back through madder and mulberry; seamless",
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
		{"Foxglove Weir", "plum and foxglove against river slate; seamless",
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
		{"Graphite Psalter", "greys, cool in the shadow and warm in the light, for matte black and for carbon inks; seamless",
			smooth(
				at(0, "oklch(0.160 0.008 262)"),
				at(0.22, "oklch(0.400 0.014 255)"),
				at(0.42, "oklch(0.680 0.008 130)"),
				at(0.58, "oklch(0.960 0.010 88)"),
				at(0.76, "oklch(0.620 0.018 66)"),
				at(0.92, "oklch(0.290 0.014 20)"),
				at(1, "oklch(0.160 0.008 262)"),
			)},
		{"Harbour Lamps", "a blue night and one amber lamp in it; seamless",
			smooth(
				at(0, "oklch(0.145 0.035 268)"),
				at(0.16, "oklch(0.245 0.080 266)"),
				at(0.32, "oklch(0.390 0.108 260)"),
				at(0.45, "oklch(0.550 0.080 278)"),
				at(0.54, "oklch(0.690 0.068 340)"),
				at(0.64, "oklch(0.800 0.098 62)"),
				at(0.71, "oklch(0.925 0.082 90)"),
				at(0.775, "oklch(0.760 0.138 68)"),
				at(0.855, "oklch(0.480 0.118 44)"),
				at(0.93, "oklch(0.260 0.060 348)"),
				at(1, "oklch(0.145 0.035 268)"),
			)},
		{"Leading Lights", "two lights in line out of aubergine dark, a coral one and a turquoise one; two swells, seamless",
			smooth(
				at(0, "oklch(0.170 0.048 305)"),
				at(0.07, "oklch(0.325 0.115 358)"),
				at(0.155, "oklch(0.590 0.172 24)"),
				at(0.225, "oklch(0.800 0.105 48)"),
				at(0.272, "oklch(0.925 0.045 70)"),
				at(0.327, "oklch(0.780 0.105 36)"),
				at(0.412, "oklch(0.500 0.150 10)"),
				at(0.505, "oklch(0.215 0.060 310)"),
				at(0.570, "oklch(0.335 0.078 248)"),
				at(0.655, "oklch(0.580 0.088 205)"),
				at(0.715, "oklch(0.800 0.100 186)"),
				at(0.763, "oklch(0.950 0.035 178)"),
				at(0.817, "oklch(0.760 0.090 200)"),
				at(0.915, "oklch(0.430 0.090 248)"),
				at(1, "oklch(0.170 0.048 305)"),
			)},
		{"Lavender and Lichen", "sea lavender rising to white, lichen gold going down; seamless",
			smooth(
				at(0, "oklch(0.190 0.060 300)"),
				at(0.16, "oklch(0.370 0.120 296)"),
				at(0.32, "oklch(0.580 0.125 292)"),
				at(0.46, "oklch(0.800 0.075 290)"),
				at(0.56, "oklch(0.968 0.012 110)"),
				at(0.66, "oklch(0.850 0.110 105)"),
				at(0.78, "oklch(0.620 0.105 98)"),
				at(0.89, "oklch(0.390 0.065 75)"),
				at(1, "oklch(0.190 0.060 300)"),
			)},
		{"Herring Silver", "pearl and slate in two soft swells, faintly rose, faintly green; light, seamless",
			smooth(
				at(0, "oklch(0.420 0.030 250)"),
				at(0.14, "oklch(0.680 0.035 230)"),
				at(0.27, "oklch(0.930 0.022 190)"),
				at(0.40, "oklch(0.800 0.040 165)"),
				at(0.52, "oklch(0.610 0.035 210)"),
				at(0.64, "oklch(0.780 0.045 330)"),
				at(0.76, "oklch(0.965 0.018 50)"),
				at(0.88, "oklch(0.700 0.045 300)"),
				at(1, "oklch(0.420 0.030 250)"),
			)},
		{"Survey Sheet", "paper, shoal blue and land buff with a line of ink between: contours as a chart draws them; seamless",
			smooth(
				at(0, "oklch(0.260 0.030 250)"),
				at(0.12, "oklch(0.570 0.085 238)"),
				at(0.26, "oklch(0.800 0.075 228)"),
				at(0.42, "oklch(0.930 0.032 215)"),
				at(0.53, "oklch(0.975 0.014 95)"),
				at(0.65, "oklch(0.920 0.060 90)"),
				at(0.77, "oklch(0.790 0.095 80)"),
				at(0.89, "oklch(0.530 0.080 58)"),
				at(1, "oklch(0.260 0.030 250)"),
			)},
	}
}

// risingRamps begin dark and end light: fitted, they are one rise; with a
// period they run to and fro.
func risingRamps() []NamedRamp {
	return []NamedRamp{
		{"Smoke over Larch", "warm black to bone by umber and old gold; one rise, like a gravure",
			smooth(
				at(0, "oklch(0.150 0.012 40)"),
				at(0.22, "oklch(0.310 0.036 48)"),
				at(0.48, "oklch(0.540 0.076 66)"),
				at(0.72, "oklch(0.760 0.088 84)"),
				at(0.90, "oklch(0.915 0.048 94)"),
				at(1, "oklch(0.975 0.014 98)"),
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
		{"Making Tide", "deep water to surf by blue, green water and foam; one rise",
			smooth(
				at(0, "oklch(0.150 0.050 262)"),
				at(0.20, "oklch(0.310 0.095 256)"),
				at(0.42, "oklch(0.500 0.105 238)"),
				at(0.62, "oklch(0.680 0.105 208)"),
				at(0.80, "oklch(0.850 0.085 186)"),
				at(0.93, "oklch(0.955 0.035 172)"),
				at(1, "oklch(0.985 0.010 130)"),
			)},
		{"Red Lead", "hull black through oxblood and primer red to sailcloth; one rise",
			smooth(
				at(0, "oklch(0.140 0.030 20)"),
				at(0.20, "oklch(0.290 0.095 22)"),
				at(0.42, "oklch(0.470 0.165 28)"),
				at(0.60, "oklch(0.635 0.180 38)"),
				at(0.76, "oklch(0.770 0.120 52)"),
				at(0.90, "oklch(0.900 0.055 74)"),
				at(1, "oklch(0.975 0.014 90)"),
			)},
		{"Samphire Flats", "bottle green, samphire and wet sand to haze; one rise",
			smooth(
				at(0, "oklch(0.150 0.032 162)"),
				at(0.22, "oklch(0.320 0.066 154)"),
				at(0.44, "oklch(0.510 0.105 142)"),
				at(0.64, "oklch(0.700 0.125 126)"),
				at(0.80, "oklch(0.850 0.090 108)"),
				at(0.92, "oklch(0.935 0.040 92)"),
				at(1, "oklch(0.975 0.012 80)"),
			)},
		{"Middle Watch", "ink, petrol blue and moonlight, no colour warmer than the moon; dark, one rise",
			smooth(
				at(0, "oklch(0.110 0.020 240)"),
				at(0.34, "oklch(0.240 0.045 228)"),
				at(0.60, "oklch(0.400 0.060 215)"),
				at(0.82, "oklch(0.610 0.050 205)"),
				at(0.95, "oklch(0.860 0.025 150)"),
				at(1, "oklch(0.940 0.030 108)"),
			)},
	}
}

func at(place float64, css string) Stop { return Stop{At: place, Colour: MustColour(css)} }

func smooth(stops ...Stop) Ramp { return Ramp{Stops: stops, Smooth: true} }
