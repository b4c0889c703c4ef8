package main

import (
	"os"
	"path/filepath"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

// TestScripts runs the command as its users do: testdata/script says what is
// typed and what must come of it.
func TestScripts(t *testing.T) {
	frame, err := os.ReadFile("testdata/small.frame.json")
	if err != nil {
		t.Fatal(err)
	}
	testscript.Run(t, testscript.Params{
		Dir:                 "testdata/script",
		RequireExplicitExec: true,
		RequireUniqueNames:  true,
		Cmds: map[string]func(*testscript.TestScript, bool, []string){
			"code": cmdCode, "alter": cmdAlter, "repixel": cmdRepixel, "strip": cmdStrip,
			"shorten": cmdShorten, "fields": cmdFields, "part-of": cmdPartOf, "only": cmdOnly,
		},
		Setup: func(e *testscript.Env) error {
			return os.WriteFile(filepath.Join(e.WorkDir, "small.frame.json"), frame, 0o666)
		},
	})
}
