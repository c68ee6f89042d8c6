package pack

import (
	"bytes"
	"math"
	"os"
	"regexp"
	"strconv"
	"strings"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/synth"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
)

// rowStop is the sample with some words changed.
func rowStop(t *testing.T, change ...string) *spec.Spec {
	t.Helper()
	return reworded(t, "row-stop", change...)
}

// reworded is a sample with some words changed, pair by pair.
func reworded(t *testing.T, sample string, change ...string) *spec.Spec {
	t.Helper()
	text, err := os.ReadFile(samplesFolder + "/" + sample + ".yaml")
	if err != nil {
		t.Fatal(err)
	}
	for i := 0; i < len(change); i += 2 {
		if !bytes.Contains(text, []byte(change[i])) {
			t.Fatalf("the sample does not hold %q", change[i])
		}
		text = bytes.ReplaceAll(text, []byte(change[i]), []byte(change[i+1]))
	}
	s, err := spec.Read(sample+".yaml", text, synth.Vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// turns are the moves under G93 of a program's last pass, read by nothing but a regular expression: rotary and
// radial words, and F.
func turns(data []byte) [][3]float64 {
	word := func(line, letter string) (float64, bool) {
		m := regexp.MustCompile(` ` + letter + `(-?[0-9.]+)`).FindStringSubmatch(line)
		if m == nil {
			return 0, false
		}
		v, err := strconv.ParseFloat(m[1], 64)
		return v, err == nil
	}
	var last, now [][3]float64
	inverse := false
	for _, line := range strings.Split(string(data), "\n") {
		if strings.HasPrefix(line, "(PASS") {
			last, now = now, nil
		}
		if strings.Contains(line, "G94") {
			inverse = false
		}
		inverse = inverse || strings.Contains(line, "G93")
		c, turned := word(line, "C")
		if x, ok := word(line, "X"); ok && turned {
			f, _ := word(line, "F")
			now = append(now, [3]float64{c, x, f})
		}
	}
	if len(now) == 0 {
		return last
	}
	return now
}

// On every machine, whichever way its table and the cam turn, the tool's center stands where a tool of its diameter leaves the
// stock: the least distance from the contour, sampled densely, is radius and stock, all along the spirals. And the
// times of the moves make the asked feed over the contour.
func TestPolarProgramsInThePlane(t *testing.T) {
	t.Parallel()
	for _, way := range []string{"clockwise", "counterclockwise"} {
		for _, sense := range map[string][]string{"clockwise": {"table"}, "counterclockwise": {"tool", "table"}}[way] {
			s := rowStop(t, "rotation: clockwise", "rotation: "+way, "rotary_sense: table", "rotary_sense: "+sense)
			p, j, err := work(s, options())
			if err != nil {
				t.Fatal(err)
			}
			if !p.Passed {
				t.Fatalf("%s, %s: %+v", way, sense, p.Report.Gates)
			}
			var contour []plane.Point
			length := 0.0
			for i, q := range j.cam.Contour().Pieces() {
				for k := range 1000 {
					contour = append(contour, j.cam.Contour().At(i, q.From+(q.To-q.From)*float64(k)/1000).P)
				}
			}
			for i := range contour {
				length += contour[i].Dist(contour[(i+1)%len(contour)])
			}
			for n, program := range j.programs {
				op := s.Operations[n]
				stock := op.Stock[len(op.Stock)-1]
				moves := turns(program.data)
				total, off, cut := 0.0, 0.0, 0
				for i := 1; i < len(moves); i++ {
					a, b := moves[i-1], moves[i]
					total += 1 / b[2]
					if i <= 6 || i > len(moves)-7 {
						continue // the slides
					}
					cut++
					for k := range 3 {
						u := float64(k) / 2
						polar := (a[0] + (b[0]-a[0])*u) * math.Pi / 180
						if sense == "table" {
							polar = -polar
						}
						center := plane.Polar(a[1]+(b[1]-a[1])*u, plane.Angle(polar))
						least := math.Inf(1)
						for _, q := range contour {
							least = math.Min(least, center.Dist(q))
						}
						off = math.Max(off, math.Abs(least-op.ToolDiameter/2-stock))
					}
				}
				if cut < 50 || off > j.chord+5e-5 {
					t.Errorf("%s, %s, %s: %d moves, up to %.5f from where the contour wants the tool", way, sense, program.name, cut, off)
				}
				// A turn, 4 degrees more, and slides of 22 mm at either end.
				over := total * op.Feed / (length + 2*math.Pi*stock)
				if over < 1.01 || over > 1.2 {
					t.Errorf("%s, %s, %s: the moves take %.4f of the time for one turn at the asked feed", way, sense, program.name, over)
				}
			}
		}
	}
}

// What is wrong in a program is found at its line, by the proof alone: the comparison with the plan is left out.
func TestPolarDamages(t *testing.T) {
	t.Parallel()
	_, j, err := work(rowStop(t), options())
	if err != nil {
		t.Fatal(err)
	}
	p := j.programs[0]
	back := func() *read.Program {
		b, err := read.Parse(p.data)
		if err != nil {
			t.Fatal(err)
		}
		return b
	}
	// A move in the middle of the steep part of the last pass.
	at := -1
	for i, m := range back().Moves {
		if m.Inverse && m.To.X > 57 && m.To.X < 60 {
			at = i
		}
	}
	if at < 0 {
		t.Fatal("no move on the rise")
	}
	for _, c := range []struct {
		name, id string
		spoil    func(b *read.Program, x *gcode.Expect)
	}{
		{"rotary word", "deviation", func(b *read.Program, _ *gcode.Expect) { b.Moves[at].ToR += 0.02; b.Moves[at+1].FromR += 0.02 }},
		{"radial word", "deviation", func(b *read.Program, _ *gcode.Expect) { b.Moves[at].To.X += 0.02; b.Moves[at+1].From.X += 0.02 }},
		{"missing block", "deviation", func(b *read.Program, _ *gcode.Expect) {
			b.Moves[at+1].From, b.Moves[at+1].FromR = b.Moves[at].From, b.Moves[at].FromR
			b.Moves = append(b.Moves[:at:at], b.Moves[at+1:]...)
		}},
		{"feed", "feed", func(b *read.Program, _ *gcode.Expect) { b.Moves[at].Feed *= 1.02 }},
		{"feed a minute", "words", func(b *read.Program, _ *gcode.Expect) { b.Moves[at].Inverse = false }},
		{"tool", "clearance", func(_ *read.Program, x *gcode.Expect) {
			x.Radius += 0.05
			for i := range x.Cuts {
				x.Cuts[i].Offset, x.Cuts[i].Stock = x.Cuts[i].Offset+0.05, x.Cuts[i].Stock+0.05
			}
		}},
		{"beside the axis", "words", func(b *read.Program, _ *gcode.Expect) { b.Moves[at].To.Y = 0.01 }},
		{"depth", "depth", func(b *read.Program, _ *gcode.Expect) {
			for i := range b.Moves {
				b.Moves[i].FromZ, b.Moves[i].ToZ = math.Max(b.Moves[i].FromZ, -12), math.Max(b.Moves[i].ToZ, -12)
			}
		}},
		{"speed", "rotary-speed", func(_ *read.Program, x *gcode.Expect) { x.Turning.Speed = 100 }},
		{"acceleration", "rotary-acceleration", func(_ *read.Program, x *gcode.Expect) { x.Turning.Rate = 0.01 }},
	} {
		b, x := back(), p.expect
		x.Cuts = append([]gcode.Cut(nil), x.Cuts...)
		c.spoil(b, &x)
		r, err := gcode.Verify(b, x)
		if err != nil {
			t.Fatalf("%s: %v", c.name, err)
		}
		found, line := false, false
		for _, f := range r.Failures {
			found = found || f.ID == c.id
			line = line || f.ID == c.id && at+1 < len(b.Moves) && f.Line >= b.Moves[at-1].LineNo && f.Line <= b.Moves[at+1].LineNo
		}
		if !found {
			t.Errorf("%s: no failure %s among %d: %+v", c.name, c.id, len(r.Failures), r.Failures)
		} else if !line && c.name != "tool" && c.name != "depth" && c.name != "speed" && c.name != "acceleration" {
			t.Errorf("%s: %s is found, but not beside line %d", c.name, c.id, b.Moves[at].LineNo)
		}
	}
	if r, err := gcode.Verify(back(), p.expect); err != nil || len(r.Failures) > 0 {
		t.Errorf("the program itself: %v, %+v", err, r.Failures)
	}
}

// Seconds under G93 are sixty over what is written otherwise, and are proven as such.
func TestInverseTimeInSeconds(t *testing.T) {
	t.Parallel()
	minutes, seconds := 0.0, 0.0
	for _, total := range []*float64{&minutes, &seconds} {
		change := []string{}
		if total == &seconds {
			change = []string{"rotary_sense: table", "rotary_sense: table, inverse_time: seconds"}
		}
		p, j, err := work(rowStop(t, change...), options())
		if err != nil || !p.Passed {
			t.Fatal(err)
		}
		for _, m := range turns(j.programs[1].data)[1:] {
			if total == &minutes {
				*total += 1 / m[2]
			} else {
				*total += m[2] / 60
			}
		}
	}
	if math.Abs(minutes-seconds) > 1e-3*minutes {
		t.Errorf("%g minutes one way, %g the other", minutes, seconds)
	}
}
