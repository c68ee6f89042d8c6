package main

import (
	"bytes"
	"fmt"
	"os"
	"path/filepath"
	"strings"
	"testing"
	"unicode/utf8"

	"github.com/google/go-cmp/cmp"
)

// mark stands in a bad file right before what is wrong with it, and is taken out before the
// file is read. The file's first lines, "#= ", are the messages expected, in order; "@"
// at the start of one is the place of the next mark.
const mark = "▸"

// badInput takes a bad file apart: what the program is given, and what it must say when the
// file is called name.
func badInput(file, name string) (data []byte, want []string, err error) {
	if data, err = os.ReadFile(file); err != nil {
		return nil, nil, err
	}
	var messages []string
	for bytes.HasPrefix(data, []byte("#= ")) {
		line, rest, _ := bytes.Cut(data, []byte("\n"))
		messages, data = append(messages, strings.TrimSuffix(string(line[3:]), "\r")), rest
	}
	var places []string
	for {
		before, after, found := bytes.Cut(data, []byte(mark))
		if !found {
			break
		}
		line := 1 + bytes.Count(before, []byte("\n"))
		start := bytes.LastIndexByte(before, '\n') + 1
		text := bytes.TrimPrefix(before[start:], []byte("\ufeff"))
		places = append(places, fmt.Sprintf("%d:%d", line, 1+utf8.RuneCount(text)))
		data = append(append([]byte(nil), before...), after...)
	}
	for _, m := range messages {
		if rest, ok := strings.CutPrefix(m, "@"); ok {
			if len(places) == 0 {
				return nil, nil, fmt.Errorf("%s: more messages with a place than marks", file)
			}
			m, places = places[0]+rest, places[1:]
			m = ":" + m
		} else {
			m = ": " + m
		}
		want = append(want, name+m)
	}
	if len(places) > 0 || len(want) == 0 {
		return nil, nil, fmt.Errorf("%s: %d messages, %d marks too many", file, len(want), len(places))
	}
	return data, want, nil
}

// A wrong table or program is answered with exactly these messages, exit 2, and no file.
func TestBadInputs(t *testing.T) {
	root, err := filepath.Abs("../../testdata")
	if err != nil {
		t.Fatal(err)
	}
	for _, c := range []struct {
		files, spec, as string
		least           int
		command         []string
	}{
		{"table/bad/*.csv", "table/lift.yaml", "lift.csv", 40, []string{"release", "lift.yaml"}},
		{"program/bad/*.nc", "program/cam.yaml", "edited.nc", 60, []string{"proveout", "cam.yaml", "edited.nc"}},
	} {
		files, err := filepath.Glob(filepath.Join(root, c.files))
		if err != nil || len(files) < c.least {
			t.Fatalf("%d files, %v", len(files), err)
		}
		spec, err := os.ReadFile(filepath.Join(root, c.spec))
		if err != nil {
			t.Fatal(err)
		}
		for _, file := range files {
			t.Run(filepath.Base(file), func(t *testing.T) {
				data, want, err := badInput(file, c.as)
				if err != nil {
					t.Fatal(err)
				}
				dir := t.TempDir()
				t.Chdir(dir)
				for name, data := range map[string][]byte{filepath.Base(c.spec): spec, c.as: data} {
					if err := os.WriteFile(name, data, 0o644); err != nil {
						t.Fatal(err)
					}
				}
				var out, messages bytes.Buffer
				status := run(append([]string{"lobewright"}, c.command...), &out, &messages)
				if diff := cmp.Diff(want, strings.Split(strings.TrimSuffix(messages.String(), "\n"), "\n")); diff != "" || status != statusInput || out.Len() > 0 {
					t.Errorf("status %d, %d bytes of results, messages (-want +got):\n%s", status, out.Len(), diff)
				}
				if list, err := os.ReadDir(dir); err != nil || len(list) != 2 {
					t.Errorf("the folder holds %v, %v", list, err)
				}
			})
		}
	}
}

// Every wrong spec of the corpus is refused by the program itself too: each message begins
// with its place, exit 2, and no file.
func TestBadSpecsWriteNothing(t *testing.T) {
	files, err := filepath.Glob("../../testdata/spec/bad/*.yaml")
	if err != nil || len(files) < 160 {
		t.Fatalf("%d files, %v", len(files), err)
	}
	contents := map[string][]byte{}
	for _, file := range files {
		if contents[filepath.Base(file)], err = os.ReadFile(file); err != nil {
			t.Fatal(err)
		}
	}
	dir := t.TempDir()
	t.Chdir(dir)
	for name, data := range contents {
		if err := os.WriteFile("bad.yaml", data, 0o644); err != nil {
			t.Fatal(err)
		}
		var out, messages bytes.Buffer
		if status := run([]string{"lobewright", "release", "bad.yaml"}, &out, &messages); status != statusInput || out.Len() > 0 {
			t.Errorf("%s: status %d, %d bytes of results", name, status, out.Len())
		}
		for line := range strings.Lines(messages.String()) {
			var l, c int
			if n, _ := fmt.Sscanf(line, "bad.yaml:%d:%d:", &l, &c); n != 2 || l < 1 || c < 1 {
				t.Errorf("%s: a message without a place: %q", name, line)
			}
		}
		if list, err := os.ReadDir(dir); err != nil || len(list) != 1 {
			t.Fatalf("%s: the folder holds %v, %v", name, list, err)
		}
	}
}
