package palette

import (
	"bytes"
	"crypto/md5"
	"encoding/binary"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"
)

// Values of ICC columns and curves as published profiles have them (s15Fixed16
// of D50 primaries, to 5 decimals; parametric curves in hexadecimal).
func TestProfileContents(t *testing.T) {
	for _, c := range []struct {
		space   Space
		columns [3][3]float64
		para    string
	}{
		{SRGB, [3][3]float64{{.43604, .22249, .01392}, {.38512, .71690, .09706}, {.14305, .06061, .71393}},
			"0003000000026666" + "0000f2a7" + "00000d59" + "000013d0" + "00000a5b"},
		{DisplayP3, [3][3]float64{{.51512, .24120, -.00105}, {.29198, .69223, .04189}, {.15710, .06657, .78407}},
			"0003000000026666" + "0000f2a7" + "00000d59" + "000013d0" + "00000a5b"},
		{A98, [3][3]float64{{.60974, .31111, .01947}, {.20528, .62567, .06087}, {.14919, .06322, .74457}},
			"0000000000023300"},
		{ProPhoto, [3][3]float64{{.79771, .28806, 0}, {.13516, .71187, .00002}, {.03133, .00008, .82489}},
			"000300000001cccd" + "00010000" + "00000000" + "00001000" + "00000800"},
	} {
		var sum [3]s15f16
		for j, column := range c.space.profileColumns() {
			for i, v := range column {
				sum[i] += v
				near(t, c.space.String(), []float64{float64(v) / 65536}, c.columns[j][i:i+1], 0.00003)
			}
		}
		if sum != pcsWhite() {
			t.Errorf("%v: columns add to %x", c.space, sum)
		}
		tone := toneV4(c.space.definition().curve)
		if got := fmt.Sprintf("%x", tone[8:]); got != c.para {
			t.Errorf("%v: curve %s, want %s", c.space, got, c.para)
		}
	}
}

// The layout rules of ICC.1:2022 §7.2 and §7.3.
func TestProfileLayout(t *testing.T) {
	for _, s := range Spaces() {
		for version, p := range map[uint32][]byte{0x04400000: s.ICC(), 0x02400000: s.ICCv2()} {
			word := func(at int) uint32 { return binary.BigEndian.Uint32(p[at:]) }
			if int(word(0)) != len(p) || len(p)%4 != 0 || word(8) != version || string(p[36:40]) != "acsp" {
				t.Fatalf("%v: header is wrong", s)
			}
			if n := len(p); version>>24 == 4 && n > 700 || n > 3000 {
				t.Errorf("%v: %d bytes", s, n)
			}
			next := 128 + 4 + 12*int(word(128))
			for i := range int(word(128)) {
				offset, size := int(word(132+12*i+4)), int(word(132+12*i+8))
				if offset%4 != 0 || offset > next || offset+size > len(p) {
					t.Errorf("%v: tag %d lies at %d, %d bytes", s, i, offset, size)
				}
				next = max(next, (offset+size+3)&^3)
			}
			if next != len(p) {
				t.Errorf("%v: data ends at %d of %d", s, next, len(p))
			}
			if version>>24 == 4 {
				blank := bytes.Clone(p)
				clear(blank[44:48])
				clear(blank[64:68])
				clear(blank[84:100])
				if id := md5.Sum(blank); !bytes.Equal(id[:], p[84:100]) {
					t.Errorf("%v: profile ID is wrong", s)
				}
			}
		}
		if !bytes.Equal(s.ICC(), s.ICC()) {
			t.Errorf("%v: two profiles differ", s)
		}
	}
}

func tool(t *testing.T, name, pkg string) string {
	t.Helper()
	path, err := exec.LookPath(name)
	if err != nil {
		t.Skipf("%s not found: apt-get install %s", name, pkg)
	}
	return path
}

func writeProfiles(t *testing.T) map[string]Space {
	t.Helper()
	files := map[string]Space{}
	for _, s := range Spaces() {
		for suffix, p := range map[string][]byte{"4": s.ICC(), "2": s.ICCv2()} {
			path := filepath.Join(t.TempDir(), s.String()+suffix+".icc")
			if err := os.WriteFile(path, p, 0o644); err != nil {
				t.Fatal(err)
			}
			files[path] = s
		}
	}
	return files
}

