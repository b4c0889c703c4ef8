package printfile

import (
	"math/bits"
	"sync"
)

// Which filter suits a row is judged by the entropy of the filtered bytes: the
// row with n(v) bytes of value v takes N log N - sum n(v) log n(v) bits when
// each value has its own code, so the filter with the greatest sum wins. The
// PNG specification's own suggestion, the least sum of absolute values (§12.7),
// does worse on 16-bit rows, whose low bytes are nearly noise and drown the
// sum. The arithmetic is in integers, so that every machine chooses alike.

// filterOrder lists the filters in order of preference among equals. A row of
// one colour is equal under all; Up also makes it equal to its neighbours.
var filterOrder = [filterCount]int{filterUp, filterPaeth, filterAverage, filterSub, filterNone}

// chooser filters rows in all five ways. It is scratch space for one goroutine.
type chooser struct {
	rows [filterCount][]byte // each filter byte and filtered row
	hist [4][256]uint32      // four, so that runs of one value do not wait for each other
	logs *[logTable]uint32
}

func newChooser(rowBytes int) *chooser {
	c := &chooser{logs: log2Table()}
	for f := range c.rows {
		c.rows[f] = make([]byte, 1+rowBytes)
		c.rows[f][0] = byte(f)
	}
	return c
}

// filter puts the filtered forms of cur below prev into c.rows and returns the
// filter of least entropy.
func (c *chooser) filter(cur, prev []byte) int {
	copy(c.rows[filterNone][1:], cur)
	subFilter(c.rows[filterSub][1:], cur)
	upFilter(c.rows[filterUp][1:], cur, prev)
	averageFilter(c.rows[filterAverage][1:], cur, prev)
	paethFilter(c.rows[filterPaeth][1:], cur, prev)
	best, most := filterOrder[0], uint64(0)
	for _, f := range filterOrder {
		if s := c.order(c.rows[f][1:]); s > most {
			best, most = f, s
		}
	}
	return best
}

// order returns the sum of n log2 n over the byte values of row, in units of
// 2^-16 bit: the higher, the less entropy.
func (c *chooser) order(row []byte) uint64 {
	clear(c.hist[0][:])
	clear(c.hist[1][:])
	clear(c.hist[2][:])
	clear(c.hist[3][:])
	i := 0
	for ; i+8 <= len(row); i += 8 {
		v := load(row[i:])
		c.hist[0][byte(v)]++
		c.hist[1][byte(v>>8)]++
		c.hist[2][byte(v>>16)]++
		c.hist[3][byte(v>>24)]++
		c.hist[0][byte(v>>32)]++
		c.hist[1][byte(v>>40)]++
		c.hist[2][byte(v>>48)]++
		c.hist[3][byte(v>>56)]++
	}
	for ; i < len(row); i++ {
		c.hist[0][row[i]]++
	}
	sum := uint64(0)
	for v := range 256 {
		n := uint64(c.hist[0][v]) + uint64(c.hist[1][v]) + uint64(c.hist[2][v]) + uint64(c.hist[3][v])
		sum += timesLog2(c.logs, n)
	}
	return sum
}

// logTable is the size of the table of logarithms; larger numbers are looked up
// by their leading 12 bits, an error of at most 2^-11 * log2(e) bit.
const logTable = 1 << 12

// timesLog2 returns n log2 n in units of 2^-16. It overflows past n = 2^42.
func timesLog2(logs *[logTable]uint32, n uint64) uint64 {
	if n < logTable {
		return n * uint64(logs[n])
	}
	shift := bits.Len64(n) - 12
	return n * (uint64(logs[(n>>shift)%logTable]) + uint64(shift)<<16)
}

// log2Table returns log2 of 0 to 4095 in units of 2^-16, rounded down; the entry
// of 0 is 0. The digits come one by one, by squaring: log2 x has a binary digit
// 1 where x*x reaches 2.
var log2Table = sync.OnceValue(func() *[logTable]uint32 {
	var t [logTable]uint32
	for n := uint64(1); n < logTable; n++ {
		whole := bits.Len64(n) - 1
		x := n << (31 - whole) // 1 <= x < 2 in units of 2^-31
		log := uint32(whole)
		for range 16 {
			x = x * x >> 31
			log = log<<1 | uint32(x>>32)
			x >>= x >> 32
		}
		t[n] = log
	}
	return &t
})
