package follower_test

import (
	"errors"
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

// Geometry that cannot exist is refused with the key at fault and what would do; at the
// edge of what would do it is still refused.
func TestMisfits(t *testing.T) {
	knife := func(base, offset float64) error {
		_, err := follower.NewTranslatingKnife(base, offset, true)
		return err
	}
	head := func(face, head, offset float64) error {
		_, err := follower.NewTranslatingMushroom(40, face, head, offset, true)
		return err
	}
	flat := func(base, width float64) error { _, err := follower.NewTranslatingFlat(base, width, true); return err }
	arm := func(arm, pivot float64) error {
		_, err := follower.NewSwingingRoller(40, 10, arm, pivot, true, true)
		return err
	}
	face := func(offset, from, to, pivot float64) error {
		_, err := follower.NewSwingingFlat(40, offset, from, to, pivot, true, true)
		return err
	}
	groove := func(depth, roller float64) error {
		_, err := follower.NewBarrel(50, depth, roller, 0, true)
		return err
	}
	for _, c := range []struct {
		err      error
		key      string
		from, to float64
	}{
		{knife(40, 39.9), "", 0, 0},
		{knife(40, 40), "offset", -40, 40},
		{knife(40, -41), "offset", -40, 40},
		{knife(40, math.NaN()), "offset", -40, 40},
		{head(100, 199, 0), "", 0, 0},
		{head(100, 200, 0), "head_diameter", 0, 200},
		{head(100, 0, 0), "head_diameter", 0, 200},
		{head(100, 30, 140), "offset", -140, 140},
		{flat(40, 30), "", 0, 0},
		{flat(0, 30), "base_radius", 0, math.Inf(1)},
		{flat(40, 0), "face_width", 0, math.Inf(1)},
		{arm(51, 100), "", 0, 0},
		{arm(50, 100), "arm_length", 50, 150},
		{arm(150, 100), "arm_length", 50, 150},
		{arm(60, 0), "pivot_distance", 0, math.Inf(1)},
		{arm(math.NaN(), 100), "arm_length", 50, 150},
		{face(5, 10, 90, 46), "", 0, 0},
		{face(5, 10, 90, 45), "pivot_distance", 45, math.Inf(1)},
		{face(-5, 10, 90, 35), "pivot_distance", 35, math.Inf(1)},
		{face(5, 10, 10, 90), "face.to", 10, math.Inf(1)},
		{groove(10, 39), "", 0, 0},
		{groove(50, 8), "groove_depth", 0, 50},
		{groove(0, 8), "groove_depth", 0, 50},
		{groove(10, 40), "roller_diameter", 0, 80},
	} {
		var m *follower.Misfit
		switch found := errors.As(c.err, &m); {
		case c.key == "" && c.err != nil:
			t.Errorf("sound geometry refused: %v", c.err)
		case c.key != "" && (!found || m.Key != c.key || m.From != c.from || m.To != c.to):
			t.Errorf("got %v, want %s from %g to %g", c.err, c.key, c.from, c.to)
		}
	}
	if got, want := arm(30, 100).Error(), "arm_length 30: must be above 50 and below 150, so that the arm reaches the prime circle from its pivot"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
	if got, want := flat(40, 0).Error(), "face_width 0: must be above 0, so that there is a face"; got != want {
		t.Errorf("got %q, want %q", got, want)
	}
}

// Below MaxSwing more lift takes the follower away from the camshaft, above it nearer.
func TestMaxSwing(t *testing.T) {
	away := func(f follower.Swinging, lift float64) float64 {
		const more = 1e-3
		dist := func(lift float64) float64 {
			deg, s := taylor.FVar(0), taylor.F{C: [taylor.Order + 1]float64{lift}}
			if face, ok := f.(follower.Face); ok {
				p, _ := face.SupportF(deg, s)
				return p.C[0]
			}
			x, y := f.F(deg, s)
			return math.Hypot(x.C[0], y.C[0])
		}
		return dist(lift+more) - dist(lift)
	}
	rapid.Check(t, func(t *rapid.T) {
		draw := kinds[4+rapid.IntRange(0, 1).Draw(t, "kind")].draw
		f := draw(t, 40, true).(follower.Swinging)
		if top := f.MaxSwing(); away(f, top-1) <= 0 || away(f, top+1) >= 0 || away(f, 0) <= 0 {
			t.Fatalf("%+v: MaxSwing %v", f, top)
		}
	})
}

// Needle-like triangles keep their angle: with sides 50+d, 50 and 100 the arm lies
// nearly along the center line, and 1 - cos of its angle is ((50+d)² - 50²)/(2·50·100).
func TestNeedle(t *testing.T) {
	const d = 1.0 / (1 << 30)
	f := must(follower.NewSwingingRoller(40+d, 10, 50, 100, true, true))
	want := 2 * math.Asin(math.Sqrt(d*(100+d)/(4*50*100)))
	near(t, "angle", f.Rest/want, 1, 1e-14)
}

func TestGrooveWalls(t *testing.T) {
	g := follower.Groove{Kind: roller(40, 10, 3, true), Clearance: .05}
	inner, outer := g.Walls()
	near(t, "inner wall", inner, -10.025, 1e-15)
	near(t, "outer wall", outer, 10.025, 1e-15)
}

// FaceFrame against the frame by the textbook's formula for curves, and of parallels;
// at a cusp it has point, tangent and radius all the same.
func TestFaceFrame(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		s := drawCam(t, kinds[rapid.SampledFrom([]int{3, 5}).Draw(t, "kind")].draw)
		deg := inZone(t, s)
		outside := rapid.Float64Range(0, 20).Draw(t, "outside")
		face := s.kind.(follower.Face)
		p, phi := face.SupportF(taylor.FVar(deg), s.lift(deg))
		f, rho := follower.FaceFrame(p, phi, outside)
		parallel := func(d float64) (x, y taylor.F) {
			p, phi := face.SupportF(taylor.FVar(d), s.lift(d))
			return follower.Contour(p.Add(p.Of(outside)), phi)
		}
		x, y := parallel(deg)
		tangent := plane.Vector{X: x.C[1], Y: y.C[1]}.Unit()
		k := curvature(x, y)
		near(t, "x", f.P.X, x.C[0], 1e-13)
		near(t, "y", f.P.Y, y.C[0], 1e-13)
		near(t, "tangent", f.T.Cross(tangent), 0, 1e-10)
		near(t, "direction", f.T.Dot(tangent), 1, 1e-10)
		near(t, "curvature", f.K, k, 1e-9)
		near(t, "radius", rho, s.kind.Sense()/k, 1e-9)
		// The rate of curvature by the length, by differences.
		const h = 1e-4
		dk := (curvature(parallel(deg+h)) - curvature(parallel(deg-h))) / (2 * h) / math.Hypot(x.C[1], y.C[1])
		if math.Abs(f.DK-dk) > 1e-5*math.Max(1, math.Abs(dk)) {
			t.Errorf("rate of curvature: got %v, want %v", f.DK, dk)
		}
		// The parallel through the center of curvature cusps here.
		_, own := follower.FaceFrame(p, phi, 0)
		cusp, zero := follower.FaceFrame(p, phi, -own)
		near(t, "radius at a cusp", zero, 0, 1e-10)
		near(t, "tangent at a cusp", cusp.T.Dot(f.T), 1, 1e-14)
		center := f.P.Add(f.T.Left().Scale(1 / f.K))
		near(t, "point at a cusp", cusp.P.Dist(center), 0, 1e-9)
	})
}