// transform sends 8-bit RGB through a profile with Little CMS, relative
// colorimetric without black point compensation.
func transform(t *testing.T, transicc, profile, to string, rgb [][3]int) [][3]float64 {
	t.Helper()
	var in strings.Builder
	for _, c := range rgb {
		fmt.Fprintln(&in, c[0], c[1], c[2])
	}
	cmd := exec.Command(transicc, "-t1", "-n", "-i", profile, "-o", to)
	cmd.Stdin = strings.NewReader(in.String())
	text, err := cmd.Output()
	if err != nil {
		t.Fatalf("transicc %s: %v", profile, err)
	}
	var out [][3]float64
	for line := range strings.Lines(string(text)) {
		var v [3]float64
		if n, _ := fmt.Sscan(line, &v[0], &v[1], &v[2]); n == 3 {
			out = append(out, v)
		}
	}
	if len(out) != len(rgb) {
		t.Fatalf("transicc %s: %d answers to %d colours:\n%s", profile, len(out), len(rgb), text)
	}
	return out
}

func TestProfileWhiteByLittleCMS(t *testing.T) {
	transicc := tool(t, "transicc", "liblcms2-utils")
	for path, s := range writeProfiles(t) {
		xyz := transform(t, transicc, path, "*XYZ", [][3]int{{255, 255, 255}})[0]
		if xyz != [3]float64{96.4203, 100, 82.4905} { // header D50, ICC.1:2022 §7.2.16
			t.Errorf("%v: white is %v", s, xyz)
		}
	}
}

var probes = [][3]int{{255, 0, 0}, {0, 255, 0}, {0, 0, 255}, {255, 255, 0}, {128, 128, 128}, {60, 130, 200}, {10, 10, 10}, {3, 2, 1}}

// Our profiles against the reference profiles of ArgyllCMS.
func TestProfilesAgainstArgyll(t *testing.T) {
	transicc := tool(t, "transicc", "liblcms2-utils")
	const dir = "/usr/share/color/argyll/ref"
	reference := map[Space]string{SRGB: "sRGB.icm", DisplayP3: "DisplayP3.icm", A98: "ClayRGB1998.icm", ProPhoto: "ProPhoto.icm"}
	if _, err := os.Stat(dir); err != nil {
		t.Skip("no reference profiles: apt-get install argyll-ref")
	}
	for path, s := range writeProfiles(t) {
		want := transform(t, transicc, filepath.Join(dir, reference[s]), "*Lab", probes)
		for i, got := range transform(t, transicc, path, "*Lab", probes) {
			d := math.Hypot(math.Hypot(got[0]-want[i][0], got[1]-want[i][1]), got[2]-want[i][2])
			if d > 0.02 {
				t.Errorf("%s: %v is %v, Argyll has %v: ΔE76 %.4f", filepath.Base(path), probes[i], got, want[i], d)
			}
		}
	}
}

// Pixels and profile must tell the same story: what Little CMS makes of codes
// under our profile is what this package makes of them.
func TestProfilesAgainstOwnColours(t *testing.T) {
	transicc := tool(t, "transicc", "liblcms2-utils")
	for path, s := range writeProfiles(t) {
		for i, got := range transform(t, transicc, path, "*Lab", probes) {
			var code [3]uint16
			for k, v := range probes[i] {
				code[k] = uint16(257 * v)
			}
			l, a, b := FromCodes(s, code).Lab()
			d := math.Hypot(math.Hypot(got[0]-l, got[1]-a), got[2]-b)
			if d > 0.03 { // the D50 of the header has four digits
				t.Errorf("%s: %v is %v, ours %v %v %v: ΔE76 %.4f", filepath.Base(path), probes[i], got, l, a, b, d)
			}
		}
	}
}

func TestProfilesByExiftool(t *testing.T) {
	exiftool := tool(t, "exiftool", "libimage-exiftool-perl")
	for path, s := range writeProfiles(t) {
		out, err := exec.Command(exiftool, "-validate", "-warning", "-a", "-s3", "-ProfileDescription", path).CombinedOutput()
		if err != nil {
			t.Fatal(err)
		}
		if want := "OK\n" + s.Name() + "\n"; string(out) != want {
			t.Errorf("%s: exiftool says %q, want %q", filepath.Base(path), out, want)
		}
	}
}
