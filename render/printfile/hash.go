package printfile

import (
	"crypto/sha256"
	"encoding/hex"
	"hash"
)

// Hasher computes the hash of a picture's pixels, row by row: SHA-256 over
// red, green, blue of each pixel as big-endian 16-bit codes, rows from the top,
// nothing between. ImageMagick prints the same as %# for a 16-bit RGB picture.
// The zero value is ready to use.
type Hasher struct{ h hash.Hash }

// Write adds rows, or any part of them, in order. It never fails.
func (h *Hasher) Write(rows []byte) (int, error) {
	if h.h == nil {
		h.h = sha256.New()
	}
	return h.h.Write(rows)
}

// Sum returns the hash of what was written so far.
func (h *Hasher) Sum() [sha256.Size]byte {
	if h.h == nil {
		return sha256.Sum256(nil)
	}
	return [sha256.Size]byte(h.h.Sum(nil))
}

// Hex returns Sum in lower-case hexadecimal, as the sidecar holds it.
func (h *Hasher) Hex() string {
	sum := h.Sum()
	return hex.EncodeToString(sum[:])
}
