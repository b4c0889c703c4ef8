package orbit

import (
	"crypto/sha256"
	"encoding/binary"
	"encoding/hex"
	"math"
	"testing"
)

// TestIdentityTables: references and tables are the same to the last bit on
// every machine. The sums are of this package's own making, computed on amd64;
// that other processors and compilers come to the same is what they prove.
func TestIdentityTables(t *testing.T) {
	for _, v := range []struct {
		power          int
		re, im, height string
		want           string
	}{
		{2, "-0.7478", "0.1052", "1e-18", "8b95b27a60bf246b167656d334a7f4b930c9e89f3ea9accea00382897c91a3e4"},
		{2, "0.16882176686495031358749720031246248319322770", "0.59288678369462364175396986240150261573225680", "5.0e-31", "4591b4a6e375c6ab559e05a78b9ccae2fbc151de8e528a477c4d7a161cc8914c"},
		{2, "0", "1." + zeros(600) + "1", "1e-604", "2279eaad9d7211f6086dcabb50375c86beebcd44a863722ecd763649cd7f8767"},
		{3, "0.2549138751881531557308864078632925821775710818000681562019770646759804025",
			"0.9486946047371013521710161205989600354077138701554553708528573187164578890", "2.0e-60", "ba0432122f62322edf76d20ccc42582d21b31888653f210de11d06191a741b99"},
	} {
		q := request(t, v.power, v.re, v.im, v.height, 3000)
		r := reference(t, q)
		h := sha256.New()
		put := func(xs ...float64) {
			for _, x := range xs {
				h.Write(binary.BigEndian.AppendUint64(nil, math.Float64bits(x)))
			}
		}
		for _, p := range r.Points {
			put(p.Re, p.Im)
		}
		for _, level := range r.Tables(q.Radius.Add(r.Offset.Abs()), q.Pixel.E, 1000)[0].Levels {
			for k, l := range level.Leap {
				put(l.Ar, l.Ai, l.Br, l.Bi, float64(l.Ae), float64(l.Be))
				h.Write(binary.BigEndian.AppendUint64(nil, uint64(level.Key[k])))
			}
		}
		h.Write([]byte(r.Re.String() + " " + r.Im.String()))
		if got := hex.EncodeToString(h.Sum(nil)); got != v.want {
			t.Errorf("%.12s…, %s: reference and tables hash to %s, not %s", v.re, v.height, got, v.want)
		}
	}
}
