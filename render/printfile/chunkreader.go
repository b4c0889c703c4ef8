package printfile

import (
	"bufio"
	"encoding/binary"
	"fmt"
	"hash/crc32"
	"io"
)

// chunkReader walks over the chunks of a PNG and checks every CRC.
type chunkReader struct {
	r       *bufio.Reader
	left    int64  // bytes of the file not yet read
	typ     string // the chunk at hand
	length  uint32 // its data
	rest    uint32 // its data not yet read
	crc     uint32 // of type and data read so far
	pending bool   // next shall return the chunk at hand again
}

// begin reads the signature.
func (c *chunkReader) begin() error {
	var b [len(signature)]byte
	if err := c.full(b[:]); err != nil || string(b[:]) != signature {
		return &FormatError{Problem: "not a png file", Cure: "give a png as it was rendered"}
	}
	return nil
}

// full fills b from the file.
func (c *chunkReader) full(b []byte) error {
	n, err := io.ReadFull(c.r, b)
	c.left -= int64(n)
	if err == io.EOF || err == io.ErrUnexpectedEOF {
		return damaged("ends too early")
	}
	return err
}

// next ends the chunk at hand and reads the head of the following one. No
// length is believed that the file is too short for.
func (c *chunkReader) next() error {
	if c.pending {
		c.pending = false
		return nil
	}
	if c.typ != "" {
		if err := c.finish(); err != nil {
			return err
		}
	}
	var b [8]byte
	if err := c.full(b[:]); err != nil {
		return err
	}
	c.length, c.typ = binary.BigEndian.Uint32(b[:]), string(b[4:])
	for _, ch := range b[4:] {
		if ch|0x20 < 'a' || ch|0x20 > 'z' {
			return damaged(fmt.Sprintf("has a chunk of the impossible type %q", c.typ))
		}
	}
	if c.length > maxChunk || int64(c.length)+4 > c.left {
		return damaged(fmt.Sprintf("has a chunk %s of %d bytes but only %d bytes left", c.typ, c.length, c.left))
	}
	c.rest, c.crc = c.length, crc32.ChecksumIEEE(b[4:])
	return nil
}

// finish skips what is left of the chunk at hand and checks its CRC.
func (c *chunkReader) finish() error {
	if _, err := io.Copy(io.Discard, c); err != nil {
		return err
	}
	var b [4]byte
	if err := c.full(b[:]); err != nil {
		return err
	}
	if binary.BigEndian.Uint32(b[:]) != c.crc {
		return damaged(fmt.Sprintf("has a chunk %s that does not match its crc", c.typ))
	}
	return nil
}

// Read reads the data of the chunk at hand.
func (c *chunkReader) Read(b []byte) (int, error) {
	if c.rest == 0 {
		return 0, io.EOF
	}
	if int64(len(b)) > int64(c.rest) {
		b = b[:c.rest]
	}
	n, err := c.r.Read(b)
	c.crc = crc32.Update(c.crc, crc32.IEEETable, b[:n])
	c.rest -= uint32(n)
	c.left -= int64(n)
	if err == io.EOF {
		err = damaged("ends too early")
	}
	return n, err
}

// data returns the data of the chunk at hand, if it is at most limit bytes.
func (c *chunkReader) data(limit int) ([]byte, error) {
	if int64(c.length) > int64(limit) {
		return nil, &FormatError{Problem: fmt.Sprintf("has a chunk %s of %d bytes, more than the %d allowed", c.typ, c.length, limit),
			Cure: "remove the oversized metadata from the file"}
	}
	b := make([]byte, c.length)
	if _, err := io.ReadFull(c, b); err != nil {
		return nil, err
	}
	return b, nil
}

// idat is the data of consecutive IDAT chunks as one stream. It begins at an
// IDAT chunk and leaves the chunk after the last one pending.
type idat struct{ c *chunkReader }

func (d idat) Read(b []byte) (int, error) {
	for d.c.rest == 0 {
		if d.c.pending {
			return 0, io.EOF
		}
		if err := d.c.next(); err != nil {
			return 0, err
		}
		if d.c.typ != "IDAT" {
			d.c.pending = true
			return 0, io.EOF
		}
	}
	return d.c.Read(b)
}

func damaged(problem string) error { return &FormatError{Problem: problem, Cure: cureDamaged} }
