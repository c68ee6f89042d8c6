package pack

import (
	"bytes"
	"math"
	"math/rand"
	"regexp"
	"strings"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
)

// Whatever a control takes, every program of a plate and a groove keeps to it and is proven: arcs by center or radius, none flatter, shorter
// or longer than it allows, lines no longer than it reads.
func TestControlSettings(t *testing.T) {
	t.Parallel()
	r := rand.New(rand.NewSource(7))
	for i, name := range []string{"stick-lift", "lid-swing", "carton-shift", "label-dab", "stick-lift", "flap-press"} {
		s := readSample(t, samplesFolder+"/"+name+".yaml")
		c, unit := &s.Control, 1.0
		if s.Units == "inch" {
			unit = 1 / 25.4
		}
		c.RadiusArcs = i%2 == 0
		c.LargestRadius = unit * (60 + 200*r.Float64())
		c.LeastChord = unit * (0.02 + 0.3*r.Float64())
		c.SplitAngle = 90 + 90*r.Float64()
		c.LineLength = 64 + r.Intn(60)
		c.PathMode, c.PathTolerance = "blend", unit*0.001
		c.ProgramStart, c.ProgramEnd = []string{"G05.1 Q1", "M77"}, []string{"G05.1 Q0"}
		c.Semicolons = i%3 == 0
		p, j, err := work(s, options())
		if err != nil {
			t.Fatal(err)
		}
		if !p.Passed {
			for _, g := range j.gates {
				if !g.Pass {
					t.Errorf("%s: %s %s: %g against %g: %s", name, g.ID, g.Of, g.Value, g.Limit, g.Text)
				}
			}
			continue
		}
		for n, q := range j.programs {
			back, err := read.Parse(q.data, j.ownLines(n)...)
			if err != nil {
				t.Fatal(err)
			}
			arcs := 0
			for _, m := range back.Moves {
				if m.Kind != read.Arc {
					continue
				}
				arcs++
				a, b := m.From.Sub(m.Center), m.To.Sub(m.Center)
				sweep := math.Atan2(a.Cross(b), a.Dot(b)) * 180 / math.Pi
				if !m.CCW {
					sweep = -sweep
				}
				if sweep <= 0 || sweep > 1.03*c.SplitAngle || sweep > 180 || a.Norm() > c.LargestRadius || m.From.Dist(m.To) < c.LeastChord {
					t.Errorf("%s, line %d: an arc of %.4f degrees, radius %.4f, chord %.4f beyond %.4f, %.4f, %.4f", q.name, m.LineNo, sweep, a.Norm(), m.From.Dist(m.To), c.SplitAngle, c.LargestRadius, c.LeastChord)
				}
			}
			text := string(q.data)
			written := regexp.MustCompile(`\nN[^(;\n]* [IJ]-?[0-9]`).MatchString(text)
			if arcs < 10 || c.RadiusArcs == written || c.RadiusArcs != regexp.MustCompile(`\nN[^(;\n]* R[0-9]`).MatchString(text) {
				t.Errorf("%s: %d arcs, by radius: %v", q.name, arcs, c.RadiusArcs)
			}
			if strings.Contains(text, "(") == c.Semicolons || back.Longest > c.LineLength || back.PathMode != 64 || len(back.Own) != 3 {
				t.Errorf("%s: lines up to %d of %d, path mode %d, %d lines of the user's own", q.name, back.Longest, c.LineLength, back.PathMode, len(back.Own))
			}
		}
		share := 0.0
		for _, x := range p.Report.Budget.Shares {
			if x.Source == "path mode" {
				share = x.HalfWidth
			}
		}
		if share != c.PathTolerance {
			t.Errorf("%s: the budget holds %g for the path mode", name, share)
		}
	}
}

// Arcs that a control may take for something else, and settings that are not those of the spec, are refused at their line.
func TestArcFormIsHeld(t *testing.T) {
	s := readSample(t, samplesFolder+"/stick-lift.yaml")
	s.Control.ProgramStart = []string{"G05.1 Q1"}
	_, j, err := work(s, options())
	if err != nil {
		t.Fatal(err)
	}
	p := j.programs[0]
	line, longest := 0, 0.0
	back, err := read.Parse(p.data, j.ownLines(0)...)
	if err != nil {
		t.Fatal(err)
	}
	for _, m := range back.Moves {
		if d := m.From.Dist(m.Center); m.Kind == read.Arc && d > longest {
			line, longest = m.LineNo, d
		}
	}
	for _, c := range []struct {
		name, id string
		line     int // 0: not of a line
		limit    func(x *gcode.Expect)
		change   [2]string
	}{
		{name: "none"},
		{name: "radius", id: "arc-form", line: line, limit: func(x *gcode.Expect) { x.Limits.Radius = longest * 0.999 }},
		{name: "sweep", id: "arc-form", line: -1, limit: func(x *gcode.Expect) { x.Limits.Sweep = 20 }},
		{name: "chord", id: "arc-form", line: -1, limit: func(x *gcode.Expect) { x.Limits.Chord = 6 }},
		{name: "bytes", id: "bytes", limit: func(x *gcode.Expect) { x.Limits.Bytes = 5000 }},
		{name: "line", id: "line-length", limit: func(x *gcode.Expect) { x.Limits.Line = 50 }},
		{name: "path mode", id: "words", limit: func(x *gcode.Expect) { x.Path = gcode.Exact }},
		{name: "own line left out", id: "words", change: [2]string{"G05.1 Q1", ""}},
		{name: "own line twice", id: "words", change: [2]string{"G05.1 Q1", "G05.1 Q1\nG05.1 Q1"}},
	} {
		data := p.data
		if c.change[0] != "" {
			data = bytes.Replace(data, []byte(c.change[0]), []byte(c.change[1]), 1)
		}
		back, err := read.Parse(data, j.ownLines(0)...)
		if err != nil {
			t.Fatal(err)
		}
		x := p.expect
		if c.limit != nil {
			c.limit(&x)
		}
		r, err := gcode.Verify(back, x)
		if err != nil {
			t.Fatal(err)
		}
		found := c.id == "" && len(r.Failures) == 0
		for _, f := range r.Failures {
			found = found || f.ID == c.id && (c.line <= 0 || f.Line == c.line)
		}
		if !found {
			t.Errorf("%s: failures %+v", c.name, r.Failures)
		}
	}
	if _, err := read.Parse(p.data); err == nil {
		t.Error("a line that was not declared must not be read")
	}
}

// A wire's slots hold the lines of the spec, in the places that the program names.
func TestWireSlots(t *testing.T) {
	s := reworded(t, "stick-lift", "offsets: [0.190", "slots: {thread: M60, cut_wire: M50, conditions: [S11, S12, S13]}, offsets: [0.190")
	p, j, err := work(s, options())
	if err != nil || !p.Passed {
		t.Fatal(err, p)
	}
	var got []string
	for _, l := range strings.Split(string(j.programs[1].data), "\n") {
		for _, own := range j.ownLines(1) {
			if strings.HasSuffix(l, " "+own) {
				got = append(got, own)
			}
		}
	}
	// Rough, two skims back and forth, then the tab by each pass again.
	want := "M60 S11 S12 S13 S13 S11 S12 S13 M50"
	if strings.Join(got, " ") != want {
		t.Errorf("lines of the user's own: %v, want %s", got, want)
	}
}
