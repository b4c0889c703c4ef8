package frame

import (
	"bytes"
	"encoding/json"
	"errors"
	"fmt"
	"regexp"
	"unicode/utf8"
)

// kind is the JSON type of a node, named as messages name it.
type kind string

const (
	anObject kind = "an object"
	anArray  kind = "an array"
	aString  kind = "a string"
	aNumber  kind = "a number"
	aBool    kind = "true or false"
	aNull    kind = "null"
)

// node is one JSON value with its objects' keys in the order given.
type node struct {
	kind  kind
	text  string // of a string, or a number's literal
	truth bool
	keys  []string // of an object
	vals  []*node  // of an object or an array
}

// get is the value of a key, nil where there is none.
func (n *node) get(key string) *node {
	for i, k := range n.keys {
		if k == key {
			return n.vals[i]
		}
	}
	return nil
}

// readTree checks a document against the limits and the grammar of JSON
// (RFC 8259, and RFC 7493 in refusing repeated keys and broken UTF-8) and
// gives its values. Faults of form end the reading; repeated keys do not, they
// go to c.
func readTree(data []byte, c *collector) (*node, bool) {
	if f, bad := checkForm(data); bad {
		c.push(f)
		return nil, false
	}
	dec := json.NewDecoder(bytes.NewReader(data))
	dec.UseNumber()
	t := &treeReader{dec: dec, c: c}
	n, err := t.value("")
	if err != nil {
		c.push(Fault{Message: err.Error()})
		return nil, false
	}
	return n, true
}

// checkForm holds the bytes against size, encoding, nesting and grammar, the
// cheap and the bounding first.
func checkForm(data []byte) (Fault, bool) {
	if len(data) > MaxDocument {
		return Fault{Message: fmt.Sprintf("document is larger than %d bytes", MaxDocument),
			Hint: "a frame takes a few kilobytes; is this the right file?"}, true
	}
	if !utf8.Valid(data) {
		return Fault{Message: "document is not valid UTF-8", Hint: "save it as UTF-8 text"}, true
	}
	if bytes.HasPrefix(data, []byte("\xef\xbb\xbf")) {
		return Fault{Message: "document begins with a byte order mark", Hint: "save it as UTF-8 without one"}, true
	}
	if f, bad := checkShape(data); bad {
		return f, true
	}
	var syntax *json.SyntaxError
	if err := json.Unmarshal(data, new(json.RawMessage)); errors.As(err, &syntax) {
		line, col := position(data, syntax.Offset)
		return Fault{Message: fmt.Sprintf("not JSON at line %d, column %d: %v", line, col, err)}, true
	}
	return Fault{}, false
}

// checkShape counts brackets and separators outside strings, which bounds
// nesting and values whether or not the rest is JSON.
func checkShape(data []byte) (Fault, bool) {
	depth, values, quoted := 0, 1, false
	for i := 0; i < len(data); i++ {
		switch b := data[i]; {
		case quoted && b == '\\':
			i++
		case b == '"':
			quoted = !quoted
		case quoted:
		case b == '{' || b == '[':
			depth++
			values++
		case b == '}' || b == ']':
			depth--
		case b == ',' || b == ':':
			values++
		}
		if depth > MaxNesting {
			return Fault{Message: fmt.Sprintf("document nests deeper than %d", MaxNesting)}, true
		}
		if values > MaxValues {
			return Fault{Message: fmt.Sprintf("document has more than %d values", MaxValues)}, true
		}
	}
	return Fault{}, false
}

// position is the line and the column, both from 1, of the byte before offset.
func position(data []byte, offset int64) (line, col int) {
	before := data[:max(0, min(offset-1, int64(len(data))))]
	line = 1 + bytes.Count(before, []byte("\n"))
	return line, 1 + utf8.RuneCount(before[bytes.LastIndexByte(before, '\n')+1:])
}

// treeReader walks the tokens of a document known to be JSON.
type treeReader struct {
	dec *json.Decoder
	c   *collector
}

// value reads one value, which stands at path.
func (t *treeReader) value(path string) (*node, error) {
	tok, err := t.dec.Token()
	if err != nil {
		return nil, err
	}
	switch v := tok.(type) {
	case json.Delim:
		if v == '{' {
			return t.object(path)
		}
		return t.array(path)
	case string:
		return &node{kind: aString, text: v}, nil
	case json.Number:
		return &node{kind: aNumber, text: v.String()}, nil
	case bool:
		return &node{kind: aBool, truth: v}, nil
	}
	return &node{kind: aNull}, nil
}

// object reads the rest of an object; the first of repeated keys counts.
func (t *treeReader) object(path string) (*node, error) {
	n := &node{kind: anObject}
	seen := map[string]bool{}
	for t.dec.More() {
		tok, err := t.dec.Token()
		if err != nil {
			return nil, err
		}
		key, _ := tok.(string)
		at := join(path, pathKey(key))
		v, err := t.value(at)
		if err != nil {
			return nil, err
		}
		if seen[key] {
			t.c.push(Fault{join(t.c.prefix, at), "key is given twice", "keep one of the two"})
			continue
		}
		seen[key] = true
		n.keys, n.vals = append(n.keys, key), append(n.vals, v)
	}
	_, err := t.dec.Token()
	return n, err
}

// array reads the rest of an array.
func (t *treeReader) array(path string) (*node, error) {
	n := &node{kind: anArray}
	for t.dec.More() {
		v, err := t.value(fmt.Sprintf("%s[%d]", path, len(n.vals)))
		if err != nil {
			return nil, err
		}
		n.vals = append(n.vals, v)
	}
	_, err := t.dec.Token()
	return n, err
}

// plainKey is a key a path can hold as it is.
var plainKey = regexp.MustCompile(`^[A-Za-z_][A-Za-z0-9_]{0,39}\z`)

// pathKey is a key as paths write it: plain, or quoted in brackets.
func pathKey(key string) string {
	if plainKey.MatchString(key) {
		return key
	}
	return fmt.Sprintf("[%q]", brief(key))
}
