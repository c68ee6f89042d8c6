package main

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"testing"
)

// Two processes in two folders, of which one names the spec from its folder and runs on one
// processor, and the other names it from the root and runs on eight, with another
// language and time zone, place the same bytes.
func TestSameBytesInAnyProcess(t *testing.T) {
	samples, err := filepath.Abs("../../samples")
	if err != nil {
		t.Fatal(err)
	}
	// A motion from events, from facts, from a table; a groove, a barrel.
	for _, name := range []string{"stick-lift", "carton-nudge", "lid-press", "carton-shift", "lane-guide"} {
		here, there := filepath.Join(t.TempDir(), "a"), filepath.Join(t.TempDir(), "some where", "ü")
		for _, dir := range []string{here, there} {
			if err := os.MkdirAll(dir, 0o755); err != nil {
				t.Fatal(err)
			}
		}
		files, err := filepath.Glob(filepath.Join(samples, name+".*"))
		if err != nil || len(files) == 0 {
			t.Fatal(name, files, err)
		}
		for _, f := range files {
			data, err := os.ReadFile(f)
			if err != nil {
				t.Fatal(err)
			}
			if err := os.WriteFile(filepath.Join(here, filepath.Base(f)), data, 0o644); err != nil {
				t.Fatal(err)
			}
		}
		for _, run := range []struct {
			dir, spec, out string
			env            []string
		}{
			{here, name + ".yaml", "release", []string{"GOMAXPROCS=1", "LC_ALL=C", "LANG=C", "TZ=UTC", "NO_COLOR=1"}},
			{there, filepath.Join(samples, name+".yaml"), filepath.Join(there, "packs"), []string{"GOMAXPROCS=8", "LC_ALL=de_DE.UTF-8", "LANG=de_DE.UTF-8", "TZ=Asia/Kathmandu", "GOGC=20"}},
		} {
			cmd := exec.Command("lobewright", "release", run.spec, "-o", run.out)
			cmd.Dir, cmd.Env = run.dir, append(os.Environ(), run.env...)
			if out, err := cmd.CombinedOutput(); err != nil {
				t.Fatalf("%s: %v\n%s", name, err, out)
			}
		}
		first := filepath.Join(here, "release", name)
		list, err := os.ReadDir(first)
		if err != nil || len(list) < 9 {
			t.Fatal(name, len(list), err)
		}
		for _, e := range list {
			a, err := os.ReadFile(filepath.Join(first, e.Name()))
			if err != nil {
				t.Fatal(err)
			}
			b, err := os.ReadFile(filepath.Join(there, "packs", name, e.Name()))
			if err != nil || !bytes.Equal(a, b) {
				t.Errorf("%s differs from process to process: %v", e.Name(), err)
			}
			if bytes.Contains(a, []byte(here)) || bytes.Contains(b, []byte(there)) || bytes.Contains(b, []byte(samples)) {
				t.Errorf("%s holds the name of a folder", e.Name())
			}
		}
		if other, err := os.ReadDir(filepath.Join(there, "packs", name)); err != nil || len(other) != len(list) {
			t.Errorf("%s: %d files, then %d, %v", name, len(list), len(other), err)
		}
	}
}
