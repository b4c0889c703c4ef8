package printfile

import (
	"bytes"
	"encoding/binary"
	"errors"
	"hash/crc32"
	"image"
	"image/png"
	"testing"
)

// seal puts every CRC right as far as the file can be followed, so that changes
// get past it.
func seal(file []byte) []byte {
	b := bytes.Clone(file)
	for at := len(signature); at+12 <= len(b); {
		n := int64(binary.BigEndian.Uint32(b[at:]))
		if n > int64(len(b)-at-12) {
			break
		}
		end := at + 8 + int(n)
		binary.BigEndian.PutUint32(b[end:], crc32.ChecksumIEEE(b[at+4:end]))
		at = end + 4
	}
	return b
}

// FuzzReader: whatever the bytes, reading ends with the picture or with an error
// that has a hint. What we read, image/png reads as the same pixels.
func FuzzReader(f *testing.F) {
	good := []byte{0, 1, 2, 3, 4, 5, 6}
	small := fullInfo(f, 3, 3)
	f.Add(encode(f, small, mixed(3, 3), 1))
	f.Add(encode(f, Info{Width: 40, Height: 7}, mixed(40, 7), 1))
	f.Add(newPlain(1, 1, 16, 2, 0).pixels(good, 3).end())
	f.Add(newPlain(1, 1, 16, 2, 1).pixels(good, 3).end())
	f.Add(newPlain(1, 1, 16, 2, 0).chunk("iTXt", append([]byte("K\x00\x01\x00\x00\x00"), deflated(good)...)).pixels(good, 99).end())
	f.Add(newPlain(1, 1, 16, 2, 0).chunk("zTXt", append([]byte("K\x00\x00"), deflated(good)...)).chunk("PLTE", good[:3]).pixels(good, 99).end())
	f.Add(newPlain(2, 2, 16, 2, 0).chunk("iCCP", append([]byte("K\x00\x00"), deflated(good)...)).
		pixels(append([]byte{4}, make([]byte, 25)...), 99).chunk("tEXt", []byte("a\x00b")).end())
	f.Fuzz(func(t *testing.T, file []byte) {
		for _, b := range [][]byte{file, seal(file)} {
			r, err := newReader(bytes.NewReader(b), int64(len(b)), "")
			if err == nil && int64(r.info.Width)*int64(r.info.Height) > 1<<22 {
				return // a row or a picture too long for a fuzzer's patience
			}
			var pixels []byte
			if err == nil {
				pixels, err = readAll(r, 2)
			}
			var fe *FormatError
			if err != nil {
				if !errors.As(err, &fe) || fe.Hint() == "" {
					t.Fatalf("error %v (%T)", err, err)
				}
				continue
			}
			samePixels(t, b, r.Info(), pixels)
		}
	})
}

// samePixels compares with image/png.
func samePixels(t *testing.T, file []byte, info Info, pixels []byte) {
	img, err := png.Decode(bytes.NewReader(file))
	if err != nil {
		t.Fatalf("image/png refuses what we read: %v", err)
	}
	rgba, ok := img.(*image.RGBA64)
	if !ok || rgba.Bounds().Dx() != info.Width || rgba.Bounds().Dy() != info.Height {
		t.Fatalf("image/png reads %T of %v", img, img.Bounds())
	}
	for i, p := 0, rgba.Pix; len(p) > 0; i, p = i+6, p[8:] {
		if !bytes.Equal(p[:6], pixels[i:i+6]) {
			t.Fatalf("pixel %d: %v, image/png %v", i/6, pixels[i:i+6], p[:6])
		}
	}
}

// FuzzRoundTrip: any pixels, written in any way, come back.
func FuzzRoundTrip(f *testing.F) {
	f.Add([]byte("some pixels, a dozen bytes and more"), uint8(2), uint8(1), uint8(1), "text")
	f.Add(bytes.Repeat([]byte{0, 255, 1}, 99), uint8(7), uint8(3), uint8(2), "é\n")
	f.Fuzz(func(t *testing.T, data []byte, width, workers, cut uint8, text string) {
		rowBytes := (1 + int(width)) * bpp
		data = data[:len(data)/rowBytes*rowBytes]
		if len(data) == 0 {
			return
		}
		info := Info{Width: 1 + int(width), Height: len(data) / rowBytes, Texts: []Text{{"a", text}}}
		if info.check() != nil {
			return
		}
		file := encode(t, info, data, int(workers%8), 1+int(cut))
		got, pixels, err := read(file, 1+int(cut))
		if err != nil || !bytes.Equal(pixels, data) || got.Texts[0].Value != text {
			t.Fatalf("came back as %d bytes, text %q (%v)", len(pixels), got.Texts, err)
		}
		samePixels(t, file, got, pixels)
	})
}
