package printfile

import (
	"bytes"
	"fmt"
	"math"
	"math/rand/v2"
	"testing"
)

// plainPaeth is the pseudocode of PNG 3rd ed. §9.4, word for word.
func plainPaeth(a, b, c int) int {
	abs := func(v int) int { return max(v, -v) }
	p := a + b - c
	pa, pb, pc := abs(p-a), abs(p-b), abs(p-c)
	if pa <= pb && pa <= pc {
		return a
	} else if pb <= pc {
		return b
	}
	return c
}

// plainFilter is the table of PNG 3rd ed. §9.2, byte by byte.
func plainFilter(filter int, cur, prev []byte) []byte {
	out := make([]byte, len(cur))
	for i := range cur {
		var a, c int
		b := int(prev[i])
		if i >= bpp {
			a, c = int(cur[i-bpp]), int(prev[i-bpp])
		}
		predicted := 0
		switch filter {
		case 1:
			predicted = a
		case 2:
			predicted = b
		case 3:
			predicted = (a + b) / 2
		case 4:
			predicted = plainPaeth(a, b, c)
		}
		out[i] = byte(int(cur[i]) - predicted)
	}
	return out
}

func TestPaethIsTheSpecifications(t *testing.T) {
	for a := range 256 {
		for b := range 256 {
			for c := range 256 {
				if got, want := paeth(byte(a), byte(b), byte(c)), plainPaeth(a, b, c); int(got) != want {
					t.Fatalf("paeth(%d, %d, %d) = %d, want %d", a, b, c, got, want)
				}
			}
		}
	}
}

func TestBytesAtATime(t *testing.T) {
	r := rand.New(rand.NewPCG(3, 4))
	for x := range 256 {
		for y := range 256 {
			// The pair in one byte, anything in the others: nothing may leak across.
			lane := 8 * (r.IntN(8))
			others := ^(uint64(0xFF) << lane)
			vx, vy := r.Uint64()&others|uint64(x)<<lane, r.Uint64()&others|uint64(y)<<lane
			if got, want := byte(subBytes(vx, vy)>>lane), byte(x-y); got != want {
				t.Fatalf("%d-%d = %d, want %d", x, y, got, want)
			}
			if got, want := byte(averageBytes(vx, vy)>>lane), byte((x+y)/2); got != want {
				t.Fatalf("average of %d and %d = %d, want %d", x, y, got, want)
			}
		}
	}
}

// randomRow returns bytes of one of several kinds, so that ties and wraps occur.
func randomRow(r *rand.Rand, n int) []byte {
	b := make([]byte, n)
	kind := r.IntN(3)
	for i := range b {
		switch kind {
		case 0:
			b[i] = byte(r.Uint32())
		case 1:
			b[i] = byte(r.IntN(3) * 255 / 2)
		case 2:
			b[i] = byte(120 + r.IntN(8))
		}
	}
	return b
}

func TestFiltersAreTheSpecifications(t *testing.T) {
	r := rand.New(rand.NewPCG(1, 2))
	for width := 1; width <= 40; width++ {
		c := newChooser(width * bpp)
		for range 40 {
			cur, prev := randomRow(r, width*bpp), randomRow(r, width*bpp)
			c.filter(cur, prev)
			for f, got := range c.rows {
				if want := plainFilter(f, cur, prev); int(got[0]) != f || !bytes.Equal(got[1:], want) {
					t.Fatalf("width %d filter %d:\n got %v\nwant %v", width, f, got[1:], want)
				}
				back := bytes.Clone(got[1:])
				if !unfilter(byte(f), back, prev) || !bytes.Equal(back, cur) {
					t.Fatalf("width %d: filter %d does not undo", width, f)
				}
				// The row above the first counts as zeros (§9.2).
				back = plainFilter(f, cur, make([]byte, len(cur)))
				if !unfilter(byte(f), back, nil) || !bytes.Equal(back, cur) {
					t.Fatalf("width %d: filter %d does not undo in the first row", width, f)
				}
			}
		}
	}
	if unfilter(5, make([]byte, bpp), nil) {
		t.Error("filter 5 is taken, but the specification has none")
	}
}

// TestLeastEntropy compares the choice with Shannon's formula in floating point.
func TestLeastEntropy(t *testing.T) {
	entropy := func(row []byte) float64 {
		var n [256]float64
		for _, v := range row {
			n[v]++
		}
		sum := 0.0
		for _, v := range n {
			if v > 0 {
				sum -= v * math.Log2(v/float64(len(row)))
			}
		}
		return sum
	}
	const width = 2000
	c := newChooser(width * bpp)
	used := map[int]bool{}
	b := mixed(width, 40)
	for y := 1; y < 40; y++ {
		prev, cur := b[(y-1)*width*bpp:y*width*bpp], b[y*width*bpp:(y+1)*width*bpp]
		got := c.filter(cur, prev)
		used[got] = true
		least := math.Inf(1)
		for f := range filterCount {
			least = min(least, entropy(plainFilter(f, cur, prev)))
		}
		// Two units of 2^-16 bit a byte value is more than the tables' rounding.
		if e := entropy(plainFilter(got, cur, prev)); e > least*(1+1e-4)+width*bpp/32768.0 {
			t.Errorf("row %d: filter %d costs %.1f bits, the best %.1f", y, got, e, least)
		}
	}
	if len(used) < 3 {
		t.Errorf("only the filters %v were chosen: the picture tests nothing", used)
	}
}

func TestLogarithms(t *testing.T) {
	logs := log2Table()
	for n := uint64(1); n < logTable; n++ {
		if got, exact := float64(logs[n]), math.Log2(float64(n))*65536; got > exact+1e-6 || got < exact-1.001 {
			t.Fatalf("log2 %d = %v/65536, want %v rounded down", n, got, exact)
		}
	}
	for n := uint64(1); n < 1<<34; n += n/3 + 1 {
		got, exact := float64(timesLog2(logs, n))/65536, float64(n)*math.Log2(float64(n))
		if n > 0 && math.Abs(got-exact) > float64(n)*(math.Log2E/2048+2.0/65536) {
			t.Errorf("%d log2 = %v, want %v", n, got, exact)
		}
	}
	if timesLog2(logs, 0) != 0 {
		t.Error("0 log 0 is not 0")
	}
}

func BenchmarkFilterRow(b *testing.B) {
	const width = 14173
	pixels := picture(detailedRow, width, 2)
	c := newChooser(width * bpp)
	b.SetBytes(width * bpp)
	for b.Loop() {
		c.filter(pixels[width*bpp:], pixels[:width*bpp])
	}
}

func BenchmarkUnfilterRow(b *testing.B) {
	const width = 14173
	cur, prev := make([]byte, width*bpp), picture(noisyRow, width, 1)
	for f := range filterCount {
		b.Run(fmt.Sprint(f), func(b *testing.B) {
			b.SetBytes(width * bpp)
			for b.Loop() {
				unfilter(byte(f), cur, prev)
			}
		})
	}
}
