package frame

import (
	"time"

	"leadline/precision"
)

// SidecarFormat names the sidecar documents this release reads and writes.
const SidecarFormat = "leadline.sidecar/1"

// Sidecar is a frame as it was rendered and the record of what came out. Its
// frame is frozen. Run may be nil: no hash covers it and nothing depends on it.
type Sidecar struct {
	Format string `json:"format"`
	Frame  Frame  `json:"frame"`
	Record Record `json:"record"`
	Run    *Run   `json:"run,omitzero"`
}

// Record is what rendering made of the frame: the same on every machine.
type Record struct {
	Release   string    `json:"release"`
	Numerics  int       `json:"numerics"` // version of the arithmetic, from 1
	File      string    `json:"file"`     // name without a folder
	Pixels    Pixels    `json:"pixels"`
	SHA256    string    `json:"sha256"` // hex, of the big-endian 16-bit RGB rows
	Reference Reference `json:"reference"`
	Geometry  Geometry  `json:"geometry"`
	Counts    Counts    `json:"counts"`
	Audit     Audit     `json:"audit"`
}

// Pixels is the rectangle rendered, in lattice coordinates at scale 1/Scale.
type Pixels struct {
	X      int `json:"x"`
	Y      int `json:"y"`
	Width  int `json:"width"`
	Height int `json:"height"`
	Scale  int `json:"scale"` // 1 for the sheet itself, k for 1/k
}

// ReferenceKind says where the reference orbit was taken.
type ReferenceKind string

// The kinds of reference. NoReference stands for direct iteration and leaves
// every other field of Reference absent.
const (
	NoReference ReferenceKind = "none"
	Centre      ReferenceKind = "centre"
	Nucleus     ReferenceKind = "nucleus" // has a period
)

// Reference is the orbit the pixels were computed against.
type Reference struct {
	Kind   ReferenceKind      `json:"kind"`
	Re     *precision.Decimal `json:"re,omitzero"`
	Im     *precision.Decimal `json:"im,omitzero"`
	Period int64              `json:"period,omitempty"` // 0 is absent
	Length int64              `json:"length,omitempty"` // iterations kept
	Bits   int64              `json:"bits,omitempty"`   // precision it was computed with
}

// Geometry is the sheet in pixels at the record's scale.
type Geometry struct {
	TrimWidth  int `json:"trim_width"`
	TrimHeight int `json:"trim_height"`
	Bleed      int `json:"bleed"`
}

// Counts sums up the pixels and the samples taken for them.
type Counts struct {
	Pixels    int64 `json:"pixels"`
	Samples   int64 `json:"samples"`
	Escaped   int64 `json:"escaped"`
	Inside    int64 `json:"inside"`
	Undecided int64 `json:"undecided"`
}

// Audit is the outcome of computing random samples again by direct iteration.
type Audit struct {
	Asked   int64 `json:"asked"`
	Checked int64 `json:"checked"`
	Skipped int64 `json:"skipped"`
	Robust  int64 `json:"robust"`
	Equal   int64 `json:"equal"`
	Within  int64 `json:"within"`
	Failed  int64 `json:"failed"`
}

// Run is what differs between two runs of the same frame.
type Run struct {
	Started time.Time `json:"started"`
	Host    string    `json:"host,omitempty"`
	Seconds Seconds   `json:"seconds"`
	Workers int       `json:"workers"`
	Peak    int64     `json:"peak_bytes"`
	Queue   *Queued   `json:"queue,omitempty"` // nil: one process made it all
}

// Queued is how a queue came to a print that several processes made.
type Queued struct {
	Workers  int64   `json:"workers"`  // processes that finished a tile of it
	Tiles    int64   `json:"tiles"`    // it was cut into
	Attempts int64   `json:"attempts"` // at those, the plan and the assembly
	Rescued  int64   `json:"rescued"`  // attempts taken from workers that fell silent
	Seconds  float64 `json:"seconds"`  // in finished tiles, whoever made them
}

// Seconds is the time each part took by the clock.
type Seconds struct {
	Reference float64 `json:"reference"`
	Tables    float64 `json:"tables"`
	Pixels    float64 `json:"pixels"`
	Colour    float64 `json:"colour"`
	File      float64 `json:"file"`
	Audit     float64 `json:"audit"`
	Total     float64 `json:"total"`
}

// Marshal writes the sidecar in its canonical form. A sidecar that
// ParseSidecar would not take is not written; the error is then the Faults of
// Validate.
func (s *Sidecar) Marshal() ([]byte, error) {
	if err := s.Validate(); err != nil {
		return nil, err
	}
	return canonical(s)
}
