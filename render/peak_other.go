//go:build !unix

package render

// peakMemory is 0: this system does not tell.
func peakMemory() int64 { return 0 }
