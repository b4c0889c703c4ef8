package inking

import (
	"os"
	"path/filepath"
	"strings"
	"testing"

	"leadline/palette"
	"leadline/render/frame"
)

// Files of the folder stand behind the house's ramps, in order; one that holds
// no ramp says why and is not taken.
func TestLockerReadsTheFolder(t *testing.T) {
	s := testScreen(t, testFrame(t, "", "srgb"))
	s.dir = filepath.Join(t.TempDir(), "a [b] *?")
	if err := os.Mkdir(s.dir, 0o755); err != nil {
		t.Fatal(err)
	}
	for name, doc := range map[string]string{
		"b.ramp.json":  `{"format":"leadline.ramp/1","name":"Second","stops":[{"at":0,"colour":"black"},{"at":1,"colour":"white"}]}`,
		"a.ramp.json":  `{"format":"leadline.ramp/1","stops":[{"at":0,"colour":"navy"},{"at":1,"colour":"white"}]}`,
		"c.ramp.json":  `{"format":"leadline.ramp/1","stops":[{"at":0,"colour":"nevy"},{"at":1,"colour":"white"}]}`,
		"d.frame.json": `{}`,
	} {
		if err := os.WriteFile(filepath.Join(s.dir, name), []byte(doc), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	press(t, s, "k end")
	var names []string
	for _, e := range s.locker.entries[len(palette.Ramps()):] {
		names = append(names, e.name)
	}
	if got := strings.Join(names, ", "); got != "a, Second, c" {
		t.Fatalf("the folder has %s", got)
	}
	if text := plain(s.View(200, 40)); !strings.Contains(text, `c.ramp.json: stops[0].colour: colour "nevy"`) {
		t.Errorf("the bad file does not say what is wrong:\n%s", text)
	}
	if said := press(t, s, "enter"); !said.Bad || !strings.Contains(said.Text, "navy") || s.locker == nil {
		t.Errorf("taking it says %q", said.Text)
	}
	press(t, s, "up enter")
	if got := stops(s.desk.Frame); got != "0 black | 1 white" || s.rows()[0].value != "Second" {
		t.Errorf("taken: %s, named %s", got, s.rows()[0].value)
	}
}

// A ramp that is saved is found again; a file that is there is kept.
func TestSaveRamp(t *testing.T) {
	s := testScreen(t, testFrame(t, "", "srgb"))
	said := press(t, s, "s enter")
	path := filepath.Join(s.dir, "low-water.ramp.json")
	r, err := frame.LoadRamp(path)
	if err != nil || said.Bad || !strings.HasSuffix(said.Text, path) {
		t.Fatalf("%q, %v", said.Text, err)
	}
	if r.Name != "low water" || !sameRamp(r.Ramp, s.now().ramp) {
		t.Errorf("saved as %+v", r)
	}
	if name := s.rows()[0].value; name != "low water" {
		t.Errorf("the ramp is called %s", name)
	}
	press(t, s, "r")
	if said := press(t, s, "s enter"); !said.Bad || !strings.Contains(said.Text, "is there already") {
		t.Errorf("saving over it says %q", said.Text)
	}
	press(t, s, "s ctrl+u =ebb enter k")
	if n := len(s.locker.entries) - len(palette.Ramps()); n != 2 {
		t.Errorf("%d files in the locker", n)
	}
	if s.locker.entries[s.locker.at].name != "ebb" {
		t.Errorf("the cursor is on %s", s.locker.entries[s.locker.at].name)
	}
}

// What is read after the locker was shut and opened again is not stocked twice.
func TestLateFolder(t *testing.T) {
	s := testScreen(t, testFrame(t, "", "srgb"))
	late := s.openLocker()
	s.shut()
	now := s.openLocker()
	s.Update(late())
	if !s.locker.reading {
		t.Error("an old reading is taken for the new one")
	}
	s.Update(now())
	if s.locker.reading || len(s.locker.entries) != len(palette.Ramps()) {
		t.Errorf("%d entries", len(s.locker.entries))
	}
}

// On the house's own ramps the arrows go from one to the next, as one step; on
// another's they open the locker, so that it is not lost.
func TestArrowsOnTheRamp(t *testing.T) {
	f := testFrame(t, "", "srgb")
	s := testScreen(t, f)
	if press(t, s, "right"); s.locker == nil {
		t.Error("an own ramp is left behind")
	}
	g := f.Clone()
	g.Ink.Ramp = nil
	s = testScreen(t, g)
	press(t, s, "right right left left left")
	all := palette.Ramps()
	if got := s.rows()[0].value; got != all[len(all)-1].Name {
		t.Errorf("the ramp is %s", got)
	}
	if n, _ := s.desk.Steps(); n != 1 {
		t.Errorf("%d steps", n)
	}
}
