package contract

import (
	"go/ast"
	"go/types"
	"strings"
)

// unrounded are the functions of package math whose last bits differ between machines: Go has assembly or fused
// code for some of them on some architectures (amd64, arm64, s390x), and the rest are built from those.
// math's Sqrt, FMA, Abs, Floor, Mod, Frexp, Ldexp and their like are exact or correctly rounded, and free to use.
var unrounded = names(`Acos Acosh Asin Asinh Atan Atan2 Atanh Cbrt Cos Cosh Erf Erfc Erfcinv Erfinv Exp Exp2 Expm1
	Gamma Hypot J0 J1 Jn Lgamma Log Log10 Log1p Log2 Pow Sin Sincos Sinh Tan Tanh Y0 Y1 Yn`)

// plainComplex are the only functions of math/cmplx that do not calculate.
var plainComplex = names("Inf IsInf IsNaN NaN")

// unordered are the iterators of package maps, and sorting what makes their order definite.
var (
	unordered = names("All Keys Values")
	sorting   = names("Sorted SortedFunc SortedStableFunc")
)

func names(list string) map[string]bool {
	set := map[string]bool{}
	for _, n := range strings.Fields(list) {
		set[n] = true
	}
	return set
}

// libraryFunc returns the package path and name of the package-level function an identifier stands for.
func (c *checker) libraryFunc(id *ast.Ident) (pkg, name string) {
	f, ok := c.info.Uses[id].(*types.Func)
	if !ok || f.Pkg() == nil || f.Signature().Recv() != nil {
		return "", ""
	}
	return f.Pkg().Path(), f.Name()
}

// use reports an identifier that stands for a refused library function, called or handed on.
func (c *checker) use(id *ast.Ident) {
	switch pkg, name := c.libraryFunc(id); {
	case pkg == "math" && unrounded[name]:
		c.report(id.Pos(), "math.%s differs between machines: use this project's own elementary functions", name)
	case pkg == "math/cmplx" && !plainComplex[name]:
		c.report(id.Pos(), "cmplx.%s differs between machines: write the parts out", name)
	case pkg == "maps" && unordered[name] && !c.sorted[id]:
		c.report(id.Pos(), "maps.%s has no order: sort it at once (slices.Sorted)", name)
	}
}

// noteSorted remembers, in a call that sorts an iterator, the name of the iterator it is given.
// A call is visited before the names inside it.
func (c *checker) noteSorted(call *ast.CallExpr) {
	outer := calleeName(call)
	if outer == nil || len(call.Args) == 0 {
		return
	}
	if pkg, name := c.libraryFunc(outer); pkg != "slices" || !sorting[name] {
		return
	}
	if inner, ok := ast.Unparen(call.Args[0]).(*ast.CallExpr); ok {
		if id := calleeName(inner); id != nil {
			c.sorted[id] = true
		}
	}
}

func calleeName(call *ast.CallExpr) *ast.Ident {
	switch f := ast.Unparen(call.Fun).(type) {
	case *ast.Ident:
		return f
	case *ast.SelectorExpr:
		return f.Sel
	}
	return nil
}
