package pack

import (
	"fmt"
	"math"
	"math/rand"
	"strings"
	"testing"

	"lobewright/gcode/read"
	"lobewright/synth/gate"
	"lobewright/synth/plane"
)

// randomPolar draws a plate of a kind of follower, milled and ground on a rotary table.
func randomPolar(r *rand.Rand, kind string) string {
	body, _, _ := strings.Cut(randomKind(r, kind, false), "operations:\n")
	d := &dice{Rand: r}
	decimals := 3 + r.Intn(3)
	d.say("control: {rotary_sense: %s, rotary_words: %s, inverse_time: %s, decimals: %d, rotary_decimals: %d}\noperations:\n",
		d.of("tool", "table"), d.of("unwound", "modulo"), d.of("per_minute", "seconds"), decimals, 3+r.Intn(3))
	d.say("  - {process: mill, axes: polar, rotary_axis: %s, tool_diameter: %.3f, spindle_speed: 3000, feed: 250, plunge_feed: 80, step_down: 4, stock: [0.3, 0.1], direction: %s}\n",
		d.of("A", "B", "C"), d.mm(6, 16), d.of("climb", "conventional"))
	d.say("  - {process: grind, tool: 2, tool_diameter: %.3f, spindle_speed: 6000, feed: 400, plunge_feed: 80, stock: [0.04, 0], spring_passes: %d, direction: %s}\n",
		d.mm(20, 90), r.Intn(2), d.of("climb", "conventional"))
	return body + d.b.String()
}

// offContour is how far the last pass of a program as read leaves the tool's center from where its radius and the stock want it, at
// most, by sampling alone: the least distance from many chords of the contour, at points of spirals outside the slides.
func offContour(j *job, p program, diameter, stock float64) (off float64, points int) {
	var contour []plane.Point
	for i, q := range j.cam.Contour().Pieces() {
		n := 1 + int((q.To-q.From)*10)
		for k := range n {
			contour = append(contour, j.cam.Contour().At(i, q.From+(q.To-q.From)*float64(k)/float64(n)).P)
		}
	}
	back, err := read.Parse(p.data)
	if err != nil {
		return math.Inf(1), 0
	}
	last := p.result.Cuts[len(p.result.Cuts)-1]
	for _, m := range back.Moves {
		if m.LineNo < last.First || m.LineNo > last.Last || m.LineNo%3 != 0 {
			continue // every third spiral will do
		}
		by := m.ToR - m.FromR
		if j.spec.Control.RotaryModulo {
			by = math.Remainder(by, 360)
		}
		for k := range 3 {
			u := float64(k) / 2
			polar := (m.FromR + by*u) * math.Pi / 180
			if j.spec.Control.RotarySense == "table" {
				polar = -polar
			}
			center, least := plane.Polar(m.From.X+(m.To.X-m.From.X)*u, plane.Angle(polar)), math.Inf(1)
			for i := range contour {
				least = math.Min(least, toSegment(center, contour[i], contour[(i+1)%len(contour)]))
			}
			off, points = math.Max(off, math.Abs(least-diameter/2-stock)), points+1
		}
	}
	return off, points
}

// A random plate on a rotary table releases unless a gate of its geometry speaks or its path cannot be followed by one radial axis, and the
// tool goes where its certificate says, by sampling.
func TestRandomPolarRelease(t *testing.T) {
	t.Parallel()
	shape := onlyGates("pressure-angle", "undercut", "reach", "contact", "pivot", "arm", "wall", "blank", "swing")
	mine := func(g gate.Gate) bool {
		return shape(g) || g.ID == "program" && strings.Contains(g.Text, "meets the path twice")
	}
	count := 0
	for _, kind := range []string{"translating-roller", "translating-knife", "translating-mushroom", "translating-flat", "swinging-roller", "swinging-flat"} {
		for seed := range int64(2) {
			text := randomPolar(rand.New(rand.NewSource(52_000+seed)), kind)
			name := fmt.Sprintf("%s seed %d", kind, seed)
			j := passing(t, name, text, mine)
			if j == nil {
				continue
			}
			count++
			for i, q := range j.programs {
				o := j.spec.Operations[i]
				// The chords of the contour are off by up to 150·(0.1°)²/8 = 6e-5, more where it bends hard.
				off, points := offContour(j, q, o.ToolDiameter, o.Stock[len(o.Stock)-1])
				if points < 20 || off > q.result.Cuts[len(q.result.Cuts)-1].Deviation.Bound+1e-4 {
					t.Errorf("%s, %s: the tool is %.6f off at %d points, certified %.6f\n%s", name, q.name, off, points, q.result.Deviation.Bound, text)
				}
			}
		}
	}
	t.Logf("%d of 12 released", count)
	if count < 6 {
		t.Errorf("only %d of 12 released", count)
	}
}
