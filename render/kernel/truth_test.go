package kernel

import (
	"encoding/json"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"leadline/render/exact"
)

// truth is a file of testdata/truth: samples of a view by direct iteration with
// MPFR, a program of its own (truth.c beside the files, where README.md says
// how they were made).
type truth struct {
	Name string
	Set  struct {
		Kind      string
		Power     int
		Parameter struct{ Re, Im string }
	}
	View struct {
		Centre struct{ Re, Im string }
		Height string
	}
	Iteration struct {
		Limit   int
		Bailout float64
	}
	Lattice struct{ Width, Height int }
	Samples []struct {
		X, Y, N      int
		Mu, Distance float64
		Robust       bool
	}
}

const truthFolder = "../../testdata/truth"

func loadTruth(t testing.TB, path string) *truth {
	t.Helper()
	data, err := os.ReadFile(path)
	if err != nil {
		t.Fatal(err)
	}
	f := new(truth)
	if err := json.Unmarshal(data, f); err != nil {
		t.Fatalf("%s: %v", path, err)
	}
	return f
}

// scene is a truth file's view.
func (f *truth) scene() *scene {
	return &scene{name: f.Name, re: f.View.Centre.Re, im: f.View.Centre.Im, height: f.View.Height,
		width: f.Lattice.Width, rows: f.Lattice.Height, power: f.Set.Power, limit: f.Iteration.Limit,
		julia: f.Set.Kind == "julia", paramRe: f.Set.Parameter.Re, paramIm: f.Set.Parameter.Im,
		bailout: f.Iteration.Bailout}
}

// known is the view of a truth file, for tests that want a place at a depth.
func known(t testing.TB, name string) *scene {
	t.Helper()
	return loadTruth(t, filepath.Join(truthFolder, name+".json")).scene()
}

// costly names the views whose references take most of the time.
var costly = map[string]bool{"near-i-1e-3000": true, "tip-1e-2000": true, "long-period-1e-99": true,
	"feigenbaum-1e-40": true, "nested-1e-1030": true}

// TestTruth holds every view of testdata/truth against its samples: the counts
// of all robust samples, and all smooth counts and distances within what a
// shift of 1e-9 of a pixel makes of them.
func TestTruth(t *testing.T) {
	files, err := filepath.Glob(filepath.Join(truthFolder, "*.json"))
	if err != nil || len(files) < 10 {
		t.Fatalf("only %d files of truth (%v)", len(files), err)
	}
	for _, path := range files {
		name := strings.TrimSuffix(filepath.Base(path), ".json")
		t.Run(name, func(t *testing.T) {
			if testing.Short() && costly[name] {
				t.Skip("the reference takes long")
			}
			f := loadTruth(t, path)
			s := f.scene().build(t)
			n := holdTruth(t, s, f)
			if n.asked == 0 || n.robust+n.inside < n.asked/2 {
				t.Errorf("of %d samples %d robust and %d inside: no test", n.asked, n.robust, n.inside)
			}
			t.Logf("%-6s %d samples: %d robust, %d with the same n, %d undecided; smooth counts within %.3f of what is allowed",
				s.regime(), n.asked, n.robust, n.equal, n.inside, n.worst)
		})
	}
}

func holdTruth(t *testing.T, s *scene, f *truth) (n tally) {
	t.Helper()
	for _, p := range f.Samples {
		x, y := float64(p.X)+0.5, float64(p.Y)+0.5
		got := s.kernel.Sample(x, y)
		e := exact.Result{Escaped: p.N >= 0, N: p.N, Smooth: p.Mu, Distance: p.Distance}
		s.compare(t, &n, x, y, got, e)
		if p.Robust && p.N >= 0 && got.N != p.N {
			t.Errorf("%s (%g, %g): n = %d, and robustly %d in truth", s.name, x, y, got.N, p.N)
		}
	}
	return n
}
