package contract

import (
	"encoding/json"
	"errors"
	"fmt"
	"go/ast"
	"go/importer"
	"go/parser"
	"go/token"
	"go/types"
	"io"
	"os"
	"path/filepath"
)

// ListFields is what CheckListed needs of `go list -e -export -deps -json=…`.
const ListFields = "ImportPath,Dir,GoFiles,Export,DepOnly,ImportMap,Error"

type listed struct {
	ImportPath, Dir, Export string
	GoFiles                 []string
	DepOnly                 bool
	ImportMap               map[string]string
	Error                   *struct{ Err string }
}

// CheckListed reads the output of `go list -e -export -deps -json` and checks the source of the packages that were
// named on its command line; their dependencies serve for type information only. The error names the packages that do
// not build; the findings are those of the others.
func CheckListed(r io.Reader) ([]Finding, error) {
	packages, exports, err := readListed(r)
	broken := []error{err}
	fset := token.NewFileSet()
	imports := importer.ForCompiler(fset, "gc", func(path string) (io.ReadCloser, error) {
		if exports[path] == "" {
			return nil, fmt.Errorf("no compiled form of %s", path)
		}
		return os.Open(exports[path])
	})
	var all []Finding
	for _, p := range packages {
		found, err := checkPackage(fset, p, imports)
		all, broken = append(all, found...), append(broken, err)
	}
	return all, errors.Join(broken...)
}

// readListed returns the named packages and everybody's compiled form by import path.
func readListed(r io.Reader) ([]listed, map[string]string, error) {
	var packages []listed
	exports := map[string]string{}
	var broken error
	for dec := json.NewDecoder(r); ; {
		var p listed
		if err := dec.Decode(&p); err == io.EOF {
			return packages, exports, broken
		} else if err != nil {
			return nil, nil, errors.Join(broken, fmt.Errorf("reading the package list: %w", err))
		}
		exports[p.ImportPath] = p.Export
		switch {
		case p.DepOnly:
		case p.Error != nil && len(p.GoFiles) > 0:
			broken = errors.Join(broken, fmt.Errorf("%s: %s", p.ImportPath, p.Error.Err))
		case len(p.GoFiles) > 0: // else a package of tests only, or of nothing in this build
			packages = append(packages, p)
		}
	}
}

func checkPackage(fset *token.FileSet, p listed, imports types.Importer) ([]Finding, error) {
	var files []*ast.File
	for _, name := range p.GoFiles {
		f, err := parser.ParseFile(fset, filepath.Join(p.Dir, name), nil, parser.ParseComments|parser.SkipObjectResolution)
		if err != nil {
			return nil, fmt.Errorf("checking the source of %s: %w", p.ImportPath, err)
		}
		files = append(files, f)
	}
	info := &types.Info{Types: map[ast.Expr]types.TypeAndValue{}, Uses: map[*ast.Ident]types.Object{}, Defs: map[*ast.Ident]types.Object{}}
	conf := types.Config{Importer: mapped{imports, p.ImportMap}, FakeImportC: true}
	if _, err := conf.Check(p.ImportPath, fset, files, info); err != nil {
		return nil, fmt.Errorf("checking the source of %s: %w", p.ImportPath, err)
	}
	return CheckSource(fset, files, info), nil
}

// mapped follows the renaming of imports that the go command reports for vendored packages.
type mapped struct {
	types.Importer
	names map[string]string
}

func (m mapped) Import(path string) (*types.Package, error) {
	if real, ok := m.names[path]; ok {
		path = real
	}
	return m.Importer.Import(path)
}
