package jobs

import "leadline/render/words"

// Over says whether nothing more happens to a print by itself.
func (p *Print) Over() bool { return p.State.over() }

// Word is how a print stands, in a word: its state, or that it is held.
func (p *Print) Word() string {
	if p.Paused {
		return "paused"
	}
	return string(p.State)
}

// LeftWords is the time to go and the range it lies in, "" where one is not
// known.
func (p *Print) LeftWords() (left, between string) {
	if p.Left <= 0 || p.Paused || p.State != Rendering {
		return "", ""
	}
	left = words.Span(p.Left)
	if p.LeftHigh > 0 && words.Span(p.LeftLow) != words.Span(p.LeftHigh) {
		between = words.Between(p.LeftLow, p.LeftHigh)
	}
	return left, between
}
