package printfile

// unfilter turns the filtered row cur into the raw one in place (PNG §9.2); prev
// is the raw row above, empty for the first row, which counts as zeros. It
// reports whether it knows the filter.
func unfilter(filter byte, cur, prev []byte) bool {
	first := len(prev) == 0
	switch {
	case filter == filterNone, filter == filterUp && first:
	case filter == filterSub, filter == filterPaeth && first: // above and upper left 0: Paeth takes the left
		for i := bpp; i < len(cur); i++ {
			cur[i] += cur[i-bpp]
		}
	case filter == filterUp:
		prev = prev[:len(cur)]
		for i := range cur {
			cur[i] += prev[i]
		}
	case filter == filterAverage && first:
		for i := bpp; i < len(cur); i++ {
			cur[i] += cur[i-bpp] / 2
		}
	case filter == filterAverage:
		unAverage(cur, prev)
	case filter == filterPaeth:
		unPaeth(cur, prev)
	default:
		return false
	}
	return true
}

func unAverage(cur, prev []byte) {
	prev = prev[:len(cur)]
	for i := range bpp {
		cur[i] += prev[i] / 2
	}
	for i := bpp; i < len(cur); i++ {
		cur[i] += byte((int(cur[i-bpp]) + int(prev[i])) / 2)
	}
}

func unPaeth(cur, prev []byte) {
	prev = prev[:len(cur)]
	for i := range bpp {
		cur[i] += prev[i] // left and upper left 0: the one above is nearest
	}
	for i := bpp; i < len(cur); i++ {
		cur[i] += paeth(cur[i-bpp], prev[i], prev[i-bpp])
	}
}
