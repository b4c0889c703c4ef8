package main

import (
	"encoding/json"
	"fmt"
	"io/fs"
	"os"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

const module = "leadline"

// rooms are the parts of the house with what each may import of the others (its own sub-packages always).
var rooms = map[string]struct {
	may []string
	why string
}{
	"precision": {nil, "precision holds numbers only, and everything else stands on it"},
	"palette":   {[]string{"precision"}, "palette is colour alone and knows nothing of sets, sheets or files"},
	"render":    {[]string{"precision", "palette"}, "render makes pixels of a frame, whoever asked for them"},
	"jobs":      {[]string{"precision", "palette", "render"}, "jobs queues work and must run without any screen"},
	"tui":       {[]string{"precision", "palette", "render", "jobs"}, "tui is screens; commands start it, not the other way about"},
	"cmd":       {[]string{"precision", "palette", "render", "jobs", "tui"}, "cmd is the outermost room"},
}

// terminal is where the terminal framework lives; only tui may import it.
const terminal = "github.com/charmbracelet/"

// goPackage is the part used here of what go list says of a package.
type goPackage struct {
	ImportPath                         string
	Imports, TestImports, XTestImports []string
}

// room returns the first element of an import path of ours, and whether it is one of ours at all.
func room(path string) (string, bool) {
	if path == module {
		return "", true
	}
	rest, ours := strings.CutPrefix(path, module+"/")
	first, _, _ := strings.Cut(rest, "/")
	return first, ours
}

// turnedArrows returns a sentence for each import that runs against the house's one direction, tests included.
func turnedArrows(packages []goPackage) []string {
	var wrong []string
	for _, p := range packages {
		from, _ := room(p.ImportPath)
		rule, known := rooms[from]
		if !known {
			wrong = append(wrong, fmt.Sprintf("%s stands in no room of the house: imports run precision, palette <- render <- jobs <- tui <- cmd", p.ImportPath))
			continue
		}
		for _, imported := range slices.Concat(p.Imports, p.TestImports, p.XTestImports) {
			to, ours := room(imported)
			switch {
			case ours && to != from && !slices.Contains(rule.may, to):
				wrong = append(wrong, fmt.Sprintf("%s must not import %s: %s", p.ImportPath, imported, rule.why))
			case strings.HasPrefix(imported, terminal) && from != "tui":
				wrong = append(wrong, fmt.Sprintf("%s must not import %s: only tui may know the terminal framework", p.ImportPath, imported))
			}
		}
	}
	slices.Sort(wrong)
	return slices.Compact(wrong)
}

func TestImportsOfTheProject(t *testing.T) {
	root, err := moduleRoot(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	watchTree(t, root)
	out, err := command{dir: root, args: []string{"go", "list", "-e", "-json=ImportPath,Imports,TestImports,XTestImports", "./..."}}.output(t.Context())
	if err != nil {
		t.Fatal(err)
	}
	var packages []goPackage
	for dec := json.NewDecoder(strings.NewReader(out)); dec.More(); {
		var p goPackage
		if err := dec.Decode(&p); err != nil {
			t.Fatal(err)
		}
		packages = append(packages, p)
	}
	if len(packages) == 0 {
		t.Fatal("go list names no package")
	}
	for _, w := range turnedArrows(packages) {
		t.Error(w)
	}
}

// watchTree opens every Go file and folder, so that the go command does not take this test's cached result when one
// of them changes: it notices what a test opens, not what go list does.
func watchTree(t *testing.T, root string) {
	t.Helper()
	files, err := goFiles(root)
	if err != nil {
		t.Fatal(err)
	}
	for _, f := range files {
		if _, err := os.Stat(f); err != nil && !os.IsNotExist(err) {
			t.Fatal(err)
		}
		if _, err := fs.ReadDir(os.DirFS(filepath.Dir(f)), "."); err != nil {
			t.Fatal(err)
		}
	}
}

// TestTurnedArrows proves that the rule can fail, on made-up packages with one wrong import each and some right ones.
func TestTurnedArrows(t *testing.T) {
	cases := []struct {
		pkg, imports string
		want         string // part of the complaint; "" for none
	}{
		{"leadline/precision", "math/big", ""},
		{"leadline/precision", "leadline/palette", "everything else stands on it"},
		{"leadline/palette", "leadline/precision", ""},
		{"leadline/palette", "leadline/render/sheet", "knows nothing of sets"},
		{"leadline/render", "leadline/render/kernel", ""},
		{"leadline/render/frame", "leadline/palette", ""},
		{"leadline/render/orbit", "leadline/jobs", "whoever asked"},
		{"leadline/jobs", "leadline/render", ""},
		{"leadline/jobs", "leadline/tui", "without any screen"},
		{"leadline/tui", "leadline/jobs", ""},
		{"leadline/tui", "leadline/cmd/leadline", "not the other way about"},
		{"leadline/tui", "github.com/charmbracelet/lipgloss", ""},
		{"leadline/render", "github.com/charmbracelet/bubbletea", "only tui"},
		{"leadline/cmd/leadline", "github.com/charmbracelet/bubbletea", "only tui"},
		{"leadline/cmd/leadline", "leadline/tui", ""},
		{"leadline/cmd/check", "leadline/cmd/check/contract", ""},
		{"leadline/common", "fmt", "no room of the house"},
		{"leadline", "leadline/render", "no room of the house"},
		{"leadline/render", "leadline", "must not import leadline:"},
	}
	for _, c := range cases {
		imports := []string{"fmt", c.imports}
		for kind, p := range map[string]goPackage{
			"imports":               {ImportPath: c.pkg, Imports: imports},
			"test imports":          {ImportPath: c.pkg, TestImports: imports},
			"external test imports": {ImportPath: c.pkg, XTestImports: imports},
		} {
			got := turnedArrows([]goPackage{p})
			if c.want == "" && len(got) != 0 || c.want != "" && (len(got) != 1 || !strings.Contains(got[0], c.want)) {
				t.Errorf("%s %s %s: got %q, want a complaint with %q", c.pkg, kind, c.imports, got, c.want)
			}
		}
	}
}
