package pack

import (
	"fmt"
	"math"
	"testing"

	"lobewright/gcode"
	"lobewright/gcode/read"
	"lobewright/synth"
	"lobewright/synth/spec"
)

// eccentric is a circle of radius base+arm whose center is arm from the camshaft axis: what a flat face that rises and falls by
// arm·(1 - cos θ) wants (the face stays tangent to a circle on a crank). Simple harmonic rise and fall of half a turn each are that lift.
func eccentric(t *testing.T, base, arm float64, control string) *spec.Spec {
	t.Helper()
	s, err := spec.Read("eccentric.yaml", fmt.Appendf(nil, `lobewright: 1
part: eccentric
units: mm
camshaft: {speed: 60, rotation: counterclockwise}
motion: {events: [{rise: %g, over: 180, law: simple-harmonic}, {fall: %g, over: 180, law: simple-harmonic}]}
follower: {kind: translating-flat, face_width: 50}
cam: {kind: plate, base_radius: %g, thickness: 8, bore: {diameter: 16, keyway: {width: 5, depth: 2.3, at: 0}}}
tolerance: {profile: 0.020, chord: 0.002}
control: {rotary_sense: tool%s}
blank: {diameter: 110, clamp_radius: 14}
operations:
  - {process: grind, tool: 1, tool_diameter: 60, spindle_speed: 6000, feed: 400, plunge_feed: 60, stock: [0.05, 0], start_at_cam_angle: 90}
`, 2*arm, 2*arm, base, control), synth.Vocabulary())
	if err != nil {
		t.Fatal(err)
	}
	return s
}

// The wheel's center runs on a circle of known radius about a known point, so how far every point of every spiral is from
// its path is a subtraction. The certificate is never below that and, where the grid does not count, at most 1.01 times it; and the
// radii at the joints are those of the circle's polar equation r = e·cos φ + √(R² - e²·sin² φ).
func TestEccentricCircleIsGround(t *testing.T) {
	t.Parallel()
	for _, c := range []struct {
		base, arm float64
		control   string
		grid      float64 // length: half a count of a radius, and of the arc a rotary word is off
	}{
		{30, 4, ", decimals: 6, rotary_decimals: 6", 2e-6},
		{26, 9, ", decimals: 6, rotary_decimals: 6", 2e-6},
		{30, 4, "", 1e-3},
		{30, 4, ", decimals: 4, rotary_decimals: 4, inverse_time: seconds", 1e-4},
	} {
		p, j, err := work(eccentric(t, c.base, c.arm, c.control), options())
		if err != nil {
			t.Fatal(err)
		}
		if !p.Passed {
			t.Fatalf("%+v: %+v", c, p.Report.Gates)
		}
		ring := c.base + c.arm + 30
		center := j.cam.Contour().At(0, 0).P
		for k := range 3 { // the center, as the mean of four points a quarter turn of the normal apart
			q := j.cam.Contour().At((k+1)/2, float64(90*(k+1))).P
			center.X, center.Y = center.X+q.X, center.Y+q.Y
		}
		center.X, center.Y = center.X/4, center.Y/4
		if off := math.Abs(center.Radius() - c.arm); off > 1e-9 {
			t.Fatalf("the contour's center is %.12g from the axis, wanted %g", center.Radius(), c.arm)
		}
		moves := turns(j.programs[0].data)
		moves = moves[6 : len(moves)-6]
		most := 0.0
		for i := 1; i < len(moves); i++ {
			a, b := moves[i-1], moves[i]
			for k := range 101 {
				u := float64(k) / 100
				sin, cos := math.Sincos((a[0] + (b[0]-a[0])*u) * math.Pi / 180)
				r := a[1] + (b[1]-a[1])*u
				most = math.Max(most, math.Abs(math.Hypot(r*cos-center.X, r*sin-center.Y)-ring))
			}
		}
		bound := j.programs[0].result.Cuts[1].Deviation.Bound
		if bound < most || bound > 1.01*most {
			t.Errorf("%+v: certified %.6g, the spirals are %.6g from the circle", c, bound, most)
		}
		for _, m := range moves {
			phi := m[0]*math.Pi/180 - math.Atan2(center.Y, center.X)
			if r := c.arm*math.Cos(phi) + math.Sqrt(ring*ring-math.Pow(c.arm*math.Sin(phi), 2)); math.Abs(r-m[1]) > 0.0021+c.grid {
				t.Errorf("%+v: at C%g the wheel is %g from the axis, the circle %g", c, m[0], m[1], r)
			}
		}
		back, err := read.Parse(j.programs[0].data)
		if err != nil {
			t.Fatal(err)
		}
		// A circle that is 2 µm larger is certified as that much farther off.
		x := j.programs[0].expect
		x.Curve = func(offset float64) gcode.Curve { return j.toolPath(offset + 0.002) }
		if r, err := gcode.Verify(back, x); err != nil || len(r.Failures) == 0 {
			t.Errorf("%+v: a contour 2 µm larger is not told apart: %v", c, err)
		}
	}
}
