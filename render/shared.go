package render

import (
	"bytes"
	"context"
	"crypto/sha256"
	"encoding/binary"
	"errors"
	"fmt"

	"leadline/render/formula"
	"leadline/render/frame"
	"leadline/render/orbit"
)

// sharedMagic opens what the parts of a print share, and names the layout.
const sharedMagic = "leadline shared 1\n"

// ErrShared says that bytes are not the shared part of a print.
var ErrShared = errors.New("not the shared part of a print, or damaged")

// Shared stores what the parts of a print have in common, so that it is
// computed once and every worker, wherever it is, works from the same: the
// frozen frame and the reference orbit. Layout: magic, numerics (u32), length
// of the frame (u32), the frame, the reference, SHA-256 of all before.
func (p *Plan) Shared() ([]byte, error) {
	doc, err := p.frame.Marshal()
	if err != nil {
		return nil, fmt.Errorf("freezing the frame: %w", err)
	}
	b := []byte(sharedMagic)
	b = binary.LittleEndian.AppendUint32(b, Numerics)
	b = binary.LittleEndian.AppendUint32(b, uint32(len(doc)))
	b = append(b, doc...)
	if p.ref != nil {
		if b, err = p.ref.AppendBinary(b); err != nil {
			return nil, err
		}
	}
	sum := sha256.Sum256(b)
	return append(b, sum[:]...), nil
}

// NewPlanFromShared makes a plan from what Shared stored: only the tables are
// built again. Other numerics are refused with a *MismatchError, damage with
// ErrShared.
func NewPlanFromShared(ctx context.Context, data []byte, o Options) (*Plan, error) {
	doc, ref, err := splitShared(data)
	if err != nil {
		return nil, err
	}
	f, err := frame.Parse(doc)
	if err != nil {
		return nil, err
	}
	r, err := f.Resolve()
	if err != nil {
		return nil, err
	}
	if len(ref) == 0 {
		return finishPlan(ctx, f, r, nil, o)
	}
	m, err := formula.ForPower(r.Power)
	if err != nil {
		return nil, err
	}
	orb, err := orbit.Restore(m, ref)
	if err != nil {
		return nil, fmt.Errorf("%w: %w", ErrShared, err)
	}
	return finishPlan(ctx, f, r, orb, o)
}

// splitShared checks the whole and takes it apart.
func splitShared(data []byte) (doc, ref []byte, err error) {
	end := len(data) - sha256.Size
	rest, ok := bytes.CutPrefix(data[:max(end, 0)], []byte(sharedMagic))
	if !ok || len(rest) < 8 || sha256.Sum256(data[:end]) != [sha256.Size]byte(data[end:]) {
		return nil, nil, ErrShared
	}
	if n := binary.LittleEndian.Uint32(rest); n != Numerics {
		return nil, nil, &MismatchError{fmt.Sprintf("numerics: the print was begun with %d, this is %d", n, Numerics),
			"finish it with the release that began it, or begin it again"}
	}
	n := binary.LittleEndian.Uint32(rest[4:])
	if rest = rest[8:]; uint64(n) > uint64(len(rest)) {
		return nil, nil, ErrShared
	}
	return rest[:n], rest[n:], nil
}
