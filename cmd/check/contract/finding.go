package contract

import (
	"cmp"
	"fmt"
	"go/ast"
	"go/token"
	"slices"
	"strings"
)

// A Finding is one breach of the contract.
type Finding struct {
	Pos     token.Position
	Message string // what is wrong and what to write instead
}

func (f Finding) String() string {
	return fmt.Sprintf("%s:%d:%d: %s", f.Pos.Filename, f.Pos.Line, f.Pos.Column, f.Message)
}

// Lines returns the findings as text in the order of the source, each once.
func Lines(all []Finding) []string {
	all = slices.Clone(all)
	slices.SortFunc(all, func(a, b Finding) int {
		return cmp.Or(cmp.Compare(a.Pos.Filename, b.Pos.Filename), cmp.Compare(a.Pos.Line, b.Pos.Line),
			cmp.Compare(a.Pos.Column, b.Pos.Column), cmp.Compare(a.Message, b.Message))
	})
	lines := make([]string, len(all))
	for i, f := range all {
		lines[i] = f.String()
	}
	return slices.Compact(lines)
}

const directivePrefix = "//leadline:exact"

// A directive is a comment that excuses a line.
type directive struct {
	pos    token.Position
	reason string
	used   bool
}

// directives returns a file's excusing comments by line.
func directives(fset *token.FileSet, file *ast.File) map[int]*directive {
	found := map[int]*directive{}
	for _, group := range file.Comments {
		for _, c := range group.List {
			rest, ok := strings.CutPrefix(c.Text, directivePrefix)
			if ok && (rest == "" || rest[0] == ' ' || rest[0] == '\t') {
				pos := fset.Position(c.Pos())
				found[pos.Line] = &directive{pos: pos, reason: strings.TrimSpace(rest)}
			}
		}
	}
	return found
}

// excuse removes the findings of one file that a directive excuses, and adds those about the directives themselves.
// A directive on a line with findings of its own speaks for that line only, else for the next.
func excuse(found []Finding, marks map[int]*directive) []Finding {
	own := map[int]bool{}
	for _, f := range found {
		own[f.Pos.Line] = true
	}
	var left []Finding
	for _, f := range found {
		d := marks[f.Pos.Line]
		if above := marks[f.Pos.Line-1]; d == nil && above != nil && !own[f.Pos.Line-1] {
			d = above
		}
		if d == nil {
			left = append(left, f)
		} else {
			d.used = true
		}
	}
	for _, d := range marks {
		if d.reason == "" {
			left = append(left, Finding{d.pos, directivePrefix + " needs a reason"})
		}
		if !d.used {
			left = append(left, Finding{d.pos, directivePrefix + " excuses nothing here: remove it"})
		}
	}
	return left
}
