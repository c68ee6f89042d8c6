package pack

import (
	"fmt"
	"math"
	"math/rand"
	"testing"
)

// smooth laws, without a jump of acceleration.
func (d *dice) smoothLaw() string {
	return d.of("cycloidal", "modified-sine", "modified-trapezoidal", "polynomial-3-4-5", "polynomial-4-5-6-7")
}

// randomKind draws a spec of a kind of follower in a plate or a groove, in mm.
func randomKind(r *rand.Rand, kind string, groove bool) string {
	d := &dice{Rand: r}
	base, lift := d.mm(35, 70), d.mm(3, 10)
	d.say("lobewright: 1\npart: random\nunits: mm\ncamshaft: {speed: %d, rotation: %s}\n", 30+d.Intn(200), d.of("clockwise", "counterclockwise"))
	rise, fall := 80+d.Intn(70), 80+d.Intn(70)
	d.say("motion:\n  start_at_cam_angle: %d\n  events:\n    - {dwell: %d}\n    - {rise: %.3f, over: %d, law: %s}\n    - {dwell: %d}\n    - {fall: %.3f, over: %d, law: %s}\n    - {dwell: rest}\n",
		d.Intn(360), 5+d.Intn(30), lift, rise, d.smoothLaw(), 1+d.Intn(20), lift, fall, d.smoothLaw())
	roller := d.mm(8, 14)
	side := d.of("above", "below")
	switch kind {
	case "translating-knife":
		d.say("follower: {kind: %s, offset: %.3f}\n", kind, d.mm(-8, 8))
	case "translating-mushroom":
		d.say("follower: {kind: %s, face_radius: %.3f, head_diameter: %.3f, offset: %.3f}\n", kind, d.mm(30, 90), d.mm(30, 50), d.mm(-6, 6))
	case "translating-flat":
		d.say("follower: {kind: %s, face_width: %.3f}\n", kind, d.mm(20, 60))
	case "swinging-roller":
		arm := d.mm(1.1, 1.6) * base
		d.say("follower: {kind: %s, roller_diameter: %.3f, arm_length: %.3f, pivot_distance: %.3f, side: %s}\n", kind, 2*roller, arm, math.Hypot(arm, base+roller)*d.mm(0.95, 1.05), side)
	case "swinging-flat":
		d.say("follower: {kind: %s, pivot_distance: %.3f, face_offset: %.3f, face: {from: %.3f, to: %.3f}, side: %s}\n", kind, d.mm(2, 3)*base, d.mm(-8, 8), 0.5*base, 3.5*base, side)
	default:
		d.say("follower: {kind: %s, roller_diameter: %.3f, offset: %.3f}\n", kind, 2*roller, d.mm(-8, 8))
	}
	outside := 2 * (base + 3*roller + 3*lift + 10)
	tool := d.mm(6, 16)
	stock := "[0.3, 0]"
	if groove {
		d.say("cam: {kind: groove, base_radius: %.3f, thickness: 20, groove_depth: %.3f, clearance: 0.05, outside_diameter: %.3f, datum: none}\n", base, d.mm(4, 12), outside)
		tool, stock = 0, "[0]"
	} else {
		d.say("cam: {kind: plate, base_radius: %.3f, thickness: 10, datum: none}\n", base)
	}
	d.say("limits: {pressure_angle: 60}\ntolerance: {profile: 0.03, chord: 0.003}\nblank: {diameter: %.3f, clamp_radius: 8}\noperations:\n", outside)
	if groove { // the roller's diameter as it was printed, and the clearance
		text := spec1(roller)
		d.say("  - {process: mill, tool_diameter: %.3f, spindle_speed: 3000, feed: 250, plunge_feed: 80, step_down: 3, stock: %s}\n", text+0.05, stock)
		return d.b.String()
	}
	d.say("  - {process: mill, tool_diameter: %.3f, spindle_speed: 3000, feed: 250, plunge_feed: 80, step_down: 4, stock: %s, direction: %s}\n", tool, stock, d.of("climb", "conventional"))
	return d.b.String()
}

// spec1 is the diameter of a roller as a spec prints it.
func spec1(roller float64) float64 { return math.Round(2*roller*1000) / 1000 }

// A random cam of any kind releases unless a gate of its own geometry speaks, and then what
// is written is where the certificate says, and the follower's errors on it are small.
func TestRandomKindsRelease(t *testing.T) {
	t.Parallel()
	mine := onlyGates("pressure-angle", "undercut", "undercut-outer", "reach", "contact", "swing", "pivot", "arm", "wall", "blank")
	for _, c := range []struct {
		kind   string
		groove bool
	}{{"translating-knife", false}, {"translating-mushroom", false}, {"translating-flat", false}, {"swinging-roller", false}, {"swinging-flat", false},
		{"translating-roller", true}, {"swinging-roller", true}} {
		count := 0
		const specs = 4
		for seed := range int64(specs) {
			text := randomKind(rand.New(rand.NewSource(31_000+seed)), c.kind, c.groove)
			j := passing(t, fmt.Sprintf("%s seed %d", c.kind, seed), text, mine)
			if j == nil {
				continue
			}
			count++
			for _, w := range j.outline.paths {
				if d := farthest(w.exact, w.path); d > w.deviation.Bound+3e-5 {
					t.Errorf("%s seed %d, %s: sampled deviation %v, certified %v\n%s", c.kind, seed, w.curve, d, w.deviation.Bound, text)
				}
			}
			for _, u := range j.unknown {
				t.Errorf("%s seed %d: %s\n%s", c.kind, seed, u.Text, text)
			}
			for curve, r := range j.follows {
				// A normal error d moves the lift by d over the cosine of the pressure angle, of
				// an arm by that over its length.
				unit := 1.0
				if j.spec.Follower.Swings() {
					unit = 180 / math.Pi / 40
				}
				if most := 3 * j.chord * unit; r.err.Lift > most {
					t.Errorf("%s seed %d, %s: the follower's lift is off by %v\n%s", c.kind, seed, curve, r.err.Lift, text)
				}
			}
		}
		if count < 2 {
			t.Errorf("%s, groove %v: only %d of %d released", c.kind, c.groove, count, specs)
		}
	}
}
