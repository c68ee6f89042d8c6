//go:build peers

package main

import (
	"bytes"
	"os"
	"os/exec"
	"path/filepath"
	"slices"
	"strings"
	"testing"
)

// The three shells take the scripts, and bash and fish offer what they should.
func TestPeerShells(t *testing.T) {
	dir := t.TempDir()
	for _, shell := range []string{"bash", "zsh", "fish"} {
		var out, messages bytes.Buffer
		if status := run([]string{"lobewright", "completion", shell}, &out, &messages); status != statusDone {
			t.Fatal(messages.String())
		}
		if err := os.WriteFile(filepath.Join(dir, shell), out.Bytes(), 0o644); err != nil {
			t.Fatal(err)
		}
	}
	ask := func(shell, script string) []string {
		cmd := exec.Command(shell, "-c", script)
		cmd.Dir, cmd.Env = dir, append(os.Environ(), "HOME="+dir)
		out, err := cmd.CombinedOutput()
		if err != nil {
			t.Fatalf("%s is needed: %v\n%s", shell, err, out)
		}
		var words []string
		for _, line := range strings.Split(strings.TrimSpace(string(out)), "\n") {
			word, _, _ := strings.Cut(line, "\t")
			words = append(words, word)
		}
		slices.Sort(words)
		return words
	}
	for _, c := range []struct {
		words string
		want  []string
	}{
		{"lobewright rel", []string{"release"}},
		{"lobewright completion ", []string{"bash", "fish", "zsh"}},
		{"lobewright release --dxf ", []string{"2000", "r12"}},
		{"lobewright check --s", []string{"--sheet"}},
	} {
		last := strings.Count(c.words, " ")
		if got := ask("bash", "source ./bash; COMP_WORDS=("+strings.TrimSuffix(c.words, " ")+" ''); COMP_CWORD="+string(rune('0'+last))+"; _lobewright; printf '%s\\n' \"${COMPREPLY[@]}\""); !slices.Equal(got, c.want) {
			t.Errorf("bash offers %q after %q, want %q", got, c.words, c.want)
		}
		if got := ask("fish", "source ./fish; complete -C '"+c.words+"'"); !slices.Equal(got, c.want) {
			t.Errorf("fish offers %q after %q, want %q", got, c.words, c.want)
		}
	}
	if got := ask("zsh", "autoload -U compinit && compinit -u -D && source ./zsh && echo $_comps[lobewright]"); !slices.Equal(got, []string{"_lobewright"}) {
		t.Errorf("zsh completes with %q", got)
	}
}
