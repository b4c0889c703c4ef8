package parts

import (
	"context"
	"os"
	"path/filepath"
	"reflect"
	"testing"

	"leadline/render"
	"leadline/render/frame"
)

// record is the record of a sidecar.
func record(t *testing.T, path string) frame.Record {
	t.Helper()
	d := must(frame.Load(path))(t)
	if d.Sidecar == nil {
		t.Fatalf("%s is no sidecar", path)
	}
	return d.Sidecar.Record
}

// TestJoinIsThePrint: for any number of parts, whole, cropped or scaled, the
// join gives the file, byte for byte, and the record that printing gives.
func TestJoinIsThePrint(t *testing.T) {
	crop := frameCrop
	for name, c := range map[string]struct {
		where string
		o     render.PrintOptions
		n     []int
	}{
		"whole":   {whole, render.PrintOptions{Scale: 1, Audit: 8}, []int{1, 3, 7, 38}},
		"deep":    {deep, render.PrintOptions{Scale: 1, Audit: 8}, []int{1, 3, 7}},
		"cropped": {deep, render.PrintOptions{Scale: 1, Audit: 3, Crop: &crop}, []int{3}},
		"scaled":  {whole, render.PrintOptions{Scale: 3, Audit: 0}, []int{7}},
	} {
		t.Run(name, func(t *testing.T) {
			t.Parallel()
			f, out := testFrame(t, c.where), t.TempDir()
			c.o.Out = filepath.Join(out, "tide.png")
			r := must(render.Print(context.Background(), f, c.o))(t)
			png := string(must(os.ReadFile(r.File))(t))
			rec := record(t, r.Sidecar)
			for _, n := range c.n {
				dir := t.TempDir()
				for i := n; i >= 1; i-- {
					k := task(dir, i, n)
					k.Crop, k.Scale, k.Audit = c.o.Crop, c.o.Scale, c.o.Audit
					mustRender(t, f, k)
				}
				j := must(joined(t, dir, c.o.Out))(t)
				if j.SHA256 != r.SHA256 || j.Counts != r.Counts || j.Audit != r.Audit {
					t.Errorf("%d parts: joined %+v, printed %+v", n, j, r)
				}
				if string(must(os.ReadFile(j.File))(t)) != png {
					t.Errorf("%d parts: another file", n)
				}
				if got := record(t, j.Sidecar); !reflect.DeepEqual(got, rec) {
					t.Errorf("%d parts: another record: %+v, not %+v", n, got, rec)
				}
			}
		})
	}
}

// TestAuditOfTheJoin may be another than the tasks were told.
func TestAuditOfTheJoin(t *testing.T) {
	dir, f := t.TempDir(), testFrame(t, whole)
	fill(t, f, dir, 2)
	r := must(Join(context.Background(), dir, JoinOptions{Out: filepath.Join(t.TempDir(), "a.png"), Audit: 5}))(t)
	if r.Audit.Asked != 5 || r.Audit.Checked != 5 {
		t.Errorf("audit %+v", r.Audit)
	}
}