// At a corner of the contour (infinite curvature) a flat face turns about the corner;
// on a straight line (no curvature) there is nothing to read.
func TestFacesOnCornerAndLine(t *testing.T) {
	corner := plane.Frame{P: plane.Polar(40, plane.Degrees(20)), T: plane.Vector{Y: 1}, K: math.Inf(1)}
	f := must(follower.NewTranslatingFlat(30, 50, true))
	r, ok := f.OnArc(50, corner)
	near(t, "lift", r.Lift, 40*math.Cos(30/toDeg)-30, 1e-14)
	near(t, "velocity", r.Velocity, -40*math.Sin(30/toDeg), 1e-14)
	near(t, "acceleration", r.Acceleration, -40*math.Cos(30/toDeg), 1e-14)
	near(t, "contact", r.At.Dist(corner.P), 0, 0)
	if !ok {
		t.Error("no contact on a corner")
	}
	g := must(follower.NewSwingingFlat(30, 0, 0, 100, 80, true, true))
	r, _ = g.OnArc(-50, plane.Frame{P: plane.Point{X: 40}, T: plane.Vector{Y: 1}, K: math.Inf(1)})
	// The corner is at 50° in the machine; the face goes through it and the pivot.
	near(t, "swing", r.Lift, (math.Atan2(40*math.Sin(50/toDeg), 80-40*math.Cos(50/toDeg))-math.Asin(30.0/80))*toDeg, 1e-13)
	for _, k := range []follower.Kind{f, g} {
		if _, ok := k.OnArc(10, plane.Frame{P: plane.Point{X: 30}, T: plane.Vector{Y: 1}}); ok {
			t.Errorf("%T rests on a line", k)
		}
	}
}

