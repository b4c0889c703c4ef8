package printfile

// lockState is what came of asking for a file's lock.
type lockState int

const (
	lockUnknown lockState = iota // there are no locks here
	lockHeld                     // we have it
	lockBusy                     // another holder has it
)
