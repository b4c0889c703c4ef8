package printfile

import (
	"crypto/sha1"
	"encoding/hex"
	"encoding/xml"
	"fmt"
	"strings"
	"unicode"
	"unicode/utf8"
)

// Credit is what the XMP packet of a print says. The zero value says only what
// program made it and how.
type Credit struct {
	Title  string // dc:title
	Maker  string // dc:creator
	Rights string // dc:rights
	Hash   []byte // identifies the picture; becomes xmpMM:DocumentID unless empty
}

// sourceType is IPTC's term for a picture made by a formula alone, without
// sampled training data.
const sourceType = "http://cv.iptc.org/newscodes/digitalsourcetype/algorithmicMedia"

// XMP returns the packet (ISO 16684-1), the same bytes for the same credit.
// Control characters and invalid UTF-8 are refused with an *InfoError.
func (c Credit) XMP() ([]byte, error) {
	var b strings.Builder
	b.WriteString("<?xpacket begin=\"\ufeff\" id=\"W5M0MpCehiHzreSzNTczkc9d\"?>\n" +
		"<x:xmpmeta xmlns:x=\"adobe:ns:meta/\">\n" +
		"<rdf:RDF xmlns:rdf=\"http://www.w3.org/1999/02/22-rdf-syntax-ns#\">\n" +
		"<rdf:Description rdf:about=\"\"\n" +
		" xmlns:dc=\"http://purl.org/dc/elements/1.1/\"\n" +
		" xmlns:xmp=\"http://ns.adobe.com/xap/1.0/\"\n" +
		" xmlns:xmpMM=\"http://ns.adobe.com/xap/1.0/mm/\"\n" +
		" xmlns:Iptc4xmpExt=\"http://iptc.org/std/Iptc4xmpExt/2008-02-29/\">\n")
	for _, p := range []struct{ field, value, form string }{
		{"title", c.Title, "<dc:title><rdf:Alt><rdf:li xml:lang=\"x-default\">%s</rdf:li></rdf:Alt></dc:title>\n"},
		{"maker", c.Maker, "<dc:creator><rdf:Seq><rdf:li>%s</rdf:li></rdf:Seq></dc:creator>\n"},
		{"rights", c.Rights, "<dc:rights><rdf:Alt><rdf:li xml:lang=\"x-default\">%s</rdf:li></rdf:Alt></dc:rights>\n"},
	} {
		if err := property(&b, p.field, p.value, p.form); err != nil {
			return nil, err
		}
	}
	b.WriteString("<xmp:CreatorTool>leadline</xmp:CreatorTool>\n" +
		"<Iptc4xmpExt:DigitalSourceType>" + sourceType + "</Iptc4xmpExt:DigitalSourceType>\n")
	if len(c.Hash) > 0 {
		b.WriteString("<xmpMM:DocumentID>urn:uuid:" + documentID(c.Hash) + "</xmpMM:DocumentID>\n")
	}
	b.WriteString("</rdf:Description>\n</rdf:RDF>\n</x:xmpmeta>\n<?xpacket end=\"r\"?>")
	return []byte(b.String()), nil
}

// property writes one property unless it is empty.
func property(b *strings.Builder, field, value, form string) error {
	if value == "" {
		return nil
	}
	if !utf8.ValidString(value) {
		return &InfoError{field, "is not valid UTF-8", "save it as UTF-8"}
	}
	for _, r := range value {
		// XML 1.0 §2.2 leaves out U+FFFE, U+FFFF and most controls; the rest of
		// the controls have no place in a credit line.
		if unicode.IsControl(r) || r == 0xFFFE || r == 0xFFFF {
			return &InfoError{field, fmt.Sprintf("has the control character %U", r), "remove it: the text is one line"}
		}
	}
	var esc strings.Builder
	if err := xml.EscapeText(&esc, []byte(value)); err != nil {
		return err
	}
	fmt.Fprintf(b, form, esc.String())
	return nil
}

// namespaceURL is the UUID namespace of URLs (RFC 9562 §6.6).
var namespaceURL = [16]byte{0x6b, 0xa7, 0xb8, 0x11, 0x9d, 0xad, 0x11, 0xd1, 0x80, 0xb4, 0x00, 0xc0, 0x4f, 0xd4, 0x30, 0xc8}

// documentID returns the UUID of the picture with the given hash.
func documentID(hash []byte) string {
	return uuidV5(namespaceURL, "urn:leadline:"+hex.EncodeToString(hash))
}

// uuidV5 returns the name-based UUID of RFC 9562 §5.5 in its text form.
func uuidV5(namespace [16]byte, name string) string {
	sum := sha1.Sum(append(namespace[:], name...))
	u := sum[:16]
	u[6] = u[6]&0x0F | 0x50 // version 5
	u[8] = u[8]&0x3F | 0x80 // variant of the RFC
	s := hex.EncodeToString(u)
	return s[:8] + "-" + s[8:12] + "-" + s[12:16] + "-" + s[16:20] + "-" + s[20:]
}
