package precision

import (
	"bytes"
	"crypto/sha256"
	"encoding/binary"
	"fmt"
	"math"
	"os"
	"testing"
)

// TestGoldenBits hashes the exact bits of every function over fixed arguments. The
// file of hashes is the same for every processor and compiler setting, which is
// what the package promises. NaN counts as one value.
func TestGoldenBits(t *testing.T) {
	var got bytes.Buffer
	for _, f := range goldenFuncs {
		h := sha256.New()
		for i, x := range goldenArgs {
			y := goldenArgs[(7*i+3)%len(goldenArgs)]
			for _, v := range f.f(x, y) {
				if v != v {
					v = 0x1.bad1p77
				}
				var b [8]byte
				binary.BigEndian.PutUint64(b[:], math.Float64bits(v))
				h.Write(b[:])
			}
		}
		fmt.Fprintf(&got, "%s %x\n", f.name, h.Sum(nil))
	}
	const file = "testdata/bits.sha256"
	if *update {
		if err := os.WriteFile(file, got.Bytes(), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	want, err := os.ReadFile(file)
	if err != nil {
		t.Fatal(err)
	}
	if !bytes.Equal(got.Bytes(), want) {
		t.Errorf("bits differ from %s:\n%s\nwant\n%s", file, got.Bytes(), want)
	}
}

// goldenArgs are doubles of all kinds, built from bits alone.
var goldenArgs = func() (xs []float64) {
	xs = append(xs, 0, zero, 1, -1, inf, -inf, nan, 0x1p-1074, 0x1p-1022, math.MaxFloat64, -math.MaxFloat64)
	r := random()
	exponents := []uint64{2000, 60, 30, 8, 4} // spread around 2^0
	for i := range 40000 {
		spread := exponents[i%len(exponents)]
		e := 1023 - spread/2 + r.Uint64N(spread)
		xs = append(xs, math.Float64frombits(r.Uint64()&(1<<63|1<<52-1)|e<<52))
	}
	return xs
}()

func unary(f func(float64) float64) func(x, y float64) []float64 {
	return func(x, _ float64) []float64 { return []float64{f(x)} }
}

func binaryFunc(f func(x, y float64) float64) func(x, y float64) []float64 {
	return func(x, y float64) []float64 { return []float64{f(x, y)} }
}

func extFunc(f func(a, b Ext) Ext) func(x, y float64) []float64 {
	return func(x, y float64) []float64 {
		z := f(ExtOf(x).Ldexp(77), ExtOf(y).Ldexp(70))
		return []float64{z.M, float64(z.E)}
	}
}

var goldenFuncs = []struct {
	name string
	f    func(x, y float64) []float64
}{
	{"Log", unary(func(x float64) float64 { return Log(math.Abs(x)) })},
	{"Log2", unary(func(x float64) float64 { return Log2(math.Abs(x)) })},
	{"Exp", unary(Exp)},
	{"Exp2", unary(Exp2)},
	{"Cbrt", unary(Cbrt)},
	{"Sin", unary(Sin)},
	{"Cos", unary(Cos)},
	{"SinCos", func(x, _ float64) []float64 { s, c := SinCos(x); return []float64{s, c} }},
	{"Atan2", binaryFunc(Atan2)},
	{"Pow", binaryFunc(func(x, y float64) float64 { return Pow(math.Abs(x), y) })},
	{"Ext.Add", extFunc(Ext.Add)},
	{"Ext.Sub", extFunc(Ext.Sub)},
	{"Ext.Mul", extFunc(Ext.Mul)},
	{"Ext.Quo", extFunc(Ext.Quo)},
	{"Ext.Sqrt", extFunc(func(a, _ Ext) Ext { return a.Abs().Sqrt() })},
	{"Ext.Log2", extFunc(func(a, b Ext) Ext { return ExtOf(a.Abs().Mul(b.Abs()).Log2()) })},
}
