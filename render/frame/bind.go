package frame

import (
	"encoding"
	"fmt"
	"math"
	"strconv"
	"strings"
	"unicode/utf8"

	"leadline/palette"
	"leadline/precision"
)

// object binds the keys of one JSON object to Go values and remembers which
// keys exist. A nil object, standing for one that is absent or of another
// type, binds nothing and finds no fault.
type object struct {
	c     *collector
	path  string
	n     *node
	known []string
}

// need says whether a key must be there.
type need bool

const (
	required need = true
	optional need = false
)

// root is the object a whole document is.
func (c *collector) root(n *node) *object {
	if n.kind != anObject {
		c.push(Fault{Message: fmt.Sprintf("document is %s, not an object", n.kind)})
		return nil
	}
	return &object{c: c, n: n}
}

// at is the path of a key.
func (o *object) at(key string) string { return join(o.path, key) }

// value is the node of a key where it is there and of type want. A missing
// required key and a wrong type are faults; hint is the wrong type's cure.
func (o *object) value(key string, must need, want kind, hint string) *node {
	if o == nil {
		return nil
	}
	o.known = append(o.known, key)
	v := o.n.get(key)
	switch {
	case v == nil && bool(must):
		o.c.addf(o.at(key), "", "is required")
		return nil
	case v == nil:
		return nil
	case v.kind == aNull:
		o.c.addf(o.at(key), "leave the key out instead", "must be %s, not null", want)
		return nil
	case v.kind != want:
		o.c.addf(o.at(key), hint, "must be %s, not %s", want, v.kind)
		return nil
	}
	return v
}

// object is the object of a key, nil where there is none.
func (o *object) object(key string, must need) *object {
	v := o.value(key, must, anObject, "")
	if v == nil {
		return nil
	}
	return &object{c: o.c, path: o.at(key), n: v}
}

// text binds a string.
func (o *object) text(key string, must need, to *string) {
	if v := o.value(key, must, aString, ""); v != nil {
		*to = v.text
	}
}

// flag binds a boolean to a new one.
func (o *object) flag(key string, to **bool) {
	if v := o.value(key, optional, aBool, ""); v != nil {
		*to = new(v.truth)
	}
}

// parsed binds a string through its type's own parser, whose error and hint
// become the fault.
func (o *object) parsed(key string, must need, parse func(string) error) {
	v := o.value(key, must, aString, "write it in quotation marks")
	if v == nil {
		return
	}
	if err := parse(v.text); err != nil {
		o.c.add(o.at(key), err.Error(), hintOf(err))
	}
}

// textual binds a string by UnmarshalText.
func (o *object) textual(key string, must need, to encoding.TextUnmarshaler) {
	o.parsed(key, must, func(s string) error { return to.UnmarshalText([]byte(s)) })
}

// decimal binds a long number.
func (o *object) decimal(key string, must need, to *precision.Decimal) {
	v := o.value(key, must, aString,
		`long numbers are strings, so that no program rounds them: write it in quotation marks`)
	if v == nil {
		return
	}
	d, err := precision.ParseDecimal(v.text)
	if err != nil {
		o.c.add(o.at(key), err.Error(), hintOf(err))
		return
	}
	*to = d
}

// colour binds a colour and reports whether there is one.
func (o *object) colour(key string, must need, to *palette.Colour) (ok bool) {
	o.parsed(key, must, func(s string) error {
		if n := utf8.RuneCountInString(s); n > MaxColour {
			return &limitError{fmt.Sprintf("has %d characters", n), fmt.Sprintf("a colour has at most %d", MaxColour)}
		}
		c, err := palette.ParseColour(s)
		if ok = err == nil; ok {
			*to = c
		}
		return err
	})
	return ok
}

// limitError is a message with its hint.
type limitError struct{ message, hint string }

func (e *limitError) Error() string { return e.message }
func (e *limitError) Hint() string  { return e.hint }

// number binds a number.
func (o *object) number(key string, must need, to *float64) {
	if v := o.value(key, must, aNumber, "write it without quotation marks"); v != nil {
		if f, ok := o.c.float(o.at(key), v.text); ok {
			*to = f
		}
	}
}

// maybe binds an optional number whose zero means something to a new one.
func (o *object) maybe(key string, to **float64) {
	if v := o.value(key, optional, aNumber, "write it without quotation marks"); v != nil {
		if f, ok := o.c.float(o.at(key), v.text); ok {
			*to = new(f)
		}
	}
}

