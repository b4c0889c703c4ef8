package contract

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// sample is a package whose fused instructions are known: the compiler fuses across statements, struct fields and
// inlined calls (Go specification, "Floating-point operators": "possibly across statements"), which the lines
// marked "// fused" show; Go has a fused difference on arm64 only. "// bare" marks what the source must show too.
const sample = `package sample

import "math"

type pair struct{ a, b float64 }

func mul(x, y float64) float64 { return x * y }

func Bare(x, y, z float64) float64 { return x*y + z } // bare fused

func Statements(x, y, z float64) float64 {
	t := x * y
	return t + z // fused
}

func Inlined(x, y, z float64) float64 { return mul(x, y) + z } // fused

func Field(x, y, z float64) float64 {
	p := pair{a: x * y}
	return p.a - z // fused-arm64
}

func Excused(x, y, z float64) float64 {
	return x*y + z //leadline:exact shown on a screen only
}

func Asked(x, y, z float64) float64 {
	return math.FMA(
		x, y,
		z)
}

func Halved(x, y float64) float64 { return x/2 + y } // fused

func Rounded(x, y, z float64) float64 { return float64(x*y) + float64(mul(y, z)) + float64(x/2) }
`

func marked(marks ...string) []int {
	var lines []int
	for i, line := range strings.Split(sample, "\n") {
		_, comment, _ := strings.Cut(line, "// ")
		isMark := func(word string) bool { return slices.Contains(marks, word) }
		if slices.ContainsFunc(strings.Fields(comment), isMark) {
			lines = append(lines, i+1)
		}
	}
	return lines
}

func linesOf(found []Finding) []int {
	var lines []int
	for _, f := range found {
		lines = append(lines, f.Pos.Line)
	}
	slices.Sort(lines)
	return slices.Compact(lines)
}

// goRun writes the sample as a module into dir and runs a go command there, returning both its outputs.
func goRun(t *testing.T, dir string, env []string, args ...string) *bytes.Buffer {
	t.Helper()
	for name, text := range map[string]string{"go.mod": "module sample\n\ngo 1.26\n", "sample.go": sample} {
		if err := os.WriteFile(filepath.Join(dir, name), []byte(text), 0o666); err != nil {
			t.Fatal(err)
		}
	}
	cmd := exec.Command("go", args...)
	cmd.Dir, cmd.Env = dir, append(os.Environ(), append(env, "GOWORK=off", "GOFLAGS=", "CGO_ENABLED=0")...)
	out, err := cmd.CombinedOutput()
	if err != nil {
		t.Fatalf("go %v: %v\n%s", args, err, out)
	}
	return bytes.NewBuffer(out)
}

func TestListing(t *testing.T) {
	for _, target := range []struct {
		env  []string
		want []int
	}{
		{[]string{"GOARCH=arm64"}, marked("fused", "fused-arm64")},
		{[]string{"GOARCH=amd64", "GOAMD64=v3"}, marked("fused")},
		{[]string{"GOARCH=amd64", "GOAMD64=v1"}, nil},
	} {
		dir := t.TempDir()
		found, err := CheckListing(goRun(t, dir, target.env, "build", "-gcflags=sample=-S", "."), dir)
		if err != nil {
			t.Fatal(err)
		}
		if got := linesOf(found); !slices.Equal(got, target.want) {
			t.Errorf("%v: fused on lines %v, want %v\n%s", target.env, got, target.want, strings.Join(Lines(found), "\n"))
		}
	}
}

// TestListingElsewhere shows that lines of other modules are passed over.
func TestListingElsewhere(t *testing.T) {
	listing := goRun(t, t.TempDir(), []string{"GOARCH=arm64"}, "build", "-gcflags=sample=-S", ".")
	if found, err := CheckListing(listing, t.TempDir()); err != nil || len(found) != 0 {
		t.Errorf("found %v, error %v", found, err)
	}
}

func TestListed(t *testing.T) {
	found, err := CheckListed(goRun(t, t.TempDir(), nil, "list", "-e", "-export", "-deps", "-json="+ListFields, "."))
	if err != nil {
		t.Fatal(err)
	}
	if got, want := linesOf(found), marked("bare"); !slices.Equal(got, want) {
		t.Errorf("findings on lines %v, want %v\n%s", got, want, strings.Join(Lines(found), "\n"))
	}
}

func TestListedErrors(t *testing.T) {
	for name, text := range map[string]string{
		"not JSON":       "{",
		"broken package": `{"ImportPath":"p","GoFiles":["p.go"],"Error":{"Err":"undefined: x"}}`,
		"missing file":   `{"ImportPath":"p","Dir":"/nowhere","GoFiles":["p.go"]}`,
	} {
		if _, err := CheckListed(strings.NewReader(text)); err == nil {
			t.Errorf("%s: no error", name)
		}
	}
}
