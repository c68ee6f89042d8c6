package pack

import (
	"fmt"
	"math"
	"strings"
	"testing"

	"lobewright/gcode/read"
	"lobewright/synth"
	"lobewright/synth/spec"
)

// What an operation says of its passes is in the program as it is read back: the blank is taken down
// in steps no wider than asked, the last pass is run again, coolant and program number are
// there, and on every arc the feed is held where the tool touches: the center's speed times the
// contour's radius over the center's (elementary).
func TestPassSettings(t *testing.T) {
	s, err := spec.Read("passes.yaml", []byte(`lobewright: 1
part: passes
units: mm
camshaft: {speed: 180, rotation: clockwise}
motion:
  events: [{dwell: 60}, {rise: 14, over: 90, law: modified-sine}, {dwell: 40}, {fall: 14, over: 120, law: polynomial-3-4-5}, {dwell: rest}]
follower: {kind: translating-roller, roller_diameter: 22}
cam: {kind: plate, base_radius: 45, thickness: 12, datum: none}
tolerance: {profile: 0.020, chord: 0.002}
blank: {diameter: 140}
operations:
  - {process: mill, tool: 3, tool_diameter: 16, spindle_speed: 3000, feed: 300, plunge_feed: 80, step_down: 6, stock: [0.4, 0], step_over: 0.4,
     spring_passes: 1, overlap: 7, breakthrough: 1.5, flute_length: 14, feed_at: contour, coolant: flood, program_number: 4711}
`), synth.Vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	p, j, err := work(s, options())
	if err != nil {
		t.Fatal(err)
	}
	if !p.Passed {
		for _, g := range j.gates {
			t.Logf("%s %v %v %v %s", g.ID, g.Pass, g.Value, g.Limit, g.Text)
		}
		t.Fatal("not released")
	}
	back, err := read.Parse(j.programs[0].data)
	if err != nil {
		t.Fatal(err)
	}
	if back.Number != 4711 {
		t.Errorf("program number %d", back.Number)
	}
	// The blank reaches 25 beyond the base circle; 0.4 of the tool are 6.4.
	stocks := map[string]int{}
	var order []string
	for _, c := range j.programs[0].result.Cuts {
		k := fmt.Sprintf("%.4g", c.Offset-8)
		if stocks[k] == 0 {
			order = append(order, k)
		}
		stocks[k]++
	}
	if got, want := strings.Join(order, " "), "19.6 13.2 6.8 0.4 0"; got != want {
		t.Errorf("stocks %s, want %s", got, want)
	}
	if stocks["0"] != 2 || stocks["0.4"] != 3 {
		t.Errorf("cuts of each stock %v: the last at full depth and once again, the others in steps of at most 6", stocks)
	}
	curved := 0
	for _, m := range back.Moves {
		if m.Kind != read.Rapid && (!m.Fluid || m.Spindle == 0) {
			t.Fatalf("line %d cuts without coolant", m.LineNo)
		}
		if m.Kind != read.Arc || m.FromZ != -13.5 {
			continue
		}
		r := m.From.Dist(m.Center)
		if r < 40 && r > 9 {
			continue // a lead
		}
		if m.CCW { // climb is clockwise about the contour: such an arc is hollow
			if want := 300 * r / (r + 8); math.Abs(m.Feed-want) > 2e-3 {
				t.Errorf("line %d: F%g on a hollow arc of radius %g, want %g", m.LineNo, m.Feed, r, want)
			}
			continue
		}
		curved++
		if want := 300 * r / (r - 8); math.Abs(m.Feed-want) > 2e-3 {
			t.Errorf("line %d: F%g on an arc of radius %g, want %g", m.LineNo, m.Feed, r, want)
		}
	}
	if curved < 20 {
		t.Errorf("only %d arcs were looked at", curved)
	}
	for _, f := range []struct{ from, to, want string }{
		{"M08", "M09", "coolant"}, {"F300.000", "F301.000", "fed at"},
	} {
		changed := []byte(strings.Replace(string(j.programs[0].data), f.from, f.to, 1))
		q, err := j.proveProgram(j.programs[0], changed)
		if err == nil && len(q.result.Failures) == 0 {
			t.Errorf("%s for %s was not noticed", f.to, f.from)
		}
	}
}