// A roller on a straight stretch of pitch curve (no curvature), both kinds: the center is
// where the machine's line or arc crosses it. The velocities by differences.
func TestRollersOnLine(t *testing.T) {
	line := plane.Frame{P: plane.Point{X: 60, Y: -7}, T: plane.Vector{Y: 1}} // X = 60 in the cam frame
	for _, above := range []bool{true, false} {
		f := must(follower.NewSwingingRoller(40, 10, 90, 110, above, true))
		for deg := -10.0; deg < 70; deg += 10 {
			if above {
				deg -= 50
			}
			r, ok := f.OnArc(deg, line)
			if !ok {
				t.Fatalf("at %g: no contact", deg)
			}
			x, _ := f.F(taylor.FVar(deg), taylor.F{C: [taylor.Order + 1]float64{r.Lift}})
			near(t, "center on the line", x.C[0], 60, 1e-12)
			const h = 1e-3
			a, _ := f.OnArc(deg-h, line)
			b, _ := f.OnArc(deg+h, line)
			near(t, "velocity", r.Velocity, (b.Lift-a.Lift)/(2*h)*toDeg, 1e-6)
			near(t, "acceleration", r.Acceleration, (b.Velocity-a.Velocity)/(2*h)*toDeg, 1e-6)
			near(t, "contact", r.At.X, 60, 1e-12)
			if above {
				deg += 50
			}
		}
	}
	k := roller(40, 10, 12, false)
	r, ok := k.OnArc(-20, plane.Frame{P: line.P, T: plane.Vector{Y: -1}})
	// (D+s) cos 20° - 12 sin 20° = 60, the machine seen turned by +20°.
	near(t, "lift", r.Lift, (60+12*math.Sin(20/toDeg))/math.Cos(20/toDeg)-k.Datum, 1e-13)
	if _, off := k.OnArc(90, line); off || !ok {
		t.Error("contact where the line is behind, or none where it is ahead")
	}
}

// A face that swings as fast as the cam turns, or faster, is touched nowhere.
func TestNoContact(t *testing.T) {
	f := must(follower.NewSwingingFlat(30, 0, 0, 100, 80, true, true))
	for _, slope := range []float64{180 / math.Pi, 100} {
		if got := f.Contact(5, slope); !math.IsInf(got, 1) {
			t.Errorf("slope %g: contact at %g", slope, got)
		}
	}
	f.Above = false
	if got := f.Contact(5, 100); math.IsInf(got, 1) {
		t.Error("below the center line the face swings against the turning, and is touched")
	}
}
