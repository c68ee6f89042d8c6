package gcode_test

import (
	"strings"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/gcode/write"
)

// Whatever program can be read, Verify comes back with a verdict; one without
// failures has every cut.
func FuzzVerify(f *testing.F) {
	m, w := plainMill(), plainWire()
	m.op.Stock, m.op.StepDown, m.op.Compensation = []float64{0}, 0, gcode.CompControl
	for _, j := range []job{m, w} {
		p, err := gcode.Plan(j.part, j.op, j.m)
		if err != nil {
			f.Fatal(err)
		}
		text := write.Program(p)
		f.Add(text, j.op.Process == gcode.Wire)
		f.Add([]byte(strings.ReplaceAll(string(text), "G2", "G3")), j.op.Process == gcode.Wire)
		f.Add([]byte(strings.ReplaceAll(string(text), "G90", "G91")), j.op.Process == gcode.Wire)
		f.Add([]byte(strings.ReplaceAll(string(text), "G1 ", "G0 ")), j.op.Process == gcode.Mill)
	}
	f.Fuzz(func(t *testing.T, data []byte, wire bool) {
		back, err := read.Parse(data)
		if err != nil {
			return
		}
		j := m
		if wire {
			j = w
		}
		r, err := gcode.Verify(back, gcode.Expected(j.part, j.op, j.m, j.eps))
		if err != nil {
			t.Fatal(err)
		}
		if len(r.Failures) == 0 && (len(r.Cuts) == 0 || !(r.Deviation.Bound <= j.eps)) {
			t.Fatalf("no failures, %d cuts, bound %g", len(r.Cuts), r.Deviation.Bound)
		}
	})
}

// A wire program without a feed leaves it to the generator, and has no time.
func TestWireWithoutFeed(t *testing.T) {
	j := plainWire()
	j.op.Feed = 0
	_, text, back := j.program(t)
	if strings.Contains(stripComments(string(text)), "F") {
		t.Error("an F word stands in a program without a feed")
	}
	if r := j.verify(t, back); len(r.Failures) > 0 || r.Seconds != 0 {
		t.Errorf("failures %v, %g s", r.Failures, r.Seconds)
	}
}
