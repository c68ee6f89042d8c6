package pack

import (
	"fmt"
	"math"
	"math/rand"
	"strings"
	"testing"

	"lobewright/gcode/read"
	"lobewright/synth"
	"lobewright/synth/spec"
)

// toolPose is where a tool's axis stands in the cam frame: its polar angle in radians, how far
// it is beside that radial line towards growing polar angle, and its height from the datum end.
type toolPose struct{ polar, beside, height float64 }

// poses are the feed moves of a barrel's program at its full depth, as pairs of poses. Seen on
// the marked face a table that turns counterclockwise carries the work past the tool, which thus
// goes clockwise over it. With Z up and the datum end at the left, Y (rotary A) points away
// from growing polar angle; with rotary B, X points towards it (right-handed axes).
func poses(p *read.Program, table bool) [][2]toolPose {
	deepest := 0.0
	for _, m := range p.Moves {
		deepest = math.Min(deepest, m.ToZ)
	}
	var all [][2]toolPose
	for _, m := range p.Moves {
		if m.Kind != read.Line || !m.Inverse || m.FromZ != deepest || m.ToZ != deepest {
			continue
		}
		pose := func(x, y, r float64) toolPose {
			q := toolPose{r * math.Pi / 180, -y, x}
			if p.Rotary == 'B' {
				q.beside, q.height = x, y
			}
			if table {
				q.polar = -q.polar
			}
			return q
		}
		all = append(all, [2]toolPose{pose(m.From.X, m.From.Y, m.FromR), pose(m.To.X, m.To.Y, m.ToR)})
	}
	return all
}

// away is the distance of a point from the tool's axis somewhere along a move.
func (a toolPose) away(b toolPose, u, x, y, z float64) float64 {
	p, o, h := a.polar+(b.polar-a.polar)*u, a.beside+(b.beside-a.beside)*u, a.height+(b.height-a.height)*u
	s, c := math.Sincos(p)
	if x*c+y*s < 0 {
		return math.Inf(1)
	}
	return math.Hypot(y*c-x*s-o, z-h)
}

// A barrel's program cuts both walls to within the chord tolerance and the error its gate
// names, in space: points of the exact walls by the conjugate condition (the roller touches
// where its normal is square to its velocity seen from the cam), against every position of the
// tool in the file. Nothing of the planner, the certificate or the developed curves is used.
func TestBarrelWallsInSpace(t *testing.T) {
	t.Parallel()
	for _, c := range []struct{ turns, sense, axis, tool, shift string }{
		{"clockwise", "tool", "A", "16.04", "parallel"},
		{"counterclockwise", "table", "A", "16.04", "parallel"},
		{"clockwise", "table", "B", "14", "parallel"},
		{"counterclockwise", "tool", "A", "14", "parallel"},
		{"clockwise", "tool", "A", "15.5", "rotary"},
		{"counterclockwise", "table", "B", "15.5", "rotary"},
	} {
		name := strings.Join([]string{c.turns, c.sense, c.axis, c.tool, c.shift}, " ")
		stock := "[0.1, 0]"
		if c.tool == "16.04" {
			stock = "[0]"
		}
		s, err := spec.Read("barrel.yaml", fmt.Appendf(nil, `lobewright: 1
part: barrel
units: mm
camshaft: {speed: 60, rotation: %s}
motion:
  events: [{dwell: 30}, {rise: 24, over: 120, law: modified-sine}, {dwell: 20}, {fall: 24, over: 140, law: polynomial-4-5-6-7}, {dwell: rest}]
follower: {kind: translating-roller, roller_diameter: 16}
cam: {kind: barrel, radius: 52, length: 80, groove_depth: 9, clearance: 0.04, track_position: 26, datum: none}
tolerance: {profile: 0.04, chord: 0.002}
control: {rotary_sense: %s}
blank: {diameter: 104}
operations:
  - {process: mill, rotary_axis: %s, tool_diameter: %s, shift: %s, spindle_speed: 2400, feed: 240, plunge_feed: 60, step_down: 5, stock: %s}
`, c.turns, c.sense, c.axis, c.tool, c.shift, stock), synth.Vocabulary())
		if err != nil {
			t.Fatal(err)
		}
		p, j, err := work(s, options())
		if err != nil {
			t.Fatal(err)
		}
		if !p.Passed {
			for _, g := range j.gates {
				if !g.Pass {
					t.Errorf("%s: gate %s: %s", name, g.ID, g.Text)
				}
			}
			continue
		}
		back, err := read.Parse(j.programs[0].data)
		if err != nil {
			t.Fatal(err)
		}
		cuts := poses(back, c.sense == "table")
		if len(cuts) < 100 {
			t.Fatalf("%s: only %d moves at full depth", name, len(cuts))
		}
		allowed := j.chord + j.wallShift() + 1e-6
		radius, half, sign := s.Operations[0].ToolDiameter/2, 8.02, 1.0
		if c.turns == "counterclockwise" {
			sign = -1
		}
		left, gouged := 0.0, 0.0
		for deg := 0.0; deg < 360; deg += 2.5 {
			l := j.cam.LiftAt(deg)
			for _, along := range []float64{43, 47.5, 52} {
				long := math.Hypot(along, l.V) // the track's slope is s'/along
				for _, wall := range []float64{-1, 1} {
					across := -wall * half * l.V / long * sign
					height := 26 + l.S + wall*half*along/long
					sin, cos := math.Sincos(sign * deg * math.Pi / 180)
					x, y := along*cos-across*sin, along*sin+across*cos
					least := math.Inf(1)
					for _, m := range cuts {
						best, at := math.Inf(1), 0.0
						n := 4 + math.Ceil(math.Abs(m[1].polar-m[0].polar)/0.02)
						for k := 0.0; k <= n; k++ {
							if d := m[0].away(m[1], k/n, x, y, height); d < best {
								best, at = d, k/n
							}
						}
						if best > radius+1 {
							continue
						}
						lo, hi := math.Max(0, at-1/n), math.Min(1, at+1/n)
						for range 40 { // ternary search
							a, b := lo+(hi-lo)/3, hi-(hi-lo)/3
							if m[0].away(m[1], a, x, y, height) < m[0].away(m[1], b, x, y, height) {
								hi = b
							} else {
								lo = a
							}
						}
						least = math.Min(least, m[0].away(m[1], (lo+hi)/2, x, y, height))
					}
					left, gouged = math.Max(left, least-radius), math.Max(gouged, radius-least)
				}
			}
		}
		t.Logf("%s: %d moves, %.5f left, %.5f gouged, allowed %.5f", name, len(cuts), left, gouged, allowed)
		if left > allowed || gouged > allowed {
			t.Errorf("%s: %.5f of the walls is left, %.5f is cut away; allowed %.5f", name, left, gouged, allowed)
		}
	}
}

