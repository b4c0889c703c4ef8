package precision

import (
	"strings"
	"testing"
)

var sink float64

// benchUnary runs f over 256 arguments from lo to hi, so that no branch settles.
func benchUnary(b *testing.B, lo, hi float64, f func(float64) float64) {
	r := random()
	var xs [256]float64
	for i := range xs {
		xs[i] = lo + float64((hi-lo)*r.Float64())
	}
	s := 0.0
	for i := 0; b.Loop(); i++ {
		s += f(xs[i&255])
	}
	sink = s
}

func BenchmarkLog(b *testing.B)    { benchUnary(b, 0.01, 100, Log) }
func BenchmarkLog2(b *testing.B)   { benchUnary(b, 0.01, 100, Log2) }
func BenchmarkExp(b *testing.B)    { benchUnary(b, -20, 20, Exp) }
func BenchmarkExp2(b *testing.B)   { benchUnary(b, -20, 20, Exp2) }
func BenchmarkCbrt(b *testing.B)   { benchUnary(b, 0, 100, Cbrt) }
func BenchmarkSin(b *testing.B)    { benchUnary(b, 0, 6.3, Sin) }
func BenchmarkSinBig(b *testing.B) { benchUnary(b, 1e9, 1e15, Sin) }
func BenchmarkCos(b *testing.B)    { benchUnary(b, 0, 6.3, Cos) }

func BenchmarkSinCos(b *testing.B) {
	benchUnary(b, 0, 6.3, func(x float64) float64 { s, c := SinCos(x); return s + c })
}

func BenchmarkAtan2(b *testing.B) {
	benchUnary(b, -3, 3, func(x float64) float64 { return Atan2(x, 1) })
}

func BenchmarkPow(b *testing.B) {
	benchUnary(b, 0, 1, func(x float64) float64 { return Pow(x, 2.4) })
}

func benchExt(b *testing.B, f func(a, c Ext) Ext) {
	r := random()
	var xs [256]Ext
	for i := range xs {
		xs[i] = randomExt(r)
	}
	s := 0.0
	for i := 0; b.Loop(); i++ {
		s += f(xs[i&255], xs[(i+1)&255]).M
	}
	sink = s
}

func BenchmarkExtMul(b *testing.B) { benchExt(b, Ext.Mul) }
func BenchmarkExtAdd(b *testing.B) { benchExt(b, Ext.Add) }
func BenchmarkExtQuo(b *testing.B) { benchExt(b, Ext.Quo) }

func BenchmarkExtCmp(b *testing.B) {
	benchExt(b, func(a, c Ext) Ext { return Ext{M: float64(a.Cmp(c))} })
}

var long = "-1." + strings.Repeat("7482916350", 1000)

func BenchmarkParseDecimal10000(b *testing.B) {
	for b.Loop() {
		if _, err := ParseDecimal(long); err != nil {
			b.Fatal(err)
		}
	}
}

func BenchmarkDecimalFixed10000(b *testing.B) {
	d, _ := ParseDecimal(long)
	for b.Loop() {
		d.Fixed(33300)
	}
}

func BenchmarkDecimalFloat10000(b *testing.B) {
	d, _ := ParseDecimal(long)
	for b.Loop() {
		d.Float(33300)
	}
}

func BenchmarkDecimalOf10000(b *testing.B) {
	d, _ := ParseDecimal(long)
	x := d.Float(33300)
	for b.Loop() {
		DecimalOf(x, 10000)
	}
}

func BenchmarkDecimalNear10000(b *testing.B) {
	d, _ := ParseDecimal(long)
	x, tol := d.Float(33300), Ext{0.5, -33000}
	for b.Loop() {
		DecimalNear(x, tol)
	}
}

func BenchmarkDepth(b *testing.B) {
	d, _ := ParseDecimal("2.5e-3000")
	for b.Loop() {
		Depth(d)
	}
}

// BenchmarkRefuse10MB times the refusal of a text far beyond the limits.
func BenchmarkRefuse10MB(b *testing.B) {
	s := strings.Repeat("7", 10<<20)
	for b.Loop() {
		if _, err := ParseDecimal(s); err == nil {
			b.Fatal("accepted")
		}
	}
}
