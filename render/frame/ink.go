package frame

import (
	"encoding/base64"
	"encoding/binary"
	"fmt"

	"leadline/palette"
	"leadline/render/sheet"
)

// Ink is the ramp and how the smooth count drives it.
type Ink struct {
	Ramp   *Ramp           `json:"ramp,omitzero"`   // absent: palette.DefaultRamp
	Drive  Drive           `json:"drive,omitzero"`  //
	Inside *palette.Colour `json:"inside,omitzero"` // absent: palette's near-black
	Edge   *Edge           `json:"edge,omitzero"`   // absent: none
	Baked  *Baked          `json:"baked,omitzero"`  // filled in by rendering
}

// Ramp is ordered colours along 0…1.
type Ramp struct {
	Stops  []Stop `json:"stops"`
	Smooth *bool  `json:"smooth,omitzero"` // absent: true
}

// Stop is one colour of a ramp.
type Stop struct {
	At     float64        `json:"at"`
	Colour palette.Colour `json:"colour"`
}

// Scale is how the smooth count is bent before it meets the ramp.
type Scale string

// The scales.
const (
	Linear Scale = "linear"
	Log    Scale = "log"
	Power  Scale = "power"
)

// Drive maps the smooth count to a place on the ramp.
type Drive struct {
	Scale    Scale    `json:"scale,omitempty"`   // absent: log
	Exponent float64  `json:"exponent,omitzero"` // of the power scale alone; absent: 0.5
	Base     *float64 `json:"base,omitzero"`     // count the scale starts from; absent: 0
	Period   float64  `json:"period,omitzero"`   // of the scaled count for one ramp; absent: fitted
	Offset   *float64 `json:"offset,omitzero"`   // absent: 0
	Fit      *Fit     `json:"fit,omitzero"`      // without a period alone
	Fitted   *Fitted  `json:"fitted,omitzero"`   // filled in by rendering
}

// Fit says between which percentiles of the scaled count the ramp is laid.
type Fit struct {
	Low  float64 `json:"low"`
	High float64 `json:"high"`
}

// Fitted is a fit's result, frozen: the base and the scaled counts at which
// the ramp begins and ends.
type Fitted struct {
	Base float64 `json:"base"`
	Low  float64 `json:"low"`
	High float64 `json:"high"`
}

// Edge is a line along the set's boundary. A width of 0mm is none.
type Edge struct {
	Width  sheet.Length   `json:"width"`
	Colour palette.Colour `json:"colour"`
}

// Baked is the ink as 16-bit codes of one colour space: what a frozen frame is
// printed with, whatever a later release would make of the colours.
type Baked struct {
	Space  string     `json:"space"` // CSS name
	Ramp   BakedRamp  `json:"ramp"`
	Inside [3]uint16  `json:"inside"`
	Edge   *[3]uint16 `json:"edge,omitzero"` // needed beside an edge
}

// BakedRamp is the ramp's encoded R, G, B at i/(RampSize-1).
type BakedRamp [RampSize][3]uint16

// bakedBytes is the size of a baked ramp, bakedText that of its base64.
const (
	bakedBytes = RampSize * 3 * 2
	bakedText  = bakedBytes / 3 * 4
)

// MarshalText is the base64 (RFC 4648 §4) of the codes, big-endian.
func (r BakedRamp) MarshalText() ([]byte, error) {
	raw := make([]byte, 0, bakedBytes)
	for _, c := range r {
		for _, v := range c {
			raw = binary.BigEndian.AppendUint16(raw, v)
		}
	}
	return base64.StdEncoding.AppendEncode(nil, raw), nil
}

// UnmarshalText reads what MarshalText writes and nothing else.
func (r *BakedRamp) UnmarshalText(text []byte) error {
	if len(text) != bakedText {
		return fmt.Errorf("has %d characters of base64, not %d", len(text), bakedText)
	}
	raw, err := base64.StdEncoding.Strict().AppendDecode(nil, text)
	if err != nil || len(raw) != bakedBytes {
		return fmt.Errorf("is not base64 of %d bytes", bakedBytes)
	}
	for i := range r {
		for j := range r[i] {
			r[i][j] = binary.BigEndian.Uint16(raw[(i*3+j)*2:])
		}
	}
	return nil
}