// whole binds a whole number of at most 53 bits, which 4, 4.0 and 4e0 all are.
func whole[T int | int64](o *object, key string, must need, to *T) {
	v := o.value(key, must, aNumber, "write it without quotation marks")
	if v == nil {
		return
	}
	f, ok := o.c.float(o.at(key), v.text)
	switch {
	case !ok:
	case !isWhole(f, v.text):
		o.c.addf(o.at(key), "", "%s is not a whole number", v.text)
	case math.Abs(f) > 1<<53:
		o.c.addf(o.at(key), "", "%s is too large", v.text)
	default:
		*to = T(f)
	}
}

// isWhole reports whether literal, whose double is f, is a whole number: exactly,
// since 4.00000000000000000001 has the double of 4.
func isWhole(f float64, literal string) bool {
	if f != math.Trunc(f) {
		return false
	}
	exact, err := precision.ParseDecimal(literal)
	if err != nil || math.Abs(f) > 1<<53 {
		return err == nil
	}
	return exact.Cmp(mustDecimal(strconv.FormatInt(int64(f), 10))) == 0
}

// float is a JSON number's double; those a double cannot hold are faults.
// Minus zero becomes zero, so that a number has one form.
func (c *collector) float(path, literal string) (float64, bool) {
	if len(literal) > MaxNumber {
		c.addf(path, "", "number has more than %d characters", MaxNumber)
		return 0, false
	}
	f, err := strconv.ParseFloat(literal, 64)
	if err != nil {
		c.addf(path, "", "%s is too large a number", literal)
		return 0, false
	}
	return f + 0, true
}

// items is the elements of an array with their paths, at most most of them.
func (o *object) items(key string, must need, least, most int, each func(path string, n *node)) {
	v := o.value(key, must, anArray, "")
	if v == nil {
		return
	}
	if len(v.vals) < least || len(v.vals) > most {
		want := fmt.Sprintf("from %d to %d", least, most)
		if least == most {
			want = strconv.Itoa(most)
		}
		o.c.addf(o.at(key), "", "has %d entries, not %s", len(v.vals), want)
		return
	}
	for i, n := range v.vals {
		each(fmt.Sprintf("%s[%d]", o.at(key), i), n)
	}
}

// done finds the keys nobody asked for.
func (o *object) done() {
	if o == nil {
		return
	}
	for _, key := range o.n.keys {
		if !contains(o.known, key) {
			o.c.push(Fault{join(o.c.prefix, o.at(pathKey(key))), "unknown key", nearest(key, o.known)})
		}
	}
}

// contains reports whether list holds s.
func contains(list []string, s string) bool {
	for _, l := range list {
		if l == s {
			return true
		}
	}
	return false
}

// nearest is the hint for a word that is none of known: the known word within
// a third of its length in edits, else all of them.
func nearest(word string, known []string) string {
	best, least := "", 1+max(1, min(len(word), 40)/3)
	if len(word) <= 40 {
		for _, k := range known {
			if d := edits(strings.ToLower(word), strings.ToLower(k)); d < least {
				best, least = k, d
			}
		}
	}
	if best != "" {
		return fmt.Sprintf("did you mean %s?", best)
	}
	return "known here: " + strings.Join(known, ", ")
}

// edits is the optimal string alignment distance: insertions, deletions,
// substitutions and swaps of neighbours (Damerau 1964, restricted), by the
// usual table of three rows.
func edits(a, b string) int {
	x, y := []rune(a), []rune(b)
	before, last, row := make([]int, len(y)+1), make([]int, len(y)+1), make([]int, len(y)+1)
	for j := range last {
		last[j] = j
	}
	for i := range x {
		row[0] = i + 1
		for j := range y {
			cost := 1
			if x[i] == y[j] {
				cost = 0
			}
			row[j+1] = min(last[j+1]+1, row[j]+1, last[j]+cost)
			if i > 0 && j > 0 && x[i] == y[j-1] && x[i-1] == y[j] {
				row[j+1] = min(row[j+1], before[j-1]+1)
			}
		}
		before, last, row = last, row, before
	}
	return last[len(y)]
}

// nonzero finds keys given as 0 or "": for these values a Go zero means absent,
// and a document must not say so in figures.
func (o *object) nonzero(keys ...string) {
	if o == nil {
		return
	}
	for _, key := range keys {
		v := o.n.get(key)
		switch {
		case v == nil:
		case v.kind == aString && v.text == "":
			o.c.add(o.at(key), "must not be empty", "leave the key out for its default")
		case v.kind == aNumber:
			if f, ok := o.c.float(o.at(key), v.text); ok && f == 0 {
				o.c.add(o.at(key), "must not be zero", "leave the key out for its default")
			}
		}
	}
}

// maybeDecimal binds an optional long number to a new one.
func (o *object) maybeDecimal(key string, to **precision.Decimal) {
	if o != nil && o.n.get(key) != nil {
		*to = new(precision.Decimal)
		o.decimal(key, required, *to)
		return
	}
	o.value(key, optional, aString, "")
}
