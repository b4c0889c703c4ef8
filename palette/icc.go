package palette

import (
	"bytes"
	"crypto/md5"
	"encoding/binary"
	"math/big"
	"unicode/utf16"
)

// ICC profiles, class display, RGB to XYZ by matrix and tone curves
// (ICC.1:2022 §8.3.3 and, for version 2, ICC.1:2001-04 §6.3.1.2). They are
// written from the published figures alone, with a fixed date, so that the
// same space gives the same bytes on every machine.

// ICC gives a version 4.4 profile of the space.
func (s Space) ICC() []byte {
	t := s.commonTags(descriptionV4)
	t.add("cprt", descriptionV4(profileCopyright))
	t.add("chad", s.chad())
	t.addShared(toneV4(s.definition().curve), "rTRC", "gTRC", "bTRC")
	return t.profile(0x04400000)
}

// ICCv2 gives a version 2.4 profile of the space, for readers that do not take
// version 4.
func (s Space) ICCv2() []byte {
	t := s.commonTags(descriptionV2)
	t.add("cprt", append([]byte("text\x00\x00\x00\x00"), profileCopyright+"\x00"...))
	t.add("chad", s.chad())
	t.addShared(toneV2(s.definition().curve), "rTRC", "gTRC", "bTRC")
	return t.profile(0x02400000)
}

const profileCopyright = "No copyright: made from published constants, use freely"

func (s Space) commonTags(describe func(string) []byte) *tagTable {
	t := new(tagTable)
	t.add("desc", describe(s.Name()))
	t.add("wtpt", xyzTag(pcsWhite()))
	columns := s.profileColumns()
	for i, sig := range []string{"rXYZ", "gXYZ", "bXYZ"} {
		t.add(sig, xyzTag(columns[i]))
	}
	return t
}

// s15f16 is the s15Fixed16Number of ICC.1:2022 §4.6.
type s15f16 int32

func pcsWhite() [3]s15f16 { return [3]s15f16{0xF6D6, 0x10000, 0xD32D} }

// exactPCSWhite is the D50 of the profile header as exact fractions.
func exactPCSWhite() (w [3]*big.Rat) {
	for i, v := range pcsWhite() {
		w[i] = big.NewRat(int64(v), 1<<16)
	}
	return w
}

// fixed rounds to the nearest s15Fixed16Number, halves upwards.
func fixed(r *big.Rat) s15f16 {
	n := new(big.Int).Mul(r.Num(), big.NewInt(1<<17))
	n.Add(n, r.Denom())
	d := new(big.Int).Lsh(r.Denom(), 1)
	return s15f16(new(big.Int).Div(n, d).Int64())
}

func (s Space) adaptation() ratMatrix {
	return bradford(s.definition().white.exactXYZ(), exactPCSWhite())
}

// profileColumns are the primaries in the connection space. Rounded one by one
// their sum misses its white by a unit or so; the largest of each row gives
// way, so that the white of the space is exactly the white of the header.
func (s Space) profileColumns() (columns [3][3]s15f16) {
	m := s.adaptation().times(s.exactNative())
	for i, want := range pcsWhite() {
		largest := 0
		for j := range columns {
			columns[j][i] = fixed(m[i][j])
			want -= columns[j][i]
			if columns[j][i] > columns[largest][i] {
				largest = j
			}
		}
		columns[largest][i] += want
	}
	return columns
}

// chad is the adaptation from the space's own white (§9.2.15).
func (s Space) chad() []byte {
	b := []byte("sf32\x00\x00\x00\x00")
	for _, row := range s.adaptation() {
		for _, v := range row {
			b = binary.BigEndian.AppendUint32(b, uint32(fixed(v)))
		}
	}
	return b
}

func xyzTag(v [3]s15f16) []byte {
	b := []byte("XYZ \x00\x00\x00\x00")
	for _, x := range v {
		b = binary.BigEndian.AppendUint32(b, uint32(x))
	}
	return b
}

