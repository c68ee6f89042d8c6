package synth

import (
	"fmt"
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/spec"
)

// helical is a barrel of radius 50 with a groove 10 deep whose middle radius is 45; its
// rise has a long stretch of constant velocity at which the track climbs 30° at the middle.
func helical(t *testing.T, clockwise bool) *Cam {
	t.Helper()
	turns := map[bool]string{true: "clockwise", false: "counterclockwise"}[clockwise]
	build := func(lift float64) *Cam {
		law := fmt.Sprintf("%.17g, over: 120, law: modified-constant-velocity, constant_share: 0.6", lift)
		s, err := spec.Read("x.yaml", fmt.Appendf(nil, `lobewright: 1
part: x
units: mm
camshaft: {speed: 90, rotation: %s}
motion:
  events: [{dwell: 40}, {rise: %s}, {dwell: 40}, {fall: %s}, {dwell: rest}]
follower: {kind: translating-roller, roller_diameter: 16}
cam: {kind: barrel, radius: 50, length: 120, groove_depth: 10, clearance: 0, track_position: 25, datum: none}
tolerance: {profile: 0.04}
`, turns, law, law), Vocabulary())
		if err != nil {
			t.Fatal(err)
		}
		c, err := Build(s)
		if err != nil {
			t.Fatal(err)
		}
		return c
	}
	return build(45 * math.Tan(math.Pi/6) / build(1).LiftAt(100).V)
}

// On a helix the wall's normal makes the angle a(z), tan a = s'/z, with the axis at a distance z.
// A tool shifted by d square to the track at the middle depth m is short of the wall at z by
// d less the shift's part along the normal there:
//
//	parallel  d (1 - cos(a(z) - a(m)))
//	rotary    d (1 - z/m sin a(m) sin a(z) - cos a(m) cos a(z))
//
// to first order in d (elementary). At 30° of slope, 10 of depth and 1 of radius difference about
// 0.001 and 0.028 (common practice, no source).
func TestShiftedToolOnAHelix(t *testing.T) {
	for _, clockwise := range []bool{true, false} {
		c := helical(t, clockwise)
		b, _ := c.Barrel()
		half := c.inset()
		const d = 0.01
		for _, upper := range []bool{true, false} {
			w := follower.Wall{Half: half, Upper: upper}
			for _, z := range []float64{40, 42, 45, 48, 50} {
				v := c.LiftAt(100).V
				a, m := math.Atan2(v, z), math.Atan2(v, 45)
				x, y, h := c.flank(w, 100, z)
				for rotary, want := range map[bool]float64{
					false: d * (1 - math.Cos(a-m)),
					true:  d * (1 - z/45*math.Sin(m)*math.Sin(a) - math.Cos(m)*math.Cos(a)),
				} {
					left := nearest(x, y, h, c.passAxis(b, w, half-d, rotary), 92, 108) - (half - d)
					if math.Abs(left-want) > 0.01*d*d {
						t.Errorf("clockwise %v, upper %v, z %v, rotary %v: %g is left, want %g", clockwise, upper, z, rotary, left, want)
					}
				}
			}
		}
		parallel, rotary := c.Misses(half - 1)
		t.Logf("1 narrower in radius: parallel %.5f, rotary %.5f", parallel.Error, rotary.Error)
		if e := math.Abs(parallel.Error); !(e > 0.0008 && e < 0.0025) {
			t.Errorf("parallel %+v", parallel)
		}
		if e := math.Abs(rotary.Error); !(e > 0.02 && e < 0.04) {
			t.Errorf("rotary %+v", rotary)
		}
		if exact, _ := c.Misses(half); math.Abs(exact.Error) > 1e-9 {
			t.Errorf("a tool of the groove's width leaves %+v", exact)
		}
	}
}
