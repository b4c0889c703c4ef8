package printfile

import (
	"encoding/binary"
	"hash/crc32"
	"io"
)

// Signature is what every PNG begins with (PNG §5.2).
const signature = "\x89PNG\r\n\x1a\n"

const (
	// MaxSide is the greatest width or height of a PNG in pixels (PNG §7.1).
	MaxSide = 1<<31 - 1
	// maxChunk is the greatest length of a chunk's data in bytes (PNG §5.3).
	maxChunk = 1<<31 - 1
)

// appendChunk appends a whole chunk to b (PNG §5.3): length, type, data, and the
// CRC of type and data.
func appendChunk(b []byte, typ string, data []byte) []byte {
	b = binary.BigEndian.AppendUint32(b, uint32(len(data)))
	at := len(b)
	b = append(b, typ...)
	b = append(b, data...)
	return binary.BigEndian.AppendUint32(b, crc32.ChecksumIEEE(b[at:]))
}

// writeIDAT writes data as IDAT chunks of at most limit bytes each, without
// copying it.
func writeIDAT(w io.Writer, data []byte, limit int) error {
	for len(data) > 0 {
		n := min(len(data), limit)
		head := append(binary.BigEndian.AppendUint32(nil, uint32(n)), "IDAT"...)
		crc := crc32.Update(crc32.ChecksumIEEE(head[4:]), crc32.IEEETable, data[:n])
		for _, b := range [][]byte{head, data[:n], binary.BigEndian.AppendUint32(nil, crc)} {
			if _, err := w.Write(b); err != nil {
				return err
			}
		}
		data = data[n:]
	}
	return nil
}
