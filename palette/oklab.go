package palette

import (
	"sync"

	"leadline/precision"
)

// OKLab (Ottosson 2020) with the matrices CSS Color 4 §10.9 recalculated at
// higher precision for the white point D65 of xy (0.3127, 0.3290). Forward and
// backward matrices are exact inverses before rounding.

var exactXYZToLMS = sync.OnceValue(func() ratMatrix {
	return ratRows([3][3]string{
		{"0.8190224379967030", "0.3619062600528904", "-0.1288737815209879"},
		{"0.0329836539323885", "0.9292868615863434", "0.0361446663506424"},
		{"0.0481771893596242", "0.2642395317527308", "0.6335478284694309"},
	})
})

var lmsToLab = sync.OnceValue(func() *okMatrices {
	exact := ratRows([3][3]string{
		{"0.2104542683093140", "0.7936177747023054", "-0.0040720430116193"},
		{"1.9779985324311684", "-2.4285922420485799", "0.4505937096174110"},
		{"0.0259040424655478", "0.7827717124575296", "-0.8086757549230774"},
	})
	return &okMatrices{toLab: exact.round(), fromLab: exact.inverse().round()}
})

// okMatrices relate the cube roots of the cone responses to OKLab.
type okMatrices struct{ toLab, fromLab matrix }

// labOfLMS takes cone responses to OKLab.
func labOfLMS(lms [3]float64) [3]float64 {
	for i, v := range lms {
		lms[i] = precision.Cbrt(v)
	}
	return lmsToLab().toLab.apply(lms)
}

// lmsOfLab takes OKLab to cone responses.
func lmsOfLab(lab [3]float64) [3]float64 {
	roots := lmsToLab().fromLab.apply(lab)
	for i, v := range roots {
		roots[i] = v * v * v
	}
	return roots
}
