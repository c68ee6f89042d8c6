package main

import (
	"os"
	"path/filepath"
	"testing"

	"github.com/rogpeppe/go-internal/testscript"
)

// The command line is tested by scripts: testdata/script/*.txtar.
func TestMain(m *testing.M) {
	testscript.Main(m, map[string]func(){
		"lobewright": func() { os.Exit(run(os.Args, os.Stdout, os.Stderr)) },
	})
}

func TestScripts(t *testing.T) {
	root, err := filepath.Abs("../..")
	if err != nil {
		t.Fatal(err)
	}
	testscript.Run(t, testscript.Params{
		Dir: "testdata/script",
		Setup: func(e *testscript.Env) error {
			e.Setenv("SAMPLES", filepath.Join(root, "samples"))
			e.Setenv("TESTDATA", filepath.Join(root, "testdata"))
			return nil
		},
	})
}
