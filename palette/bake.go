package palette

// Bake samples the ramp at n places, entry i at t = i/(n-1), maps each into
// the gamut of the space and encodes it. It also counts the entries that had
// to be mapped. It panics for n < 2 and on a ramp that Validate refuses.
func (r Ramp) Bake(s Space, n int) (codes [][3]uint16, outOfGamut int) {
	if n < 2 {
		panic("palette: a baked ramp has at least two entries")
	}
	curve := r.Curve()
	codes = make([][3]uint16, n)
	for i := range codes {
		var in bool
		codes[i], in = curve.At(float64(i) / float64(n-1)).BakeOne(s)
		if !in {
			outOfGamut++
		}
	}
	return codes, outOfGamut
}

// BakeOne maps one colour into the gamut of the space and encodes it; inGamut is
// false when it had to be mapped.
func (c Colour) BakeOne(s Space) (code [3]uint16, inGamut bool) {
	linear, inGamut := c.In(s)
	if !inGamut {
		linear = c.mapped(s)
	}
	t := s.Transfer()
	for i, v := range linear {
		code[i] = t.Encode(v)
	}
	return code, inGamut
}
