package gcode_test

import (
	"bytes"
	"flag"
	"fmt"
	"math"
	"os"
	"path/filepath"
	"strings"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/gcode/write"

	"pgregory.net/rapid"
)

var update = flag.Bool("update", false, "write the golden programs again")

// job is an operation on a part.
type job struct {
	part gcode.Part
	op   gcode.Operation
	m    gcode.Machine
	eps  float64
}

// program plans, prints, reads back.
func (j job) program(t fatal) (gcode.Program, []byte, *read.Program) {
	p, err := gcode.Plan(j.part, j.op, j.m)
	if err != nil {
		t.Fatalf("%s %s: %v", j.op.Process, j.op.Compensation, err)
	}
	b := write.Program(p)
	back, err := read.Parse(b)
	if err != nil {
		t.Fatalf("%s %s: %v", j.op.Process, j.op.Compensation, err)
	}
	return p, b, back
}

type fatal interface {
	Fatalf(string, ...any)
}

func (j job) verify(t fatal, back *read.Program) gcode.Result {
	r, err := gcode.Verify(back, gcode.Expected(j.part, j.op, j.m, j.eps))
	if err != nil {
		t.Fatalf("verify: %v", err)
	}
	return r
}

// jobs are all kinds of programs: processes, compensation, directions, senses, units,
// centers, lines.
func jobs() map[string]job {
	all := map[string]job{}
	for _, o := range []oval{ellipse, eccentric, {ellipse.cx, ellipse.cy, ellipse.a, ellipse.b, 0, -1}} {
		for _, c := range []gcode.Compensation{gcode.CompPath, gcode.CompWear, gcode.CompControl} {
			for _, d := range []gcode.Direction{gcode.Climb, gcode.Conventional} {
				op := mill(o)
				op.Compensation, op.Direction = c, d
				all[fmt.Sprintf("mill %v %s %s", o, c, d)] = job{part(o), op, machine(), 0.002}
			}
			op := wire(o)
			op.Compensation = c
			all[fmt.Sprintf("wire %v %s", o, c)] = job{part(o), op, machine(), 0.002}
		}
	}
	absolute := job{part(ellipse), mill(ellipse), machine(), 0.002}
	absolute.m.AbsoluteArcs, absolute.m.BlockNumbers = true, false
	all["absolute centers, no numbers"] = absolute
	chords := job{part(ellipse), mill(ellipse), machine(), 0.004}
	chords.op.Path = ellipse.chords(720)
	all["lines"] = chords
	far := job{part(ellipse), wire(ellipse), machine(), 0.002}
	far.op.StartHole.At = 20
	all["start hole far from the tab"] = far
	all["inch"] = inch()
	spring := job{part(ellipse), wire(ellipse), machine(), 0.002}
	spring.op.Offsets = []float64{0.19, 0.13, 0.13}
	all["spring pass"] = spring
	return all
}

// inch is a part in inches.
func inch() job {
	o := oval{0.1, 0, 2, 1.5, 0, 1}
	j := job{part(o), mill(o), gcode.Machine{Decimals: 4, ArcMismatch: 0.0002, BlockNumbers: true, SafeZ: 0.2}, 0.0001}
	j.part.Inch, j.part.Thickness, j.part.BlankDiameter, j.part.ClampRadius = true, 0.5, 5, 0.6
	j.op.ToolDiameter, j.op.Feed, j.op.PlungeFeed, j.op.StepDown, j.op.Stock = 0.5, 12, 3, 0.2, []float64{0.02, 0}
	return j
}

// Every kind of program does what its operation says, and is read back as planned.
func TestPrograms(t *testing.T) {
	for name, j := range jobs() {
		t.Run(name, func(t *testing.T) {
			p, b, back := j.program(t)
			if err := gcode.Differs(p, back); err != nil {
				t.Error(err)
			}
			r := j.verify(t, back)
			for _, f := range r.Failures {
				t.Errorf("line %d: %s: %s", f.Line, f.ID, f.Text)
			}
			if !(r.Deviation.Bound > 0 && r.Deviation.Bound <= j.eps) || !(r.Clearance > 0) || !(r.ArcMismatch <= j.m.ArcMismatch) {
				t.Errorf("bound %g, clearance %g, mismatch %g", r.Deviation.Bound, r.Clearance, r.ArcMismatch)
			}
			if r.Bytes != len(b) || r.Blocks == 0 || !(r.Seconds > 0) || !r.Finish.Closed(0) || back.Longest >= 120 {
				t.Errorf("%d bytes of %d, %d blocks, %g s, finish closed: %v, longest line %d",
					r.Bytes, len(b), r.Blocks, r.Seconds, r.Finish.Closed(0), back.Longest)
			}
			format(t, b, j)
		})
	}
}

