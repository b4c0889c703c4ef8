package main

import (
	"context"
	"fmt"
	"os"
	"os/exec"
	"strings"
)

// debianPackages are what tests compare with or run under. Where one is missing its tests skip and say so.
// libc6-dev is only recommended by gcc, and the race detector does not link without it.
var debianPackages = []string{
	"pngcheck", "libpng-tools", "pngtools", "libimage-exiftool-perl", "imagemagick", "libvips-tools",
	"liblcms2-utils", "argyll", "argyll-ref", "icc-profiles-free", "exiv2", "libxml2-utils", "python3-jsonschema",
	"libtiff-tools", "qemu-user-static", "tmux", "gcc", "libc6-dev", "clang", "libmpfr-dev", "libgmp-dev", "libpng-dev",
	"munge", "slurmctld", "slurmd", "slurm-client", "python3-yaml", "postgresql",
	"chromium", "openssl", "curl", "iproute2", "libpaper-utils",
}

// installTools installs the missing packages where it may. It never fails: what stays missing becomes notes.
// The package database decides, not the presence of a program: another package may own a program of the same name.
func installTools(ctx context.Context, root string) outcome {
	if _, err := exec.LookPath("dpkg-query"); err != nil {
		return outcome{verdict: skipped, notes: []string{"not a Debian system: nothing installed, tests without their tools skip"}}
	}
	missing := missingPackages(ctx)
	if len(missing) == 0 {
		return outcome{verdict: passed}
	}
	reason := installObstacle()
	if reason == "" {
		aptInstall(ctx, missing)
		missing, reason = missingPackages(ctx), "could not be installed by apt-get"
	}
	if len(missing) == 0 {
		return outcome{verdict: passed}
	}
	return outcome{verdict: skipped, notes: []string{fmt.Sprintf("%s: %s", strings.Join(missing, ", "), reason)}}
}

// installObstacle says why nothing can be installed here, or "" when it can.
func installObstacle() string {
	if os.Geteuid() != 0 {
		return "missing, and only root may install"
	}
	if _, err := exec.LookPath("apt-get"); err != nil {
		return "missing, and there is no apt-get"
	}
	return ""
}

func missingPackages(ctx context.Context) []string {
	args := append([]string{"dpkg-query", "-W", "-f", "${Package} ${db:Status-Status}\n"}, debianPackages...)
	out, _ := command{args: args}.output(ctx) // fails when any package is unknown, and still lists the others
	return notInstalled(debianPackages, out)
}

// notInstalled returns the wanted packages that the lines "name status" do not call installed.
func notInstalled(wanted []string, status string) []string {
	installed := map[string]bool{}
	for line := range strings.Lines(status) {
		if name, state, _ := strings.Cut(strings.TrimSpace(line), " "); state == "installed" {
			installed[name] = true
		}
	}
	var missing []string
	for _, p := range wanted {
		if !installed[p] {
			missing = append(missing, p)
		}
	}
	return missing
}

// aptInstall installs the packages together, and one by one where that fails: one unknown name refuses the lot.
// The outcome is read from the package database afterwards.
func aptInstall(ctx context.Context, packages []string) {
	_ = apt(ctx, "update")
	if apt(ctx, append([]string{"install"}, packages...)...) == nil {
		return
	}
	for _, p := range packages {
		if ctx.Err() != nil {
			return
		}
		_ = apt(ctx, "install", p)
	}
}

func apt(ctx context.Context, args ...string) error {
	fixed := []string{"apt-get", "-y", "-q", "--no-install-recommends", "-o", "DPkg::Lock::Timeout=60", "-o", "Acquire::Retries=2"}
	_, err := command{
		env:  []string{"DEBIAN_FRONTEND=noninteractive", "LC_ALL=C"},
		args: append(fixed, args...),
	}.combined(ctx)
	return err
}
