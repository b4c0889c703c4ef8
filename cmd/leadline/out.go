package main

import (
	"fmt"
	"os"
	"path/filepath"
	"strings"

	"leadline/render"
	"leadline/render/sheet"
)

// defaultName names a print after its frame, and a part, another scale or
// other numerics so that it can neither be taken for the whole nor replace it.
func defaultName(path string, f loaded, o render.PrintOptions) string {
	name := stem(path)
	if f.numerics != 0 && f.numerics != render.Numerics {
		name += fmt.Sprintf(".numerics-%d", render.Numerics)
	}
	if o.Scale > 1 {
		name += fmt.Sprintf(".scale-%d", o.Scale)
	}
	if o.Crop != nil {
		name += ".crop-" + sheet.FormatCrop(*o.Crop)
	}
	return name + ".png"
}

// checkOut refuses names from which no sidecar's name can be made, or that are
// folders. name is what the print would be called by default.
func checkOut(out, name string) error {
	st, err := os.Stat(out)
	ext := filepath.Ext(out)
	switch {
	case out == "":
		return usage(fmt.Errorf("--out is empty"), "leave it out for "+name)
	case err == nil && st.IsDir() || os.IsPathSeparator(out[len(out)-1]):
		return usage(fmt.Errorf("--out %s is a folder", out), "name the file too, such as "+filepath.Join(out, name))
	case !strings.EqualFold(ext, ".png") || filepath.Base(out) == ext:
		return usage(fmt.Errorf("--out %s is not the name of a PNG", out),
			"the name must end in .png, such as "+filepath.Join(filepath.Dir(out), bare(filepath.Base(out))+".png"))
	}
	return nil
}

// bare is a file name without its ending.
func bare(base string) string {
	if t := strings.TrimSuffix(base, filepath.Ext(base)); t != "" {
		return t
	}
	return "print"
}
