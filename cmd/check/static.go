package main

import (
	"bytes"
	"context"
	"errors"
	"fmt"
	"go/format"
	"io/fs"
	"os"
	"path/filepath"
	"strings"

	"leadline/cmd/check/contract"
)

// goTool makes a stage of a go command that is silent or exits 0 when all is well.
func goTool(args ...string) func(context.Context, string) outcome {
	return func(ctx context.Context, root string) outcome {
		out, err := command{dir: root, args: append([]string{"go"}, args...)}.combined(ctx)
		return judge(out, err)
	}
}

func judge(output string, err error) outcome {
	if err != nil {
		return outcome{verdict: failed, output: output + err.Error()}
	}
	return outcome{verdict: passed}
}

// checkFormat compares every Go file of the tree, tracked or not, with its gofmt form.
func checkFormat(ctx context.Context, root string) outcome {
	files, err := goFiles(root)
	if err != nil {
		return judge("", err)
	}
	var untidy []string
	for _, f := range files {
		src, err := os.ReadFile(f)
		if err != nil {
			return judge("", err)
		}
		if out, err := format.Source(src); err != nil {
			untidy = append(untidy, f+": "+err.Error())
		} else if !bytes.Equal(out, src) {
			untidy = append(untidy, f+": not in gofmt form")
		}
	}
	if len(untidy) > 0 {
		return outcome{verdict: failed, output: relative(root, strings.Join(untidy, "\n"))}
	}
	return outcome{verdict: passed}
}

// goFiles lists the .go files below root, hidden folders left out.
func goFiles(root string) ([]string, error) {
	var files []string
	err := filepath.WalkDir(root, func(path string, d fs.DirEntry, err error) error {
		switch {
		case err != nil:
			return err
		case d.IsDir() && path != root && strings.HasPrefix(d.Name(), "."):
			return fs.SkipDir
		case !d.IsDir() && strings.HasSuffix(path, ".go"):
			files = append(files, path)
		}
		return nil
	})
	return files, err
}

// pixelPatterns names the packages whose code decides pixels, as far as they exist.
func pixelPatterns(root string) []string {
	var found []string
	for _, room := range []string{"precision", "palette", "render"} {
		if info, err := os.Stat(filepath.Join(root, room)); err == nil && info.IsDir() {
			found = append(found, "./"+room+"/...")
		}
	}
	return found
}

// builds are the ways of building that between them compile every product file.
var builds = []struct{ env, flags []string }{
	{env: []string{"GOARCH=amd64"}},
	{env: []string{"GOARCH=amd64"}, flags: []string{"-tags=purego"}},
	{env: []string{"GOARCH=arm64"}},
}

// checkSource holds the source of the pixel packages to the numeric contract.
func checkSource(ctx context.Context, root string) outcome {
	patterns := pixelPatterns(root)
	if len(patterns) == 0 {
		return outcome{verdict: skipped, notes: []string{"there are no packages that decide pixels"}}
	}
	var all []contract.Finding
	var broken error
	for _, b := range builds {
		args := append([]string{"go", "list", "-e", "-export", "-deps", "-json=" + contract.ListFields}, b.flags...)
		out, err := command{dir: root, env: append(b.env, "CGO_ENABLED=0"), args: append(args, patterns...)}.output(ctx)
		if err != nil {
			return judge("", err)
		}
		found, err := contract.CheckListed(strings.NewReader(out))
		all, broken = append(all, found...), errors.Join(broken, err)
	}
	return findings(root, all, broken)
}

// checkMachineCode compiles the pixel packages where the compiler may fuse and looks at what it did.
func checkMachineCode(ctx context.Context, root string) outcome {
	patterns := pixelPatterns(root)
	if len(patterns) == 0 {
		return outcome{verdict: skipped, notes: []string{"there are no packages that decide pixels"}}
	}
	var all []contract.Finding
	var broken error
	for _, target := range [][]string{{"GOARCH=arm64"}, {"GOARCH=amd64", "GOAMD64=v3"}} {
		args := append([]string{"go", "build", "-gcflags=leadline/...=-S"}, patterns...)
		listing, err := command{dir: root, env: append(target, "CGO_ENABLED=0"), args: args}.combined(ctx)
		if err != nil {
			broken = errors.Join(broken, fmt.Errorf("%s%w", complaints(listing), err))
		}
		found, err := contract.CheckListing(strings.NewReader(listing), root)
		all, broken = append(all, found...), errors.Join(broken, err)
	}
	return findings(root, all, broken)
}

// complaints leaves out of a compiler's output the listing lines, which begin with a tab or name a symbol.
func complaints(listing string) string {
	var kept strings.Builder
	for line := range strings.Lines(listing) {
		if strings.Contains(line, ".go:") && !strings.HasPrefix(line, "\t") {
			kept.WriteString(line)
		}
	}
	return kept.String()
}

// findings judges breaches together with what could not be looked at because it does not build.
func findings(root string, all []contract.Finding, broken error) outcome {
	lines := contract.Lines(all)
	seen := map[string]bool{"": true} // several builds complain of the same thing
	if broken != nil {
		for line := range strings.Lines(broken.Error()) {
			if line = strings.TrimSpace(line); !seen[line] {
				seen[line], lines = true, append(lines, line)
			}
		}
	}
	if len(lines) == 0 {
		return outcome{verdict: passed}
	}
	return outcome{verdict: failed, output: relative(root, strings.Join(lines, "\n"))}
}

// relative takes the module's own folder off the paths in a text.
func relative(root, text string) string {
	return strings.ReplaceAll(text, root+string(filepath.Separator), "")
}
