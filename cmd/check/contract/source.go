package contract

import (
	"fmt"
	"go/ast"
	"go/token"
	"go/types"
	"strings"
)

// CheckSource returns the breaches in a type-checked package's files; test files are not looked at.
// The info needs Types and Uses.
func CheckSource(fset *token.FileSet, files []*ast.File, info *types.Info) []Finding {
	var all []Finding
	for _, file := range files {
		if strings.HasSuffix(fset.Position(file.Package).Filename, "_test.go") {
			continue
		}
		c := checker{fset: fset, info: info, sorted: map[ast.Node]bool{}}
		ast.Inspect(file, c.visit)
		all = append(all, excuse(c.found, directives(fset, file))...)
	}
	return all
}

type checker struct {
	fset   *token.FileSet
	info   *types.Info
	sorted map[ast.Node]bool // names of unordered iterators whose result is sorted at once
	found  []Finding
}

func (c *checker) report(pos token.Pos, format string, args ...any) {
	c.found = append(c.found, Finding{c.fset.Position(pos), fmt.Sprintf(format, args...)})
}

func (c *checker) visit(n ast.Node) bool {
	switch n := n.(type) {
	case *ast.BinaryExpr:
		c.binary(n)
	case *ast.AssignStmt:
		c.assign(n)
	case *ast.RangeStmt:
		if _, ok := types.Unalias(c.info.TypeOf(n.X)).Underlying().(*types.Map); ok {
			c.report(n.Pos(), "range over a map: its order changes from run to run; range over sorted keys")
		}
	case *ast.CallExpr:
		c.noteSorted(n)
	case *ast.Ident:
		c.use(n)
	}
	return true
}

func (c *checker) binary(e *ast.BinaryExpr) {
	switch e.Op {
	case token.ADD, token.SUB:
		if c.constant(e) {
			return
		}
		c.operand(e.X, e.Op)
		c.operand(e.Y, e.Op)
	case token.MUL, token.QUO:
		if !c.constant(e) && c.is(e, types.IsComplex) {
			c.report(e.Pos(), "complex %s hides sums that may be fused: write the parts out", e.Op)
		}
	}
}

func (c *checker) assign(s *ast.AssignStmt) {
	switch s.Tok {
	case token.ADD_ASSIGN, token.SUB_ASSIGN:
		c.operand(s.Rhs[0], s.Tok)
	case token.MUL_ASSIGN, token.QUO_ASSIGN:
		if c.is(s.Lhs[0], types.IsComplex) {
			c.report(s.Pos(), "complex %s hides sums that may be fused: write the parts out", s.Tok)
		}
	}
}

// operand reports x, an operand of a sum, when it is a product that could be fused into it.
func (c *checker) operand(x ast.Expr, op token.Token) {
	for {
		switch inner := x.(type) {
		case *ast.ParenExpr:
			x = inner.X
			continue
		case *ast.UnaryExpr:
			if inner.Op == token.ADD || inner.Op == token.SUB {
				x = inner.X
				continue
			}
		case *ast.BinaryExpr:
			if inner.Op == token.MUL && !c.constant(inner) && c.is(inner, types.IsFloat) {
				c.report(inner.Pos(), "bare product in %s may be fused: write math.FMA(a, b, c), or float64(a*b) for the product", op)
			}
		}
		return
	}
}

func (c *checker) constant(e ast.Expr) bool { return c.info.Types[e].Value != nil }

// is tells whether e is of a kind of number, or of a type parameter that may be one.
func (c *checker) is(e ast.Expr, kind types.BasicInfo) bool {
	t := c.info.TypeOf(e)
	return t != nil && mayBe(t, kind)
}

func mayBe(t types.Type, kind types.BasicInfo) bool {
	switch u := t.Underlying().(type) {
	case *types.Basic:
		return u.Info()&kind != 0
	case *types.Interface: // a type parameter's constraint
		for i := range u.NumEmbeddeds() {
			if embeds(u.EmbeddedType(i), kind) {
				return true
			}
		}
	}
	return false
}

func embeds(t types.Type, kind types.BasicInfo) bool {
	union, ok := t.(*types.Union)
	if !ok {
		return mayBe(t, kind)
	}
	for i := range union.Len() {
		if mayBe(union.Term(i).Type(), kind) {
			return true
		}
	}
	return false
}
