//go:build unix

package main

import (
	"bytes"
	"encoding/json"
	"os"
	"os/exec"
	"path/filepath"
	"strings"
	"testing"

	"leadline/render/frame"
)

// tool runs a program of a Debian package and returns what it prints on
// standard output.
func tool(t *testing.T, debian, name string, args ...string) string {
	t.Helper()
	if _, err := exec.LookPath(name); err != nil {
		t.Skipf("%s is missing: apt-get install %s", name, debian)
	}
	cmd := exec.Command(name, args...)
	var talk bytes.Buffer
	cmd.Stderr = &talk
	out, err := cmd.Output()
	if err != nil {
		t.Fatalf("%s %v: %v\n%s%s", name, args, err, out, talk.Bytes())
	}
	return string(out)
}

// TestOutsideTools gives a print as the command leaves it to programs that
// others wrote.
func TestOutsideTools(t *testing.T) {
	t.Parallel()
	dir := t.TempDir()
	r, p := rendered(t, dir, testdata(t, "small.frame.json"), "tide.png")
	png, sidecar := filepath.Join(dir, "tide.png"), filepath.Join(dir, "tide.sidecar.json")
	doc, err := frame.Load(sidecar)
	if err != nil {
		t.Fatal(err)
	}
	if doc.Sidecar.Record.SHA256 != r.SHA256 {
		t.Fatalf("sidecar and result disagree on the hash")
	}

	t.Run("pngcheck", func(t *testing.T) {
		out := tool(t, "pngcheck", "pngcheck", "-v", png)
		for _, want := range []string{"No errors detected", "87 x 67 image, 48-bit RGB, non-interlaced", "3937x3937 pixels/meter (100 dpi)"} {
			if !strings.Contains(out, want) {
				t.Errorf("does not say %q:\n%s", want, out)
			}
		}
	})
	t.Run("pngfix", func(t *testing.T) {
		if out := tool(t, "libpng-tools", "pngfix", "--out="+os.DevNull, png); !strings.Contains(out, "IDAT OK") {
			t.Error(out)
		}
	})
	t.Run("exiftool", func(t *testing.T) {
		const debian, name = "libimage-exiftool-perl", "exiftool"
		if out := tool(t, debian, name, "-validate", "-warning", "-a", png); strings.Join(strings.Fields(out), " ") != "Validate : OK" {
			t.Error(out)
		}
		got := tool(t, debian, name, "-s3", "-Title", "-Creator", "-Rights", png)
		if want := "Small\nA. Maker\nPublic domain\n"; got != want {
			t.Errorf("credit %q, not %q", got, want)
		}
	})
	t.Run("identify", func(t *testing.T) {
		got := tool(t, "imagemagick", "identify", "-format", "%w %h %z %#", png)
		if want := "87 67 16 " + doc.Sidecar.Record.SHA256; got != want {
			t.Errorf("identify says %s, not %s", got, want)
		}
	})
	t.Run("vips", func(t *testing.T) {
		ppm := filepath.Join(t.TempDir(), "tide.ppm") // 16 bits, big-endian: netpbm, ppm(5)
		tool(t, "libvips-tools", "vips", "copy", png, ppm)
		b, err := os.ReadFile(ppm)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.HasSuffix(b, p.rows) {
			t.Error("vips reads other pixels")
		}
	})
	t.Run("xmllint", func(t *testing.T) {
		xmp := filepath.Join(t.TempDir(), "tide.xmp")
		if err := os.WriteFile(xmp, p.info.XMP, 0o666); err != nil {
			t.Fatal(err)
		}
		tool(t, "libxml2-utils", "xmllint", "--noout", xmp)
	})
	t.Run("jsonschema", func(t *testing.T) { schemaAccepts(t, sidecar) })
}

// schemaAccepts has another language's validator hold a sidecar against the
// schema, which must also refuse it once a key is gone.
func schemaAccepts(t *testing.T, sidecar string) {
	const program = `import json, sys, jsonschema
schema, doc = (json.load(open(p, encoding="utf-8")) for p in sys.argv[1:])
jsonschema.Draft202012Validator.check_schema(schema)
errors = list(jsonschema.Draft202012Validator(schema).iter_errors(doc))
print(len(errors), [e.message for e in errors][:3])`
	if exec.Command("python3", "-c", "import jsonschema; jsonschema.Draft202012Validator").Run() != nil {
		t.Skip("jsonschema for Python is missing: apt-get install python3-jsonschema")
	}
	dir := t.TempDir()
	schema, less := filepath.Join(dir, "schema.json"), filepath.Join(dir, "less.json")
	if err := os.WriteFile(schema, frame.SidecarSchema(), 0o666); err != nil {
		t.Fatal(err)
	}
	if out := tool(t, "python3", "python3", "-c", program, schema, sidecar); !strings.HasPrefix(out, "0 ") {
		t.Errorf("the schema refuses the sidecar: %s", out)
	}
	b, err := os.ReadFile(sidecar)
	if err != nil {
		t.Fatal(err)
	}
	var v map[string]any
	if err := json.Unmarshal(b, &v); err != nil {
		t.Fatal(err)
	}
	delete(v, "record")
	if err := os.WriteFile(less, mustJSON(t, v), 0o666); err != nil {
		t.Fatal(err)
	}
	if out := tool(t, "python3", "python3", "-c", program, schema, less); strings.HasPrefix(out, "0 ") {
		t.Error("the schema takes a sidecar without its record")
	}
}

func mustJSON(t *testing.T, v any) []byte {
	t.Helper()
	b, err := json.Marshal(v)
	if err != nil {
		t.Fatal(err)
	}
	return b
}
