package contract

import (
	"bufio"
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"io"
	"os"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
)

// fusedLine matches a line of the compiler's listing that holds a fused multiply-add of amd64 (VFMADD231SD and its
// like, Intel SDM vol. 2) or arm64 (FMADDD, FMSUBD, FNMADDD, FNMSUBD and …S; Arm ARM C7.2) in Go's spelling,
// or the vector forms (VFMLA, VFMLS). The position is that of the innermost inlined source line.
var fusedLine = regexp.MustCompile(`^\t.*\((\S[^()]*\.go):(\d+)\)\t(?:VFN?M(?:ADD|SUB)\w+|FN?M(?:ADD|SUB)[SD]|VFML[AS])\t`)

// CheckListing reads the listing that `go build -gcflags=-S` writes, and reports multiply-add instructions from source
// lines below the folder root that neither call math.FMA nor are excused. It opens the source files that the listing
// names. Lines of other modules, inlined here, are theirs to mend and beyond this check.
func CheckListing(r io.Reader, root string) ([]Finding, error) {
	lines := bufio.NewScanner(r)
	lines.Buffer(nil, 16<<20) // a line holding a large constant is long
	asked := map[string]map[int]bool{}
	var all []Finding
	for lines.Scan() {
		m := fusedLine.FindStringSubmatch(lines.Text())
		if m == nil || !strings.HasPrefix(m[1], root+string(filepath.Separator)) {
			continue
		}
		if asked[m[1]] == nil {
			allowed, err := askingLines(m[1])
			if err != nil {
				return nil, err
			}
			asked[m[1]] = allowed
		}
		line, err := strconv.Atoi(m[2])
		if err != nil {
			return nil, fmt.Errorf("reading the compiler's listing: %w", err)
		}
		if !asked[m[1]][line] {
			all = append(all, Finding{token.Position{Filename: m[1], Line: line, Column: 1},
				"fused multiply-add without math.FMA: round the product where it is made, float64(a*b) or float64(a/2)"})
		}
	}
	if err := lines.Err(); err != nil {
		return nil, fmt.Errorf("reading the compiler's listing: %w", err)
	}
	return all, nil
}

// askingLines returns the lines of a file from which multiply-adds may come: those of calls to an FMA function,
// and those that a directive excuses.
func askingLines(name string) (map[int]bool, error) {
	src, err := os.ReadFile(name)
	if err != nil {
		return nil, fmt.Errorf("looking for math.FMA: %w", err)
	}
	fset := token.NewFileSet()
	file, err := parser.ParseFile(fset, name, src, parser.ParseComments|parser.SkipObjectResolution)
	if err != nil {
		return nil, fmt.Errorf("looking for math.FMA: %w", err)
	}
	lines := map[int]bool{}
	ast.Inspect(file, func(n ast.Node) bool {
		if call, ok := n.(*ast.CallExpr); ok {
			if id := calleeName(call); id != nil && id.Name == "FMA" {
				markLines(lines, fset, call)
			}
		}
		return true
	})
	for line := range directives(fset, file) {
		lines[line], lines[line+1] = true, true
	}
	return lines, nil
}

func markLines(lines map[int]bool, fset *token.FileSet, n ast.Node) {
	for l := fset.Position(n.Pos()).Line; l <= fset.Position(n.End()).Line; l++ {
		lines[l] = true
	}
}
