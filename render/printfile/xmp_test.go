package printfile

import (
	"bytes"
	"encoding/hex"
	"encoding/xml"
	"errors"
	"io"
	"strings"
	"testing"
	"unicode/utf8"
)

// TestUUID: RFC 9562, appendix A.4, and Python's uuid.uuid5 (3.11) for the rest.
func TestUUID(t *testing.T) {
	dns := namespaceURL
	dns[3] = 0x10 // RFC 9562 §6.6: the namespaces differ in this digit
	for _, c := range []struct {
		namespace  [16]byte
		name, want string
	}{
		{dns, "www.example.com", "2ed6657d-e927-568b-95e1-2665a8aea6a2"},
		{namespaceURL, "http://www.example.com/", "fcde3c85-2270-590f-9e7c-ee003d65e0e2"},
		{namespaceURL, "", "1b4db7eb-4057-5ddf-91e0-36dec72071f5"},
	} {
		if got := uuidV5(c.namespace, c.name); got != c.want {
			t.Errorf("%q: %s, want %s", c.name, got, c.want)
		}
	}
	if a, b := documentID([]byte{1}), documentID([]byte{2}); a == b {
		t.Errorf("two hashes share %s", a)
	}
}

// values returns the text of each element of an XML document that has any, by
// its namespace and name; text of list items counts for the property.
func values(t *testing.T, packet []byte) map[string]string {
	t.Helper()
	got := map[string]string{}
	var path []string
	for d := xml.NewDecoder(bytes.NewReader(packet)); ; {
		token, err := d.Token()
		if err == io.EOF {
			return got
		}
		if err != nil {
			t.Fatalf("not well-formed: %v\n%s", err, packet)
		}
		switch token := token.(type) {
		case xml.StartElement:
			path = append(path, token.Name.Space+" "+token.Name.Local)
		case xml.EndElement:
			path = path[:len(path)-1]
		case xml.CharData:
			const description = 3 // xmpmeta, RDF, Description
			if len(path) > description && strings.TrimSpace(string(token)) != "" {
				got[path[description]] += string(token)
			}
		}
	}
}

func TestXMP(t *testing.T) {
	c := Credit{Title: `<a> & "b" 'c' ]]> ≈ 深`, Maker: "Zoë 🌊", Rights: "© &amp;", Hash: []byte{0xAB}}
	packet, err := c.XMP()
	if err != nil {
		t.Fatal(err)
	}
	got := values(t, packet)
	// Namespaces and names: Dublin Core 1.1, ISO 16684-1, IPTC Photo Metadata.
	const dc, xmp = "http://purl.org/dc/elements/1.1/ ", "http://ns.adobe.com/xap/1.0/"
	want := map[string]string{
		dc + "title": c.Title, dc + "creator": c.Maker, dc + "rights": c.Rights,
		xmp + " CreatorTool":   "leadline",
		xmp + "mm/ DocumentID": "urn:uuid:" + documentID(c.Hash),
		"http://iptc.org/std/Iptc4xmpExt/2008-02-29/ DigitalSourceType": "http://cv.iptc.org/newscodes/digitalsourcetype/algorithmicMedia",
	}
	for name, value := range want {
		if got[name] != value {
			t.Errorf("%s is %q, want %q", name, got[name], value)
		}
	}
	if len(got) != len(want) {
		t.Errorf("properties %v", got)
	}
	again, err := c.XMP()
	if err != nil || !bytes.Equal(packet, again) {
		t.Errorf("the same credit gives another packet (%v)", err)
	}
}

func TestEmptyCredit(t *testing.T) {
	packet, err := Credit{}.XMP()
	if err != nil {
		t.Fatal(err)
	}
	if got := values(t, packet); len(got) != 2 {
		t.Errorf("properties %v, want CreatorTool and DigitalSourceType alone", got)
	}
}

func TestRefusedCredit(t *testing.T) {
	for _, bad := range []string{"a\x00", "a\nb", "tab\t", "\x1b[0m", "\x7f", "\u0085", "\xff", "\ufffe", "\uffff"} {
		for i, c := range []Credit{{Title: bad}, {Maker: bad}, {Rights: bad}} {
			_, err := c.XMP()
			var ie *InfoError
			if !errors.As(err, &ie) || ie.Field != []string{"title", "maker", "rights"}[i] {
				t.Errorf("%+v: %v", c, err)
				continue
			}
			hint(t, err)
		}
	}
}

// FuzzXMP: a credit that is taken comes back from an XML reader as it was.
func FuzzXMP(f *testing.F) {
	f.Add("Kelp <stair>", "A & B", "© ]]>")
	f.Add("\u2028", "\U0010FFFF", "&#x0;")
	f.Fuzz(func(t *testing.T, title, maker, rights string) {
		c := Credit{Title: title, Maker: maker, Rights: rights}
		packet, err := c.XMP()
		if err != nil {
			return
		}
		if !utf8.Valid(packet) {
			t.Fatal("not UTF-8")
		}
		got := values(t, packet)
		for name, want := range map[string]string{"title": title, "creator": maker, "rights": rights} {
			if strings.TrimSpace(want) != "" && got["http://purl.org/dc/elements/1.1/ "+name] != want {
				t.Errorf("%s %q came back as %q", name, want, got["http://purl.org/dc/elements/1.1/ "+name])
			}
		}
	})
}

// TestHasher: the SHA-256 of "abc" and of nothing (FIPS 180-4, NIST's examples).
func TestHasher(t *testing.T) {
	var h Hasher
	if got := h.Hex(); got != "e3b0c44298fc1c149afbf4c8996fb92427ae41e4649b934ca495991b7852b855" {
		t.Errorf("nothing: %s", got)
	}
	for _, part := range []string{"a", "", "bc"} {
		if n, err := h.Write([]byte(part)); n != len(part) || err != nil {
			t.Errorf("Write: %d, %v", n, err)
		}
	}
	for range 2 { // Sum changes nothing
		if got := h.Hex(); got != "ba7816bf8f01cfea414140de5dae2223b00361a396177a9cb410ff61f20015ad" {
			t.Errorf("abc: %s", got)
		}
	}
	if sum := h.Sum(); hex.EncodeToString(sum[:]) != h.Hex() {
		t.Error("Sum and Hex differ")
	}
}
