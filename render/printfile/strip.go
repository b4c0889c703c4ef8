package printfile

import (
	"hash/adler32"

	"github.com/klauspost/compress/flate"
)

const (
	stripBytes = 1 << 20 // filtered bytes a strip aims at: part of what makes a file's bytes
	window     = 1 << 15 // how far back deflate may refer (RFC 1951 §2)

	// trialLevel is the quick level that two ways of filtering a strip are
	// compared at; finalLevel is the one that is kept. Levels past 7 gain 1 %
	// and take twice the time and more.
	trialLevel = 1
	finalLevel = 7
)

// rowsPerStrip returns how many rows of a picture go into one strip of about so
// many filtered bytes, at least one.
func rowsPerStrip(rowBytes, strip int) int { return max(1, strip/(rowBytes+1)) }

// strip is a run of rows on its way through filtering and compression.
type strip struct {
	raw         []byte // the row before the strip, then its rows
	rows        int    // rows in raw, without the one before
	first, last bool

	before <-chan []byte // receives the end of the filtered strip before
	after  chan []byte   // is sent the end of this one
	done   chan struct{} // closed when the results below stand

	chosen, up buffer // two ways of filtering: by entropy row by row, all Up
	plain, lz  buffer // two ways of compressing: Huffman codes alone, with matches
	out        []byte // the smaller of the two
	adler      uint32 // Adler-32 of the filtered bytes
	filtered   int    // how many they are
	err        error
}

// buffer is a growing byte slice to write to, without the reading end and the
// minimum sizes of bytes.Buffer.
type buffer []byte

func (b *buffer) Write(p []byte) (int, error) {
	*b = append(*b, p...)
	return len(p), nil
}

// compress filters and compresses the strip. The end of the filtered bytes is
// handed on before the end of the strip before is waited for: strips begun in
// order never wait for each other in a circle.
func (s *strip) compress(c *chooser, rowBytes int) {
	defer close(s.done)
	best, err := s.filter(c, rowBytes)
	s.after <- append([]byte(nil), best[max(0, len(best)-window):]...)
	dict := <-s.before
	if err != nil {
		s.err = err
		return
	}
	s.adler, s.filtered = adler32.Checksum(best), len(best)
	s.plain, s.lz = s.plain[:0], s.lz[:0]
	if s.err = s.deflate(&s.plain, flate.HuffmanOnly, nil, best); s.err != nil {
		return
	}
	if s.err = s.deflate(&s.lz, finalLevel, dict, best); s.err != nil {
		return
	}
	s.out = s.lz
	if len(s.plain) < len(s.lz) {
		s.out = s.plain
	}
}

// filter filters the strip in two ways and returns the one that a quick trial
// compresses better. Least entropy is the best guess row by row, but it does not
// see repetition: where rows repeat the ones above, Up throughout gives longer
// matches (2 to 4 % smaller on views with broad even bands).
func (s *strip) filter(c *chooser, rowBytes int) ([]byte, error) {
	s.chosen, s.up = s.chosen[:0], s.up[:0]
	for y := range s.rows {
		prev, cur := s.raw[y*rowBytes:][:rowBytes], s.raw[(y+1)*rowBytes:][:rowBytes]
		f := c.filter(cur, prev)
		s.chosen = append(s.chosen, c.rows[f]...)
		s.up = append(s.up, c.rows[filterUp]...)
	}
	a, err := trialSize(s.chosen)
	if err != nil {
		return nil, err
	}
	b, err := trialSize(s.up)
	if err != nil || b < a {
		return s.up, err
	}
	return s.chosen, nil
}

// counter counts what is written to it.
type counter int

func (c *counter) Write(p []byte) (int, error) {
	*c += counter(len(p))
	return len(p), nil
}

// trialSize returns the compressed size of data at the trial level.
func trialSize(data []byte) (int, error) {
	var n counter
	z, err := flate.NewWriter(&n, trialLevel)
	if err != nil {
		return 0, err
	}
	if _, err := z.Write(data); err != nil {
		return 0, err
	}
	return int(n), z.Close()
}

// deflate appends data in compressed form to out: the last strip ends the
// stream, any other ends on a byte boundary by a sync flush (an empty stored
// block, RFC 1951 §3.2.4). The compressor is always a fresh one, so that no
// bytes can depend on what a worker did before.
func (s *strip) deflate(out *buffer, level int, dict, data []byte) error {
	if s.first {
		*out = append(*out, zlibHeader[:]...)
	}
	z, err := flate.NewWriterDict(out, level, dict)
	if err != nil {
		return err
	}
	if _, err := z.Write(data); err != nil {
		return err
	}
	if s.last {
		return z.Close()
	}
	return z.Flush()
}

// zlibHeader announces deflate, a 32 KiB window, no dictionary and the default
// level (RFC 1950 §2.2).
var zlibHeader = [2]byte{0x78, 0x9C}

// adlerCombine returns the Adler-32 of two runs of bytes joined, given that of
// each and the length of the second. With s1 = 1 + sum of bytes and s2 = sum of
// all s1 (RFC 1950 §9), beginning the second run at s1 = a1 instead of 1 adds
// a1-1 to its s1 and, at each byte, to its s2.
func adlerCombine(a, b uint32, bLen int) uint32 {
	const mod = 65521
	a1, a2 := uint64(a&0xFFFF), uint64(a>>16)
	b1, b2 := uint64(b&0xFFFF), uint64(b>>16)
	more := a1 + mod - 1
	s1 := (b1 + more) % mod
	s2 := (a2 + b2 + uint64(bLen)%mod*(more%mod)) % mod
	return uint32(s2<<16 | s1)
}
