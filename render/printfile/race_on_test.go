//go:build race

package printfile

const raceEnabled = true
