package palette

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"testing"
)

func bakedHash(codes [][3]uint16) string {
	h := sha256.New()
	for _, c := range codes {
		for _, v := range c {
			h.Write(binary.BigEndian.AppendUint16(nil, v))
		}
	}
	return hex.EncodeToString(h.Sum(nil))
}

// vivid leaves every gamut but ProPhoto, so that mapping is part of the hash.
func vivid() Ramp {
	return ramp(true,
		Stop{0, MustColour("oklch(0.2 0.1 280)")}, Stop{0.35, MustColour("color(display-p3 0 1 0)")},
		Stop{0.7, MustColour("hsl(17.3 81% 47%)")}, Stop{1, MustColour("lab(93 -40 88)")})
}

// The golden hashes are the same on every architecture. They change only with
// a change of the numbers printed, which raises the numerics version.
func TestBakedGoldens(t *testing.T) {
	for _, c := range []struct {
		space        Space
		house, vivid string
	}{
		{SRGB,
			"c8806e270be003a5e9aaaaab12f3638c693f924e4fdb1106ebb17ccac4f1c76b",
			"7448579dfac1028cfe54d0d68f9b59f82251c81e6d986d0fdd600aee8b12e3dc"},
		{DisplayP3,
			"bade752a601dbafa4cff5db3dd3a42139bbdee64aab1acabd6eb3d4d30185d11",
			"ab93b56a57d4f5a77921c7c97441ce2fc50df3a1ff4139379d2cb89d72b98de5"},
		{A98,
			"3b824c595c8338425484159c770d0c8ec7845d10b8f1edb32392fbfd1966c480",
			"316dde52e1b6645fc133de7bb780abdc0b1041d0de9051dd331f881761efdebf"},
		{ProPhoto,
			"ac85f5807b274f81ddf9b4993c04b79c1c173d102a51e0d272b3dde40e50d186",
			"d73bfdb53a53f268d5cda509ad824c0e669f9b63930c6a4d565770ed0fd6c065"},
	} {
		house, _ := DefaultRamp().Bake(c.space, 1024)
		bright, _ := vivid().Bake(c.space, 1024)
		if got := bakedHash(house); got != c.house {
			t.Errorf("%v: default ramp is %q", c.space, got)
		}
		if got := bakedHash(bright); got != c.vivid {
			t.Errorf("%v: vivid ramp is %q", c.space, got)
		}
	}
}

func TestBakeCountsWhatItMaps(t *testing.T) {
	for _, s := range Spaces() {
		const n = 777
		curve, want := vivid().Curve(), 0
		codes, out := vivid().Bake(s, n)
		for i := range n {
			code, in := curve.At(float64(i) / (n - 1)).BakeOne(s)
			if code != codes[i] {
				t.Fatalf("%v: entry %d is %v, alone %v", s, i, codes[i], code)
			}
			if !in {
				want++
			}
		}
		if out != want {
			t.Errorf("%v: counts %d, want %d", s, out, want)
		}
	}
	if _, narrow := vivid().Bake(SRGB, 777); narrow == 0 {
		t.Error("nothing leaves sRGB: the test shows nothing")
	}
}

// The same in-gamut colour in every space: decoded again it is the same colour
// to half a code in each channel.
func TestBakeAgreesBetweenSpaces(t *testing.T) {
	for i := range 200 {
		c := DefaultRamp().At(float64(i) / 199)
		for _, s := range Spaces() {
			code, in := c.BakeOne(s)
			if d := DeltaE00(FromCodes(s, code), c); d > 0.01 || !in {
				t.Errorf("%v in %v is %v away (in gamut %v)", c, s, d, in)
			}
		}
	}
}

func TestBakeRefusesMistakes(t *testing.T) {
	for name, f := range map[string]func(){
		"one entry": func() { DefaultRamp().Bake(SRGB, 1) },
		"no stops":  func() { Ramp{}.Bake(SRGB, 16) },
		"no space":  func() { DefaultRamp().Bake(spaceCount, 16) },
	} {
		func() {
			defer func() {
				if recover() == nil {
					t.Errorf("%s: no panic", name)
				}
			}()
			f()
		}()
	}
}

func BenchmarkBake(b *testing.B) {
	for name, r := range map[string]Ramp{"house": DefaultRamp(), "vivid": vivid()} {
		b.Run(name, func(b *testing.B) {
			for b.Loop() {
				r.Bake(SRGB, 1024)
			}
		})
	}
}
