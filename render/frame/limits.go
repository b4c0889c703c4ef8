package frame

import (
	"leadline/precision"
	"leadline/render/sheet"
)

// Limits of a document, held before anything is built from it.
const (
	MaxDocument = 4 << 20 // bytes
	MaxNesting  = 32      // objects and arrays inside one another
	MaxValues   = 10_000  // keys, strings, numbers, objects and arrays in all
	MaxNumber   = 64      // characters of a bare JSON number
	MaxFaults   = 100     // faults listed; any more are left uncounted
)

// Limits of a frame's values. All ranges include their ends unless a comment
// says otherwise.
const (
	MaxText    = 1_000 // characters of title, maker, rights and the like
	MaxColour  = 128   // characters of a colour
	MaxLimit   = 100_000_000
	MinBailout = 4
	MaxBailout = 1e6
	MaxSamples = 4_096
	MinStops   = 2
	MaxStops   = 256
	MaxCount   = 1e9 // size of drive base, period, offset and fitted numbers
	MaxPower   = 16  // drive exponent; it is above 0
	MaxTurn    = 360 // degrees either way

	// MaxDepth leaves the digits of a centre, which are as many as the depth
	// and some for the pixel and its guard, inside precision.MaxDigits.
	MaxDepth  = precision.MaxDigits - 100
	MaxHeight = 1_000
	MaxRadius = 4 // |re| and |im| of a centre or parameter
)

// RampSize is the number of entries in a baked ramp.
const RampSize = 1024

// Defaults of the optional values.
const (
	DefaultPower     = 2
	DefaultBailout   = 1000
	DefaultLeast     = 4
	DefaultMost      = 32
	DefaultTolerance = 0.004
	DefaultFilter    = Gaussian
	DefaultScale     = Log
	DefaultExponent  = 0.5 // of a power scale
	DefaultFitLow    = 0.5 // percentile
	DefaultFitHigh   = 99.5
	DefaultPPI       = sheet.DefaultPPI
	DefaultBleed     = "0mm"
	DefaultSafe      = sheet.DefaultSafe
	DefaultSpace     = "srgb"
	DefaultTurn      = "0deg"
)
