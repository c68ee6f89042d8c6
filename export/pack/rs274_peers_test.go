//go:build peers

package pack

import (
	"bytes"
	"fmt"
	"math"
	"os"
	"os/exec"
	"path/filepath"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
)

// printed is what the RS274/NGC interpreter prints of a length: four decimals.
const printed = 0.6e-4

// canon is one canonical motion of the interpreter.
type canon struct {
	n           int // block number
	kind        read.Kind
	x, y, z     float64
	a, b, c     float64 // rotary axes, degrees
	cx, cy, rot float64
}

var (
	straight = regexp.MustCompile(`^\s*\d+ N(\S+)\s+STRAIGHT_(FEED|TRAVERSE)\(([^)]*)\)`)
	arcFeed  = regexp.MustCompile(`^\s*\d+ N(\S+)\s+ARC_FEED\(([^)]*)\)`)
)

func canonical(t *testing.T, out []byte) []canon {
	t.Helper()
	var all []canon
	numbers := func(text string) []float64 {
		var f []float64
		for _, s := range strings.Split(text, ",") {
			v, err := strconv.ParseFloat(strings.TrimSpace(s), 64)
			if err != nil {
				t.Fatal(err)
			}
			f = append(f, v)
		}
		return f
	}
	for _, line := range strings.Split(string(out), "\n") {
		if m := straight.FindStringSubmatch(line); m != nil {
			n, _ := strconv.Atoi(m[1])
			f := numbers(m[3])
			c := canon{n: n, kind: read.Line, x: f[0], y: f[1], z: f[2], a: f[3], b: f[4], c: f[5]}
			if m[2] == "TRAVERSE" {
				c.kind = read.Rapid
			}
			all = append(all, c)
		} else if m := arcFeed.FindStringSubmatch(line); m != nil {
			n, _ := strconv.Atoi(m[1])
			f := numbers(m[2])
			all = append(all, canon{n: n, kind: read.Arc, x: f[0], y: f[1], cx: f[2], cy: f[3], rot: f[4], z: f[5]})
		}
	}
	return all
}

// interpret runs the interpreter with a home and a tool table of its own.
func interpret(t *testing.T, p program, inch bool) []canon {
	t.Helper()
	dir := t.TempDir()
	file, table := filepath.Join(dir, p.name), filepath.Join(dir, "tool.tbl")
	diameter := 0.0
	if p.expect.Compensation == gcode.CompControl {
		diameter = 2 * p.expect.Radius
		if !inch {
			diameter /= 25.4 // without an ini file the table is in inches
		}
	}
	row := fmt.Sprintf("T%d P%d Z0.0 D%.12f\n", p.expect.Tool, p.expect.Tool, diameter)
	for name, data := range map[string][]byte{file: p.data, table: []byte(row)} {
		if err := os.WriteFile(name, data, 0o644); err != nil {
			t.Fatal(err)
		}
	}
	cmd := exec.Command("rs274", "-g", "-t", table, file)
	cmd.Env = append(os.Environ(), "HOME="+dir)
	var out, messages bytes.Buffer
	cmd.Stdout, cmd.Stderr = &out, &messages
	if err := cmd.Run(); err != nil {
		t.Fatalf("%s: the interpreter does not accept it: %v\n%s", p.name, err, messages.String())
	}
	return canonical(t, out.Bytes())
}

// The RS274/NGC interpreter (NISTIR 6556; Debian package linuxcnc-uspace) accepts
// every program of every sample and traces the path our reader reads.
func TestPeerRS274(t *testing.T) {
	files, moves := 0, 0
	for _, name := range releasingSamples(t) {
		s := readSample(t, name)
		p, programs := makeJob(t, s)
		if !p.Passed {
			t.Fatalf("%s does not release", name)
		}
		for _, q := range programs {
			back, err := read.Parse(q.data)
			if err != nil {
				t.Fatal(err)
			}
			got := interpret(t, q, back.Inch)
			moves += compareMotion(t, q, back, got)
			files++
		}
	}
	if files < 5 || moves < 100 {
		t.Fatalf("only %d files with %d moves were compared", files, moves)
	}
	t.Logf("RS274/NGC interpreter: %d programs, %d moves traced alike", files, moves)
}

// compareMotion holds the canonical motions against ours and returns how many
// were compared.
func compareMotion(t *testing.T, p program, back *read.Program, got []canon) int {
	t.Helper()
	if p.expect.Compensation == gcode.CompControl {
		return compareCompensated(t, p, back, got)
	}
	// A move that goes nowhere is not printed by all; compare those that move.
	k := 0
	for _, m := range back.Moves {
		if k == len(got) {
			t.Fatalf("%s: the interpreter stops after %d motions", p.name, k)
		}
		c := got[k]
		k++
		if c.kind != m.Kind || math.Abs(c.x-m.To.X) > printed || math.Abs(c.y-m.To.Y) > printed || m.KnownZ && math.Abs(c.z-m.ToZ) > printed {
			t.Fatalf("%s, line %d: we read %v, the interpreter %+v", p.name, m.LineNo, m, c)
		}
		if r := map[byte]float64{'A': c.a, 'B': c.b, 'C': c.c}[back.Rotary]; back.Rotary != 0 && math.Abs(r-m.ToR) > printed {
			t.Fatalf("%s, line %d: we read %v, the interpreter turns to %g", p.name, m.LineNo, m, r)
		}
		if m.Kind == read.Arc && (math.Abs(c.cx-m.Center.X) > printed || math.Abs(c.cy-m.Center.Y) > printed || (c.rot > 0) != m.CCW) {
			t.Fatalf("%s, line %d: we read the arc %v, the interpreter %+v", p.name, m.LineNo, m, c)
		}
	}
	if k != len(got) {
		t.Fatalf("%s: the interpreter makes %d motions, we read %d", p.name, len(got), k)
	}
	return k
}

// compareCompensated: under G41 and G42 with the tool's radius the interpreter moves the
// path itself; every arc must keep its center, and its radius change by the tool's
// radius towards the side the tool is on.
func compareCompensated(t *testing.T, p program, back *read.Program, got []canon) int {
	t.Helper()
	var want []read.Move
	for _, m := range back.Moves {
		if m.Kind == read.Arc && m.Comp != read.Off {
			want = append(want, m)
		}
	}
	n := 0
	for _, c := range got {
		if n == len(want) || c.kind != read.Arc {
			continue
		}
		m := want[n]
		if (plane.Point{X: c.cx, Y: c.cy}).Dist(m.Center) > 2*printed {
			continue // an arc about a corner between two blocks
		}
		r, written := math.Hypot(c.x-c.cx, c.y-c.cy), m.To.Dist(m.Center)
		side := 1.0 // on the far side of the center, or nearer to it
		if (m.Comp == read.Left) == m.CCW {
			side = -1
		}
		// The interpreter moves the center along with a mismatch of the end radii.
		if math.Abs(r-(written+side*p.expect.Radius)) > 0.002 {
			t.Fatalf("%s, line %d: the arc of radius %.4f is run at %.4f, tool radius %g", p.name, m.LineNo, written, r, p.expect.Radius)
		}
		n++
	}
	if n < len(want) {
		t.Fatalf("%s: the interpreter ran %d of %d compensated arcs; the next is at line %d", p.name, n, len(want), want[n].LineNo)
	}
	return n
}

// makeJob runs the job and returns its programs besides.
func makeJob(t testing.TB, s *spec.Spec) (*Pack, []program) {
	t.Helper()
	p, j, err := work(s, options())
	if err != nil {
		t.Fatal(err)
	}
	return p, j.programs
}
