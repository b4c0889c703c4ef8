package printfile

import (
	"bytes"
	"encoding/binary"
	"os"
	"os/exec"
	"path/filepath"
	"strconv"
	"strings"
	"testing"
)

// printOut writes a full file of several strips for the outside tools.
func printOut(t *testing.T, row func([]byte, int, int)) (path string, info Info, pixels []byte) {
	t.Helper()
	const width, height = 901, 250 // 193 rows a strip
	info, path = fullInfo(t, width, height), filepath.Join(t.TempDir(), "a.png")
	pixels = picture(row, width, height)
	writeFile(t, path, info, pixels, 2)
	return path, info, pixels
}

// tool runs a program of a Debian package and returns what it prints.
func tool(t *testing.T, debian, name string, args ...string) string {
	t.Helper()
	if _, err := exec.LookPath(name); err != nil {
		t.Skipf("%s is missing: apt-get install %s", name, debian)
	}
	cmd := exec.Command(name, args...)
	var errs bytes.Buffer
	cmd.Stderr = &errs
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("%s %v: %v\n%s%s", name, args, err, out, errs.Bytes())
	}
	if errs.Len() > 0 {
		t.Errorf("%s complains: %s", name, errs.Bytes())
	}
	return string(out)
}

func TestPngcheck(t *testing.T) {
	for name, row := range map[string]func([]byte, int, int){"smooth": smoothRow, "detailed": detailedRow, "noisy": noisyRow} {
		t.Run(name, func(t *testing.T) {
			path, _, _ := printOut(t, row)
			out := tool(t, "pngcheck", "pngcheck", "-v", path)
			if !strings.Contains(out, "No errors detected") || !strings.Contains(out, "901 x 250 image, 48-bit RGB, non-interlaced") {
				t.Error(out)
			}
		})
	}
}

// TestPngfix: libpng's tool goes through the zlib stream itself.
func TestPngfix(t *testing.T) {
	path, _, pixels := printOut(t, detailedRow)
	out := tool(t, "libpng-tools", "pngfix", "--out="+os.DevNull, path)
	if !strings.Contains(out, "IDAT OK  default 15 15") || !strings.Contains(out, strconv.Itoa(len(pixels)+250)) {
		t.Error(out)
	}
}

func TestExiftool(t *testing.T) {
	const debian, name = "libimage-exiftool-perl", "exiftool"
	path, info, _ := printOut(t, smoothRow)
	if out := tool(t, debian, name, "-validate", "-warning", "-a", path); strings.Join(strings.Fields(out), " ") != "Validate : OK" {
		t.Error(out)
	}
	if out := tool(t, debian, name, "-b", "-icc_profile", path); out != string(info.ICC) {
		t.Errorf("the profile comes back with %d bytes of %d, or other ones", len(out), len(info.ICC))
	}
	if out := tool(t, debian, name, "-b", "-XMP", path); out != string(info.XMP) {
		t.Errorf("the packet comes back as %q", out)
	}
	got := tool(t, debian, name, "-s3", "-Title", "-Creator", "-Rights", "-CreatorTool", "-DigitalSourceType", "-DocumentID", "-ProfileName", path)
	want := strings.Join([]string{"Kelp <stair> & “plate” 4", "A. Maker", "© A. Maker", "leadline", sourceType,
		"urn:uuid:" + documentID([]byte{1, 2, 3}), info.ICCName, ""}, "\n")
	if got != want {
		t.Errorf("exiftool reads\n%swant\n%s", got, want)
	}
}

// TestImageMagick: 11811 pixels a metre are 118.11 a centimetre, and %# is the
// hash of the pixels.
func TestImageMagick(t *testing.T) {
	for name, row := range map[string]func([]byte, int, int){"detailed": detailedRow, "noisy": noisyRow} {
		t.Run(name, func(t *testing.T) {
			path, _, pixels := printOut(t, row)
			var h Hasher
			h.Write(pixels)
			out := tool(t, "imagemagick", "identify", "-format", "%w %h %z %[fx:int(resolution.x*100+.5)] %U %#", path)
			if want := "901 250 16 11811 PixelsPerCentimeter " + h.Hex(); out != want {
				t.Errorf("identify says %s, want %s", out, want)
			}
		})
	}
}

// TestVips compares every pixel after a full decode: vips' PPM of 16 bits is
// big-endian (netpbm, ppm(5)).
func TestVips(t *testing.T) {
	path, _, pixels := printOut(t, detailedRow)
	ppm := filepath.Join(t.TempDir(), "a.ppm")
	tool(t, "libvips-tools", "vips", "copy", path, ppm)
	b, err := os.ReadFile(ppm)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.HasSuffix(b, pixels) {
		t.Errorf("vips reads other pixels (%d bytes of ppm for %d)", len(b), len(pixels))
	}
	sum := uint64(0)
	for i := 0; i < len(pixels); i += 2 {
		sum += uint64(binary.BigEndian.Uint16(pixels[i:]))
	}
	out := tool(t, "libvips-tools", "vips", "avg", path)
	if got, want := strings.TrimSpace(out), float64(sum)/float64(len(pixels)/2); got != strconv.FormatFloat(want, 'f', 6, 64) {
		t.Errorf("vips says the mean is %s, want %f", got, want)
	}
}

func TestXmllint(t *testing.T) {
	_, info, _ := printOut(t, smoothRow)
	path := filepath.Join(t.TempDir(), "a.xmp")
	if err := os.WriteFile(path, info.XMP, 0o644); err != nil {
		t.Fatal(err)
	}
	if out := tool(t, "libxml2-utils", "xmllint", "--noout", path); out != "" {
		t.Error(out)
	}
}
