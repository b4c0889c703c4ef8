package frame

import (
	"fmt"
	"regexp"
	"strconv"
	"strings"
)

// Turn is an angle counter-clockwise on the paper that keeps its text. The
// zero value is absent and turns nothing.
type Turn struct {
	text    string
	degrees float64
}

// turnPattern is the grammar of a turn; the schema repeats it.
var turnPattern = regexp.MustCompile(`^-?(?:0|[1-9][0-9]{0,2})(?:\.[0-9]{1,30})?deg\z`)

// TurnError says that a text is not a turn.
type TurnError struct{ Text string }

// Error names the text.
func (e *TurnError) Error() string { return fmt.Sprintf("%q is not a turn", brief(e.Text)) }

// Hint says what a turn looks like.
func (e *TurnError) Hint() string {
	return fmt.Sprintf("write degrees counter-clockwise, such as 0deg or -12.5deg, from -%d to %d",
		MaxTurn, MaxTurn)
}

// ParseTurn reads "<number>deg", a plain decimal from -360 to 360. The error
// is a *TurnError.
func ParseTurn(s string) (Turn, error) {
	if !turnPattern.MatchString(s) {
		return Turn{}, &TurnError{Text: s}
	}
	deg, err := strconv.ParseFloat(strings.TrimSuffix(s, "deg"), 64)
	if err != nil || deg < -MaxTurn || deg > MaxTurn {
		return Turn{}, &TurnError{Text: s}
	}
	return Turn{text: s, degrees: deg + 0}, nil
}

// Degrees is the double nearest to the angle.
func (t Turn) Degrees() float64 { return t.degrees }

// String is the text as given, "" for the zero value.
func (t Turn) String() string { return t.text }

// IsZero reports whether the turn is absent; "0deg" is not.
func (t Turn) IsZero() bool { return t.text == "" }

// MarshalText gives the text.
func (t Turn) MarshalText() ([]byte, error) { return []byte(t.text), nil }

// brief cuts a text that came from outside to a length fit for a message.
func brief(s string) string {
	const most = 40
	if len(s) <= most {
		return s
	}
	return strings.ToValidUTF8(s[:most], "") + "…"
}
