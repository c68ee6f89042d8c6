package main

import (
	"bytes"
	"os"
	"path/filepath"
	"strings"
	"testing"
)

// Specs of testdata/gates are refused with exit status 1, the gate named as
// FAIL, and nothing written: every third, all of them are held gate by gate in export/pack.
func TestGateSpecsExit1(t *testing.T) {
	files, err := filepath.Glob("../../testdata/gates/*.yaml")
	if err != nil || len(files) < 21 {
		t.Fatal(len(files), err)
	}
	for i, f := range files {
		if i%3 > 0 {
			continue
		}
		data, err := os.ReadFile(f)
		if err != nil {
			t.Fatal(err)
		}
		gate, _, _ := strings.Cut(strings.TrimPrefix(string(data), "# gate: "), "\n")
		out := filepath.Join(t.TempDir(), "out")
		var stdout, stderr bytes.Buffer
		if status := run([]string{"lobewright", "release", f, "-o", out}, &stdout, &stderr); status != statusGate {
			t.Errorf("%s: exit status %d, want 1\n%s", f, status, stderr.String())
		}
		failed := false
		lines := strings.Split(stdout.String(), "\n")
		for i, line := range lines[:len(lines)-1] {
			long := strings.HasSuffix(lines[i+1], "FAIL") && strings.HasPrefix(lines[i+1], "  ") // a long name stands on a line of its own
			failed = failed || strings.HasPrefix(line, gate) && (strings.HasSuffix(line, "FAIL") || long)
		}
		if !failed {
			t.Errorf("%s: gate %s is not shown as FAIL", f, gate)
		}
		if _, err := os.Stat(out); err == nil {
			t.Errorf("%s: something was written", f)
		}
	}
}