// randomBarrel draws a barrel cam: with dwells or none, beginning anywhere, at the bottom or the
// top, cut by a tool of the groove's width or a narrower one, shifted either way.
func randomBarrel(r *rand.Rand) string {
	d := &dice{Rand: r}
	radius, lift, roller := d.mm(35, 70), d.mm(5, 30), d.mm(8, 20)
	depth, clearance := d.mm(0.1, 0.2)*radius, 0.02
	law := func() string { return d.smoothLaw() }
	rise := fmt.Sprintf("{rise: %.3f, over: %d, law: %s}", lift, 100+d.Intn(60), law())
	fall := fmt.Sprintf("{fall: %.3f, over: %d, law: %s}", lift, 100+d.Intn(60), law())
	events, start := fmt.Sprintf("[{dwell: %d}, %s, {dwell: %d}, %s, {dwell: rest}]", 5+d.Intn(25), rise, 1+d.Intn(10), fall), 0.0
	switch d.Intn(3) {
	case 0:
		events = fmt.Sprintf("[{rise: %.3f, over: 170, law: %s}, {fall: %.3f, over: 190, law: %s}]", lift, law(), lift, law())
	case 1:
		events, start = fmt.Sprintf("[%s, {dwell: 10}, %s, {dwell: rest}]", fall, rise), math.Round(lift*1000)/1000
	}
	d.say("lobewright: 1\npart: random\nunits: mm\ncamshaft: {speed: %d, rotation: %s}\n", 30+d.Intn(200), d.of("clockwise", "counterclockwise"))
	d.say("motion:\n  start_at_cam_angle: %d\n  start_lift: %g\n  events: %s\n", d.Intn(360), start, events)
	d.say("follower: {kind: translating-roller, roller_diameter: %.3f}\n", roller)
	d.say("cam: {kind: barrel, radius: %.3f, length: 120, groove_depth: %.3f, clearance: %g, track_position: 40, datum: none}\n", radius, depth, clearance)
	d.say("limits: {pressure_angle: 55}\ntolerance: {profile: 0.04, chord: 0.003}\ncontrol: {rotary_sense: %s}\nblank: {diameter: %.3f}\n", d.of("tool", "table"), 2*math.Round(radius*1000)/1000)
	tool, stock, shift := spec1(roller/2)+clearance, "[0]", "parallel"
	if d.Intn(2) == 0 {
		tool, stock, shift = tool-1, "[0.2, 0]", d.of("parallel", "rotary")
	}
	d.say("operations:\n  - {process: mill, rotary_axis: %s, tool_diameter: %.3f, shift: %s, spindle_speed: 2000, feed: 200, plunge_feed: 60, step_down: 4, stock: %s, direction: %s}\n",
		d.of("A", "B"), tool, shift, stock, d.of("climb", "conventional"))
	return d.b.String()
}

// A random barrel releases unless a gate of its own geometry speaks; then every curve is where
// the certificate says, and the follower's lift on it is right.
func TestRandomBarrelsRelease(t *testing.T) {
	t.Parallel()
	mine := onlyGates("pressure-angle", "undercut", "track", "wall-error")
	count := 0
	const specs = 8
	for seed := range int64(specs) {
		text := randomBarrel(rand.New(rand.NewSource(77_000 + seed)))
		j := passing(t, fmt.Sprintf("seed %d", seed), text, mine)
		if j == nil {
			continue
		}
		count++
		for _, w := range j.outline.paths {
			if d := farthest(w.exact, w.path); d > w.deviation.Bound+3e-5 {
				t.Errorf("seed %d, %s: sampled deviation %v, certified %v\n%s", seed, w.curve, d, w.deviation.Bound, text)
			}
		}
		for _, u := range j.unknown {
			t.Errorf("seed %d: %s\n%s", seed, u.Text, text)
		}
		for curve, r := range j.follows {
			if r.err.Lift > 3*j.chord {
				t.Errorf("seed %d, %s: the follower's lift is off by %v\n%s", seed, curve, r.err.Lift, text)
			}
		}
	}
	if count < specs/2 {
		t.Errorf("only %d of %d released", count, specs)
	}
	t.Logf("%d of %d random barrels released", count, specs)
}
