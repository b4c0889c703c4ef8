package contract

import (
	"fmt"
	"go/ast"
	"go/importer"
	"go/parser"
	"go/token"
	"go/types"
	"slices"
	"strings"
	"testing"
)

// checkText type-checks one file of source text and returns the lines with findings, and the findings' text.
func checkText(t *testing.T, name, src string) ([]int, string) {
	t.Helper()
	fset := token.NewFileSet()
	file, err := parser.ParseFile(fset, name, src, parser.ParseComments)
	if err != nil {
		t.Fatal(err)
	}
	info := &types.Info{Types: map[ast.Expr]types.TypeAndValue{}, Uses: map[*ast.Ident]types.Object{}, Defs: map[*ast.Ident]types.Object{}}
	conf := types.Config{Importer: importer.ForCompiler(fset, "source", nil)}
	if _, err := conf.Check("p", fset, []*ast.File{file}, info); err != nil {
		t.Fatal(err)
	}
	found := CheckSource(fset, []*ast.File{file}, info)
	var lines []int
	for _, f := range found {
		lines = append(lines, f.Pos.Line)
	}
	slices.Sort(lines)
	return lines, strings.Join(Lines(found), "\n")
}

// TestExpressions holds one expression a case, of the variables declared in the frame below. What may be fused is
// the Go specification's, section "Floating-point operators", with its examples.
func TestExpressions(t *testing.T) {
	const frame = "package p\n\nimport \"math\"\n\nvar _ = math.Sqrt\n\ntype real float64\n\n" +
		"func f(x, y, z float64, g, h float32, u, v complex128, i, j int, r, s real, a []float64) any {\n\treturn %s\n}\n"
	cases := []struct {
		expr string
		bad  int // findings expected
	}{
		{"x*y + z", 1},
		{"z + x*y", 1},
		{"x*y - z", 1},
		{"z - (x*y)", 1},
		{"z + -(x*y)", 1},
		{"-x*y + z", 1},
		{"x*y + y*z", 2},
		{"float64(x*y) + y*z", 1},
		{"x + float64(y)*z", 1},
		{"a[i]*a[j] + z", 1},
		{"g*h + g", 1},
		{"r*s + r", 1},
		{"2*x + y", 1},
		{"math.Sqrt(x*x + z)", 1},
		{"u * v", 1},
		{"u / v", 1},
		{"u*v + u", 1},
		{"float64(x*y) + z", 0},
		{"float64(x*y) - float64(y*z)", 0},
		{"real(r*s) + r", 0},
		{"math.FMA(x, y, z)", 0},
		{"x*y*z", 0},
		{"x*(y+z)", 0},
		{"x/y + z", 0},
		{"i*j + i", 0},
		{"2.0*3.0 + x", 0},
		{"u + v", 0},
		{"x*y < z", 0},
		{"math.Abs(x*y) + z", 0}, // the source check cannot know that Abs is inlined; the machine code tells
	}
	for _, c := range cases {
		lines, text := checkText(t, "p.go", fmt.Sprintf(frame, c.expr))
		if len(lines) != c.bad {
			t.Errorf("%s: %d findings, want %d\n%s", c.expr, len(lines), c.bad, text)
		}
	}
}

// TestStatements marks the lines that must be found with a comment "// bad", and expects no others.
func TestStatements(t *testing.T) {
	const src = `package p

import (
	"maps"
	"math"
	"math/cmplx"
	"slices"
)

type float interface{ ~float32 | ~float64 }

func generic[T float](x, y, z T) T { return x*y + z } // bad
func whole[T ~int](x, y, z T) T    { return x*y + z }

func sums(s, x, y float64, c complex128) {
	s += x * y // bad
	s -= (x * y) // bad
	s += float64(x * y)
	s *= x + y
	c *= c // bad
	_, _ = s, c
}

func library(x float64, c complex128) {
	_ = math.Log(x) // bad
	_ = math.Hypot(x, x) // bad
	_ = math.Floor(x) + math.Sqrt(x) + math.Abs(x)
	f := math.Exp // bad
	_ = f
	_ = cmplx.Abs(c) // bad
	_ = cmplx.IsNaN(c)
}

type own struct{}

func (own) Log(x float64) float64 { return x }

var _ = own{}.Log(1)

type table map[string]int

func order(m map[int]int, n table, a []int) {
	for range m { // bad
	}
	for k := range n { // bad
		_ = k
	}
	for range a {
	}
	for k := range maps.Keys(m) { // bad
		_ = k
	}
	for _, k := range slices.Sorted(maps.Keys(m)) {
		_ = k
	}
	_ = slices.Collect(maps.Values(m)) // bad
}
`
	var want []int
	for i, line := range strings.Split(src, "\n") {
		if strings.HasSuffix(line, "// bad") {
			want = append(want, i+1)
		}
	}
	got, text := checkText(t, "p.go", src)
	if !slices.Equal(got, want) {
		t.Errorf("findings on lines %v, want %v\n%s", got, want, text)
	}
	if lines, _ := checkText(t, "p_test.go", src); len(lines) != 0 {
		t.Errorf("a test file was held to the contract: lines %v", lines)
	}
}

func TestDirectives(t *testing.T) {
	const src = `package p

func f(x, y, z float64) (a, b, c, d float64) {
	a = x*y + z //leadline:exact whole numbers below 2^20
	//leadline:exact whole numbers below 2^20
	b = x*y + z
	a = x*y + z //leadline:exact speaks for this line
	b = x*y + z
	c = x*y + z //leadline:exact
	//leadline:exact nothing to excuse
	d = x + y
	d = x*y + z //leadline:exactly is another word
	return
}
`
	want := []int{8, 9, 10, 12}
	got, text := checkText(t, "p.go", src)
	if !slices.Equal(got, want) {
		t.Errorf("findings on lines %v, want %v\n%s", got, want, text)
	}
	for _, part := range []string{"p.go:9:14: //leadline:exact needs a reason", "p.go:10:2: //leadline:exact excuses nothing"} {
		if !strings.Contains(text, part) {
			t.Errorf("no finding %q in\n%s", part, text)
		}
	}
}
