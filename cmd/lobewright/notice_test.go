package main

import (
	"os"
	"os/exec"
	"strings"
	"testing"
)

// NOTICE names every module that the binary or the tests hold, and no other.
func TestNoticeNamesEveryModule(t *testing.T) {
	notice, err := os.ReadFile("../../NOTICE")
	if err != nil {
		t.Fatal(err)
	}
	binary, tests, ok := strings.Cut(string(notice), "Used by the tests alone:")
	if !ok {
		t.Fatal("NOTICE does not tell the tests' modules from the binary's")
	}
	// modules lists the modules of packages, as NOTICE writes them: without a major version at the end.
	modules := func(args ...string) map[string]bool {
		out, err := exec.Command("go", append([]string{"list", "-deps", "-f", "{{with .Module}}{{.Path}}{{end}}"}, args...)...).Output()
		if err != nil {
			t.Fatal(err)
		}
		m := map[string]bool{}
		for _, l := range strings.Fields(string(out)) {
			if l != "lobewright" {
				m[strings.TrimSuffix(l, "/v2")] = true
			}
		}
		return m
	}
	in := modules("lobewright/cmd/lobewright")
	for m := range in {
		if !strings.Contains(binary, m+" ") {
			t.Errorf("NOTICE does not name %s, which is in the binary", m)
		}
	}
	for m := range modules("-test", "-tags=peers", "lobewright/...") {
		if !in[m] && !strings.Contains(tests, m+" ") {
			t.Errorf("NOTICE does not name %s among the modules of the tests", m)
		}
	}
	for _, line := range strings.Split(binary, "\n") {
		if f := strings.Fields(line); len(f) > 1 && strings.Count(f[0], "/") >= 1 && strings.Contains(f[0], ".") && !in[f[0]] {
			t.Errorf("NOTICE names %s, which is not in the binary", f[0])
		}
	}
}
