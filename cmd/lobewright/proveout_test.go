package main

import (
	"bytes"
	"encoding/json"
	"fmt"
	"math/rand"
	"os"
	"path/filepath"
	"regexp"
	"strings"
	"testing"

	"lobewright/export/sheet"
)

const liftSpec = "../../samples/stick-lift.yaml"

// programOf releases a sample and returns the lines of one of its programs.
func programOf(t *testing.T, sample, program string) (spec string, lines []string) {
	t.Helper()
	dir := t.TempDir()
	spec = "../../samples/" + sample + ".yaml"
	var out, messages bytes.Buffer
	if status := run([]string{"lobewright", "release", spec, "-o", dir}, &out, &messages); status != statusDone {
		t.Fatal(status, messages.String())
	}
	data, err := os.ReadFile(filepath.Join(dir, sample, sample+"."+program+".nc"))
	if err != nil {
		t.Fatal(err)
	}
	return spec, strings.Split(string(data), "\n")
}

// proved runs the command on a program of a spec and returns what it found.
func proved(t *testing.T, spec string, lines []string, flags ...string) (sheet.ProveOut, int, string) {
	t.Helper()
	file := filepath.Join(t.TempDir(), "edited.nc")
	if err := os.WriteFile(file, []byte(strings.Join(lines, "\n")), 0o644); err != nil {
		t.Fatal(err)
	}
	var out, messages bytes.Buffer
	status := run(append([]string{"lobewright", "proveout", spec, file, "--json"}, flags...), &out, &messages)
	var p sheet.ProveOut
	if status != statusInput {
		if err := json.Unmarshal(out.Bytes(), &p); err != nil {
			t.Fatal(err, messages.String())
		}
	}
	return p, status, messages.String()
}

// at reports whether a fault or a message names a line of the file.
func at(p sheet.ProveOut, messages string, line int) bool {
	for _, f := range p.Faults {
		if f.Line == line {
			return true
		}
	}
	return strings.Contains(messages, fmt.Sprintf("edited.nc:%d:", line))
}

var (
	arcBlock = regexp.MustCompile(`^N\d+ G([23]) X(-?[\d.]+) Y(-?[\d.]+) I`)
	xWord    = regexp.MustCompile(`X(-?[\d.]+)`)
)

// arcLines are the indices of the arcs of a program.
func arcLines(lines []string) []int {
	var at []int
	for i, l := range lines {
		if arcBlock.MatchString(l) {
			at = append(at, i)
		}
	}
	return at
}

// Our own program is proven as it stands, and after edits that change nothing a
// control would do.
func TestProveoutHarmlessEdits(t *testing.T) {
	spec, lines := programOf(t, "stick-lift", "1-mill")
	edits := map[string]func([]string){
		"as written": func([]string) {},
		"spacing": func(l []string) {
			for i := range l {
				if l[i] != "" && l[i][0] == 'N' {
					l[i] = strings.ReplaceAll(l[i], " ", "  ")
				}
			}
		},
		"comments": func(l []string) {
			for i := range l {
				if arcBlock.MatchString(l[i]) {
					l[i] += " (checked)"
				}
			}
		},
		"renumbering": func(l []string) {
			for i := range l {
				if n := strings.IndexByte(l[i], ' '); n > 0 && l[i][0] == 'N' {
					l[i] = fmt.Sprintf("N%d%s", 7*i, l[i][n:])
				}
			}
		},
		"word order": func(l []string) {
			for i := range l {
				if f := strings.Fields(l[i]); len(f) == 6 && arcBlock.MatchString(l[i]) {
					l[i] = strings.Join([]string{f[0], f[4], f[5], f[1], f[3], f[2]}, " ")
				}
			}
		},
		"line numbers": func(l []string) {
			for i := range l {
				if n := strings.IndexByte(l[i], ' '); n > 0 && l[i][0] == 'N' {
					l[i] = l[i][n+1:]
				}
			}
		},
	}
	for name, edit := range edits {
		l := append([]string(nil), lines...)
		edit(l)
		if p, status, messages := proved(t, spec, l); status != statusDone || !p.Proven || len(p.Passes) != 9 || p.Follower == nil {
			t.Errorf("%s: status %d, faults %+v, %s", name, status, p.Faults, messages)
		}
	}
}

// Damages at 40 seeded places over all passes are each reported at their line.
func TestProveoutFindsDamage(t *testing.T) {
	spec, lines := programOf(t, "stick-lift", "1-mill")
	arcs := arcLines(lines)
	r := rand.New(rand.NewSource(3))
	for n := range 40 {
		i := arcs[r.Intn(len(arcs))]
		l := append([]string(nil), lines...)
		kind := []string{"moved", "swapped", "missing", "inch"}[n%4]
		switch kind {
		case "moved":
			l[i] = xWord.ReplaceAllStringFunc(l[i], func(w string) string {
				var x float64
				fmt.Sscanf(w, "X%f", &x)
				return fmt.Sprintf("X%.3f", x+0.05)
			})
		case "swapped":
			if strings.Contains(l[i], " G2 ") {
				l[i] = strings.Replace(l[i], " G2 ", " G3 ", 1)
			} else {
				l[i] = strings.Replace(l[i], " G3 ", " G2 ", 1)
			}
		case "missing":
			l = append(l[:i:i], l[i+1:]...)
		case "inch":
			l[i] = strings.Replace(l[i], " G", " G20 G", 1)
		}
		p, status, messages := proved(t, spec, l)
		if status == statusDone {
			t.Errorf("damage %d, %s at line %d, %q: not found", n, kind, i+1, lines[i])
		} else if !at(p, messages, i+1) && !(kind == "moved" && at(p, messages, i+2)) { // the end of a block is the start of the next
			t.Errorf("damage %d, %s at line %d, %q: reported elsewhere: %+v %s", n, kind, i+1, lines[i], p.Faults, messages)
		}
	}
}

// A cutter other than the spec's leaves the contour too large or too small by half the
// difference in diameter, and the follower too high by about that.
func TestProveoutToolDiameter(t *testing.T) {
	spec, lines := programOf(t, "stick-lift", "1-mill")
	p, status, _ := proved(t, spec, lines, "--tool-diameter", "15.9")
	if status != statusGate || p.Proven {
		t.Fatalf("status %d, proven %v", status, p.Proven)
	}
	last := p.Passes[len(p.Passes)-1].Deviation
	if last == nil || last.Bound < 0.050 || last.Bound > 0.052 || p.Follower == nil || p.Follower.Lift < 0.050 || p.Follower.Lift > 0.054 {
		t.Errorf("deviation %+v, follower %+v; half the difference is 0.05", last, p.Follower)
	}
}
