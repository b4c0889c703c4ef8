package main

import (
	"context"
	"fmt"
	"go/ast"
	"go/parser"
	"go/token"
	"os/exec"
	"path/filepath"
	"runtime"
	"slices"
	"strings"
)

// A variant is one way of building and running the identity tests. Those tests compare pixels and numbers with
// stored hashes, so when every variant is green, every variant computes the same bits.
type variant struct {
	name, does string
	arch       string
	env, flags []string
	newer      bool // wants a processor that not every machine of this architecture has
}

func variants() []variant {
	return []variant{
		{name: "v1", does: "amd64 without fused instructions", arch: "amd64", env: []string{"GOAMD64=v1"}},
		{name: "v3", does: "amd64 where the compiler may fuse", arch: "amd64", env: []string{"GOAMD64=v3"}, newer: true},
		{name: "purego", does: "no assembly", arch: runtime.GOARCH, flags: []string{"-tags=purego"}},
		{name: "arm64", does: "arm64, under qemu where it is not the machine's own", arch: "arm64"},
	}
}

// run runs every package's identity tests as this variant.
func (v variant) run(ctx context.Context, root string) outcome {
	emulator, reason := v.emulator(exec.LookPath)
	if reason != "" {
		return outcome{verdict: skipped, notes: []string{reason}}
	}
	packages, err := identityPackages(ctx, root)
	if err != nil {
		return judge("", err)
	}
	if len(packages) == 0 {
		return outcome{verdict: skipped, notes: []string{"no package has a test named TestIdentity…"}}
	}
	c := command{dir: root, env: append([]string{"GOARCH=" + v.arch}, v.env...)}
	flags := v.flags
	if emulator != "" {
		flags, c.env = append(flags, "-exec="+emulator), append(c.env, "CGO_ENABLED=0")
	}
	if v.newer {
		if reason, err := refusal(ctx, c, flags); reason != "" {
			return outcome{verdict: skipped, notes: []string{reason}}
		} else if err != nil {
			return judge("", err)
		}
	}
	c.args = slices.Concat([]string{"-short", "-run=^TestIdentity"}, flags, packages)
	return demandEach(goTest(ctx, c, v.name), packages)
}

// emulator returns the program to run this variant's tests under ("" for none), or why they cannot run here.
func (v variant) emulator(lookPath func(string) (string, error)) (name, reason string) {
	if v.arch == runtime.GOARCH {
		return "", ""
	}
	name = map[string]string{"arm64": "qemu-aarch64-static", "amd64": "qemu-x86_64-static"}[v.arch]
	if _, err := lookPath(name); err != nil {
		return "", "there is no " + name + " (Debian package qemu-user-static)"
	}
	return name, ""
}

// refusal starts this very program, built as the variant, and returns why the processor refuses it, or "". The Go
// runtime asks the processor itself; /proc/cpuinfo of a virtual machine may leave out features that are there.
func refusal(ctx context.Context, c command, flags []string) (string, error) {
	c.args = slices.Concat([]string{"go", "run"}, flags, []string{"./cmd/check", "-list"})
	out, err := c.combined(ctx)
	switch {
	case err == nil:
		return "", nil
	case strings.Contains(out, "microarchitecture support"): // runtime/asm_amd64.s, bad_cpu_msg
		return "this processor lacks features (AVX2, FMA, BMI2, LZCNT, MOVBE, F16C) that the variant is built with", nil
	}
	return "", fmt.Errorf("%w\n%s", err, out)
}

// demandEach fails an outcome in which some package ran no identity test: a check must not vanish behind a build tag.
func demandEach(o outcome, packages []string) outcome {
	ran := map[string]bool{}
	for k := range o.tests {
		ran[k.pkg] = true
	}
	for _, p := range packages {
		if !ran[p] {
			o.verdict = failed
			o.output += fmt.Sprintf("\n%s: its identity tests are not built in this variant", p)
		}
	}
	return o
}

// identityPackages lists the packages with a test named TestIdentity… in any test file, whatever its build tags.
func identityPackages(ctx context.Context, root string) ([]string, error) {
	out, err := command{dir: root, args: []string{"go", "list", "-e", "-f", "{{.ImportPath}}\t{{.Dir}}", "./..."}}.output(ctx)
	if err != nil {
		return nil, fmt.Errorf("listing packages: %w", err)
	}
	var found []string
	for line := range strings.Lines(out) {
		pkg, dir, _ := strings.Cut(strings.TrimSpace(line), "\t")
		if has, err := hasIdentityTest(dir); err != nil {
			return nil, err
		} else if has {
			found = append(found, pkg)
		}
	}
	return found, nil
}

func hasIdentityTest(dir string) (bool, error) {
	files, err := filepath.Glob(filepath.Join(dir, "*_test.go"))
	if err != nil {
		return false, fmt.Errorf("looking for identity tests: %w", err)
	}
	for _, name := range files {
		file, err := parser.ParseFile(token.NewFileSet(), name, nil, parser.SkipObjectResolution)
		if err != nil {
			return false, fmt.Errorf("looking for identity tests: %w", err)
		}
		for _, d := range file.Decls {
			if f, ok := d.(*ast.FuncDecl); ok && f.Recv == nil && strings.HasPrefix(f.Name.Name, "TestIdentity") {
				return true, nil
			}
		}
	}
	return false, nil
}