// toneV4 is a parametric curve (§10.18): type 0 a gamma, type 3 a gamma with a
// straight foot, parameters g a b c d.
func toneV4(c curve) []byte {
	kind, params := uint32(0), []s15f16{fixed(big.NewRat(563, 256))}
	switch c {
	case curveSRGB:
		kind, params = 3, []s15f16{
			fixed(big.NewRat(24, 10)), fixed(big.NewRat(1000, 1055)), fixed(big.NewRat(55, 1055)),
			fixed(big.NewRat(100, 1292)), fixed(big.NewRat(4045, 100000))}
	case curveROMM:
		kind, params = 3, []s15f16{
			fixed(big.NewRat(18, 10)), 0x10000, 0, fixed(big.NewRat(1, 16)), fixed(big.NewRat(1, 32))}
	}
	b := binary.BigEndian.AppendUint32([]byte("para\x00\x00\x00\x00"), kind<<16)
	for _, p := range params {
		b = binary.BigEndian.AppendUint32(b, uint32(p))
	}
	return b
}

// curvePoints is the length of a sampled tone curve.
const curvePoints = 1024

// toneV2 is a curveType (§10.6): one entry is a gamma in u8Fixed8, more are
// samples.
func toneV2(c curve) []byte {
	b := []byte("curv\x00\x00\x00\x00")
	if c == curveA98 {
		b = binary.BigEndian.AppendUint32(b, 1)
		return binary.BigEndian.AppendUint16(b, 563)
	}
	b = binary.BigEndian.AppendUint32(b, curvePoints)
	for i := range curvePoints {
		v := c.decode(float64(i) / (curvePoints - 1))
		b = binary.BigEndian.AppendUint16(b, uint16(float64(v*white)+0.5))
	}
	return b
}

// descriptionV4 is a multiLocalizedUnicodeType with one record (§10.15).
func descriptionV4(text string) []byte {
	units := utf16.Encode([]rune(text))
	b := []byte("mluc\x00\x00\x00\x00")
	for _, v := range []uint32{1, 12} { // records, size of a record
		b = binary.BigEndian.AppendUint32(b, v)
	}
	b = append(b, "enUS"...)
	for _, v := range []uint32{uint32(2 * len(units)), 28} { // length, offset
		b = binary.BigEndian.AppendUint32(b, v)
	}
	for _, u := range units {
		b = binary.BigEndian.AppendUint16(b, u)
	}
	return b
}

// descriptionV2 is a textDescriptionType (ICC.1:2001-04 §6.5.17) with its
// Unicode and ScriptCode parts empty.
func descriptionV2(text string) []byte {
	b := []byte("desc\x00\x00\x00\x00")
	b = binary.BigEndian.AppendUint32(b, uint32(len(text)+1))
	b = append(append(b, text...), 0)
	return append(b, make([]byte, 4+4+2+1+67)...)
}

// tagTable gathers tags and their data.
type tagTable struct {
	entries []tagEntry
	data    bytes.Buffer
}

type tagEntry struct {
	sig          string
	offset, size int // offset within data
}

func (t *tagTable) add(sig string, data []byte) { t.addShared(data, sig) }

// addShared lets several tags have one piece of data (§7.3.1).
func (t *tagTable) addShared(data []byte, sigs ...string) {
	for _, sig := range sigs {
		t.entries = append(t.entries, tagEntry{sig, t.data.Len(), len(data)})
	}
	t.data.Write(data)
	for t.data.Len()%4 != 0 {
		t.data.WriteByte(0)
	}
}

// profile joins header, tag table and data (§7.1) and fills in the profile ID.
func (t *tagTable) profile(version uint32) []byte {
	const header = 128
	start := header + 4 + 12*len(t.entries)
	b := make([]byte, header, start+t.data.Len())
	put := binary.BigEndian.PutUint32
	put(b[0:], uint32(start+t.data.Len()))
	put(b[8:], version)
	copy(b[12:], "mntrRGB XYZ ")
	for i, v := range []uint16{2026, 1, 1, 0, 0, 0} {
		binary.BigEndian.PutUint16(b[24+2*i:], v)
	}
	copy(b[36:], "acsp")
	for i, v := range pcsWhite() {
		put(b[68+4*i:], uint32(v))
	}
	b = binary.BigEndian.AppendUint32(b, uint32(len(t.entries)))
	for _, e := range t.entries {
		b = append(b, e.sig...)
		b = binary.BigEndian.AppendUint32(b, uint32(start+e.offset))
		b = binary.BigEndian.AppendUint32(b, uint32(e.size))
	}
	b = append(b, t.data.Bytes()...)
	if version >= 0x04000000 {
		// Flags, intent and the field itself are zero already (§7.2.18).
		id := md5.Sum(b)
		copy(b[84:], id[:])
	}
	return b
}
