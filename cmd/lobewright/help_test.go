package main

import (
	"bytes"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"
)

// The help of every command has two examples at least, and each of them runs as it stands in a folder with the
// samples: what follows a pipe or goes into a file is the shell's.
func TestHelpExamplesRun(t *testing.T) {
	root, err := filepath.Abs("../..")
	if err != nil {
		t.Fatal(err)
	}
	t.Chdir(t.TempDir())
	if err := os.CopyFS("samples", os.DirFS(filepath.Join(root, "samples"))); err != nil {
		t.Fatal(err)
	}
	call := func(words ...string) (status int, out, messages string) {
		var a, b bytes.Buffer
		status = run(append([]string{"lobewright"}, words...), &a, &b)
		return status, a.String(), b.String()
	}
	commands := application(nil, nil).Commands
	if len(commands) < 9 {
		t.Fatalf("%d commands", len(commands))
	}
	for _, c := range commands {
		_, help, _ := call(c.Name, "--help")
		_, after, _ := strings.Cut(help, "Examples:")
		examples := regexp.MustCompile(`(?m)^ +lobewright (.+)$`).FindAllStringSubmatch(after, -1)
		if len(examples) < 2 {
			t.Errorf("%s: %d examples in\n%s", c.Name, len(examples), help)
		}
		for _, e := range examples {
			line, _, _ := strings.Cut(e[1], "|")
			line, _, _ = strings.Cut(line, ">")
			// A sample that is refused on purpose, and a tool of another diameter, fail a gate.
			gate := strings.Contains(line, "refused") || strings.Contains(line, "--tool-diameter")
			status, out, messages := call(strings.Fields(line)...)
			if status != statusDone && !(gate && status == statusGate) || out == "" {
				t.Errorf("lobewright %s: status %d, %d bytes, %s", line, status, len(out), messages)
			}
		}
	}
}
