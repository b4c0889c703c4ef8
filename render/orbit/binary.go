package orbit

import (
	"bytes"
	"encoding/binary"
	"errors"
	"fmt"
	"math"

	"leadline/precision"
	"leadline/render/formula"
)

// referenceMagic opens a stored reference and names the layout's version.
const referenceMagic = "leadline reference 1\n"

// errReference says that bytes are not a stored reference.
var errReference = errors.New("not a stored reference orbit")

// header is the fixed part of a stored reference, in the order written.
type header struct {
	Nucleus              uint8
	Period, Length, Bits uint64
	Rebase               uint64
	OffsetRe, OffsetIm   float64
	OffsetE              int64
	Points, Tiny, Runs   uint64
	Re, Im               uint32 // lengths of the two decimals
}

// AppendBinary appends the reference to b, little-endian, exactly: a reference
// read back gives the same pixels to the last bit.
func (r *Reference) AppendBinary(b []byte) ([]byte, error) {
	re, im := r.Re.String(), r.Im.String()
	h := header{Period: uint64(r.Period), Length: uint64(r.Length), Bits: uint64(r.Bits), Rebase: uint64(r.Rebase),
		OffsetRe: r.Offset.Re, OffsetIm: r.Offset.Im, OffsetE: r.Offset.E,
		Points: uint64(len(r.Points)), Tiny: uint64(len(r.tiny)), Runs: uint64(len(r.Segments)),
		Re: uint32(len(re)), Im: uint32(len(im))}
	if r.Kind == Nucleus {
		h.Nucleus = 1
	}
	b = append(b, referenceMagic...)
	b, err := binary.Append(b, binary.LittleEndian, &h)
	if err != nil {
		return nil, fmt.Errorf("storing the reference: %w", err)
	}
	b = append(append(b, re...), im...)
	for _, s := range r.Segments {
		for _, v := range []int{s.Start, s.End, s.Wrap} {
			b = binary.LittleEndian.AppendUint64(b, uint64(int64(v)))
		}
	}
	for _, t := range r.tiny {
		b = binary.LittleEndian.AppendUint64(b, uint64(t.index))
		b = appendFloats(b, t.z.Re, t.z.Im)
		b = binary.LittleEndian.AppendUint64(b, uint64(t.z.E))
	}
	for _, z := range r.Points {
		b = appendFloats(b, z.Re, z.Im)
	}
	return b, nil
}

func appendFloats(b []byte, x, y float64) []byte {
	b = binary.LittleEndian.AppendUint64(b, math.Float64bits(x))
	return binary.LittleEndian.AppendUint64(b, math.Float64bits(y))
}

// Restore reads a reference that AppendBinary wrote, for the same map. It
// takes no more memory than data has, whatever data says.
func Restore(m formula.Map, data []byte) (*Reference, error) {
	rest, ok := bytes.CutPrefix(data, []byte(referenceMagic))
	if !ok {
		return nil, errReference
	}
	var h header
	n, err := binary.Decode(rest, binary.LittleEndian, &h)
	if err != nil {
		return nil, fmt.Errorf("%w: %w", errReference, err)
	}
	d := &reader{rest[n:]}
	size := uint64(len(d.b))
	if h.Points > size/16 || h.Tiny > size/32 || h.Runs > 2 || h.Runs == 0 ||
		uint64(h.Re)+uint64(h.Im)+24*h.Runs+32*h.Tiny+16*h.Points != size {
		return nil, fmt.Errorf("%w: its lengths do not add up", errReference)
	}
	r := &Reference{Map: m, Kind: Centre, Period: int(h.Period), Length: int(h.Length), Bits: uint(h.Bits), Rebase: int(h.Rebase),
		Offset: precision.ExtComplex{Re: h.OffsetRe, Im: h.OffsetIm, E: h.OffsetE}}
	if h.Nucleus == 1 {
		r.Kind = Nucleus
	}
	if r.Re, err = precision.ParseDecimal(string(d.take(int(h.Re)))); err == nil {
		r.Im, err = precision.ParseDecimal(string(d.take(int(h.Im))))
	}
	if err != nil {
		return nil, fmt.Errorf("%w: %w", errReference, err)
	}
	d.body(r, &h)
	return r, r.check()
}

// reader takes values off the front of bytes known to be long enough.
type reader struct{ b []byte }

func (d *reader) take(n int) []byte {
	v := d.b[:n]
	d.b = d.b[n:]
	return v
}

func (d *reader) int() int { return int(int64(binary.LittleEndian.Uint64(d.take(8)))) }

func (d *reader) float() float64 { return math.Float64frombits(binary.LittleEndian.Uint64(d.take(8))) }

// body reads segments, tiny points and points.
func (d *reader) body(r *Reference, h *header) {
	for range h.Runs {
		r.Segments = append(r.Segments, Segment{d.int(), d.int(), d.int()})
	}
	for range h.Tiny {
		t := tinyZ{index: d.int()}
		t.z.Re, t.z.Im = d.float(), d.float()
		t.z.E = int64(d.int())
		r.tiny = append(r.tiny, t)
	}
	r.Points = make([]Z, h.Points)
	for i := range r.Points {
		r.Points[i] = Z{d.float(), d.float()}
	}
}

// check holds a restored reference against what every index of it may be.
func (r *Reference) check() error {
	next := 0
	for _, s := range r.Segments {
		if s.Start != next || s.End < s.Start || s.End >= len(r.Points) || s.Wrap >= s.End || s.Wrap >= 0 && s.Wrap < s.Start {
			return fmt.Errorf("%w: a segment lies outside it", errReference)
		}
		next = s.End + 1
	}
	last := -1
	for _, t := range r.tiny {
		if t.index <= last || t.index >= len(r.Points) {
			return fmt.Errorf("%w: a point lies outside it", errReference)
		}
		last = t.index
	}
	if next != len(r.Points) || r.Rebase < 0 || r.Rebase != r.Segments[len(r.Segments)-1].Start {
		return fmt.Errorf("%w: its parts do not meet", errReference)
	}
	return nil
}