// format holds what every program has, whatever it cuts.
func format(t *testing.T, b []byte, j job) {
	t.Helper()
	text := string(b)
	unit := "G21"
	if j.part.Inch {
		unit = "G20"
	}
	want := []string{"%\nO000", unit + " G17 G90 G40", "G54\n", "M30\n%\n"}
	refuse := []string{"\r", "R", "G02", " ,"}
	if j.op.Process == gcode.Wire {
		want = append(want, "M00 (CLAMP THE CAM", "M00 (THREAD THE WIRE)")
		refuse = append(refuse, "G43", "G49", "G80", "M03", " S", "Z")
	} else {
		want = append(want, "G49 G80 G94", "G43 G0 Z", "S3000 M03", "M05\n")
	}
	for _, w := range want {
		if !strings.Contains(text, w) {
			t.Errorf("%q is missing", w)
		}
	}
	words := stripComments(text)
	for _, w := range refuse {
		if strings.Contains(words, w) {
			t.Errorf("%q must not stand in the program", w)
		}
	}
}

func stripComments(s string) string {
	var out strings.Builder
	depth := 0
	for _, c := range s {
		switch {
		case c == '(':
			depth++
		case c == ')':
			depth--
		case depth == 0:
			out.WriteRune(c)
		}
	}
	return out.String()
}

// Golden programs: changes of the text are seen and decided, not slipped in.
func TestGolden(t *testing.T) {
	m := job{part(eccentric), mill(eccentric), machine(), 0.002}
	m.op.Path, m.op.Compensation, m.op.Stock = eccentric.fitted(2), gcode.CompControl, []float64{0.3, 0}
	m.part.Title = "Chalk stick lift"
	w := job{part(eccentric), wire(eccentric), machine(), 0.002}
	w.op.Path, w.part.Title = eccentric.fitted(2), "Chalk stick lift"
	for name, j := range map[string]job{"mill-control": m, "wire-path": w} {
		file := filepath.Join("testdata", name+".nc")
		_, got, back := j.program(t)
		if fs := j.verify(t, back).Failures; len(fs) > 0 {
			t.Errorf("%s: %v", name, fs)
		}
		if *update {
			if err := os.WriteFile(file, got, 0o644); err != nil {
				t.Fatal(err)
			}
		}
		want, err := os.ReadFile(file)
		if err != nil {
			t.Fatal(err)
		}
		if !bytes.Equal(got, want) {
			t.Errorf("%s differs from what is written now; go test -update after a wanted change", file)
		}
	}
}

// Any size, start, offset and tab: a plan is proven or refused with a reason, never
// wrong. The contour is convex and the blank large, so all plans must succeed.
func TestAnyPlan(t *testing.T) {
	if err := flag.Set("rapid.checks", "30"); err != nil {
		t.Fatal(err)
	}
	rapid.Check(t, func(t *rapid.T) {
		b := rapid.Float64Range(25, 45).Draw(t, "b")
		o := oval{rapid.Float64Range(-8, 8).Draw(t, "cx"), rapid.Float64Range(-8, 8).Draw(t, "cy"),
			b * rapid.Float64Range(1, 1.4).Draw(t, "ratio"), b, 0, rapid.SampledFrom([]float64{1, -1}).Draw(t, "turn")}
		comp := rapid.SampledFrom([]gcode.Compensation{gcode.CompPath, gcode.CompWear, gcode.CompControl}).Draw(t, "compensation")
		p, op := part(o), mill(o)
		p.BlankDiameter, p.ClampRadius, p.StartAt = 170, 10, rapid.Float64Range(0, 360).Draw(t, "start")
		op.Stock, op.StepDown, op.Path = []float64{rapid.Float64Range(0, 1).Draw(t, "stock"), 0}, 0, o.fitted(36)
		if rapid.Bool().Draw(t, "wire") {
			op = wire(o)
			op.Path = o.fitted(36)
			op.Tab = gcode.Tab{Width: rapid.Float64Range(2, 8).Draw(t, "tab"), At: rapid.Float64Range(0, 360).Draw(t, "at")}
			op.StartHole = gcode.StartHole{Radius: 85, At: op.Tab.At + rapid.Float64Range(-30, 30).Draw(t, "hole")}
		}
		op.Compensation = comp
		j := job{p, op, machine(), 0.004}
		plan, _, back := j.program(t)
		if err := gcode.Differs(plan, back); err != nil {
			t.Fatal(err)
		}
		r := j.verify(t, back)
		if len(r.Failures) > 0 {
			t.Fatalf("%v: %+v", o, r.Failures[0])
		}
		if math.IsNaN(r.PathLength) || !r.Finish.Closed(0) {
			t.Fatalf("path length %g, finish closed %v", r.PathLength, r.Finish.Closed(0))
		}
	})
}
