package kernel

// State says how a sample ended.
type State uint8

// A sample escapes, is proved to lie inside, or is still undecided when it
// reaches the iteration limit.
const (
	Escaped State = iota
	Inside
	Undecided
)

// String names the state as probe and sidecar do.
func (s State) String() string {
	switch s {
	case Escaped:
		return "escaped"
	case Inside:
		return "inside"
	}
	return "undecided"
}

// Field is what iteration yields at one sample.
type Field struct {
	State    State
	N        int     // first index with |z_n| > bailout; escaped samples only
	Smooth   float64 // n + 1 - log_p(ln|z_n| / ln bailout)
	Distance float64 // estimate of the distance to the set, in pixels
}
