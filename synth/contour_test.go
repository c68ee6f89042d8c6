package synth

import (
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/motion"
	"lobewright/synth/plane"
	"lobewright/synth/spec"
	"lobewright/synth/taylor"
)

// build makes a cam without a spec file.
func build(t *testing.T, base, roller, offset float64, clockwise bool, events ...spec.Event) *Cam {
	t.Helper()
	s := &spec.Spec{Units: spec.MM, Camshaft: spec.Camshaft{Speed: 60, Clockwise: clockwise}}
	s.Motion.Events = events
	s.Follower = spec.Follower{Kind: "translating-roller", RollerDiameter: 2 * roller, Offset: offset}
	s.Cam = spec.Cam{Kind: "plate", BaseRadius: base}
	s.Limits.PressureAngle = 30
	c, err := Build(s)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

func rise(h, over float64, law string) spec.Event {
	return spec.Event{Kind: spec.Rise, Lift: h, Over: over, Law: spec.Law{Name: law, ConstantShare: 0.5}}
}

func fall(h, over float64, law string) spec.Event {
	e := rise(h, over, law)
	e.Kind = spec.Fall
	return e
}

func dwell(over float64) spec.Event { return spec.Event{Kind: spec.Dwell, Over: over} }

func near(t *testing.T, what string, got, want, relative float64) {
	t.Helper()
	if !(math.Abs(got-want) <= relative*math.Max(1, math.Abs(want))) {
		t.Errorf("%s: got %.13g, want %.13g", what, got, want)
	}
}

// Published setting: translating roller, cycloidal rise of 20 in 90°, base radius
// 40, roller radius 10; columns of pitch point, pressure angle, radius of curvature
// of the pitch curve and contour point derived with 30 digits from the textbook
// formulas (H. A. Rothbart, ed., Cam Design Handbook, McGraw-Hill 2004, pp. 45, 183)
// and checked by numeric differentiation.
func TestReferenceVectors(t *testing.T) {
	type row struct{ t, px, py, alpha, rho, cx, cy float64 }
	for _, c := range []struct {
		offset float64
		rows   []row
	}{
		{0, []row{
			{22.5, 47.87257439971, 19.82946958207, 13.80515538569, 410.3570417999, 37.98749946949, 18.31775081725},
			{45, 42.42640687119, 42.42640687119, 22.99700767179, 56.54893077855, 33.15476398013, 38.67985671129},
			{67.5, 26.09254230174, 62.99296950165, 10.57748903418, 39.51154649448, 20.63481443001, 54.61363739949},
		}},
		{8, []row{
			{22.5, 44.21599060235, 26.97400058360, 5.283617571644, 1427.285835392, 34.66405288170, 24.01418880230},
			{45, 36.31407029560, 47.62777879459, 16.39592599084, 55.43206059541, 27.53458093676, 42.84023593860},
			{67.5, 18.45500078308, 65.45932062213, 4.008114473203, 38.39131886545, 13.99175525243, 56.51060902028},
		}},
		{-8, []row{
			{45, 47.62777879459, 36.31407029560, 29.41427617594, 57.57277343395, 37.99548336810, 33.62727204919},
		}},
	} {
		for _, clockwise := range []bool{true, false} {
			mirror := 1.0 // the other turning direction with the offset on the other side is the mirror image
			if !clockwise {
				mirror = -1
			}
			cam := build(t, 40, 10, mirror*c.offset, clockwise, rise(20, 90, "cycloidal"), dwell(60), fall(20, 120, "cycloidal"), dwell(90))
			for _, r := range c.rows {
				zone, at := cam.cycle.Zone(r.t)
				p, k := cam.Pitch().At(zone, at), cam.Contour().At(zone, at)
				near(t, "pitch x", p.P.X, r.px, 1e-10)
				near(t, "pitch y", p.P.Y*mirror, r.py, 1e-10)
				near(t, "pitch radius of curvature", mirror/p.K, r.rho, 1e-10)
				near(t, "contour x", k.P.X, r.cx, 1e-10)
				near(t, "contour y", k.P.Y*mirror, r.cy, 1e-10)
				near(t, "contour radius of curvature", mirror/k.K, r.rho-10, 1e-10)
				near(t, "pressure angle", cam.PressureAngleIn(zone, at).Deg(), r.alpha, 1e-10)
			}
		}
	}
	// Extremes of the same cams: largest pressure angle and least radius of curvature.
	for _, c := range []struct{ offset, alpha, u, rho, v float64 }{
		{0, 23.23301662979, .4659690129285, 39.42456206951, .7325790459806},
		{8, 16.51999683239, .4764409780993, 38.14230501825, .7205502625986},
		{-8, 29.79240272578, .4547469247237, 40.54756411769, .7446120266862},
	} {
		cam := build(t, 40, 10, c.offset, true, rise(20, 90, "cycloidal"), dwell(60), fall(20, 120, "cycloidal"), dwell(90))
		p := cam.steepest(1)
		near(t, "largest pressure angle", p.value, c.alpha, 1e-10)
		near(t, "its place", p.t/90, c.u, 1e-6)
		up := cam.Pitch().largest(func(i int) bool { return cam.moving(i, cam.zones[i].From) == 1 }, func(i int, t float64) float64 { return cam.Pitch().At(i, t).K })
		near(t, "least radius of curvature", 1/up.value, c.rho, 1e-10)
		near(t, "its place", up.t/90, c.v, 1e-6)
	}
}

// Length, area and total turning of reference cam K: 3-4-5 rise 20 in 90°, dwell 60°,
// 3-4-5 fall 20 in 120°, dwell 90°, prime radius 50, roller radius 10. Derived
// from polar area, Steiner's formula for parallels and high-precision quadrature.
func TestIntegrals(t *testing.T) {
	for _, c := range []struct{ offset, pitchL, pitchA, l, a float64 }{
		{0, 376.973977721468, 11230.4004051053, 314.142124649672, 7774.8198932496},
		{8, 376.393130630562, 11193.3000697591, 313.561277558766, 7743.5280288125},
	} {
		for _, clockwise := range []bool{true, false} {
			off, turn := c.offset, 2*math.Pi
			if !clockwise {
				off, turn = -off, -turn
			}
			cam := build(t, 40, 10, off, clockwise, rise(20, 90, "polynomial-3-4-5"), dwell(60), fall(20, 120, "polynomial-3-4-5"), dwell(90))
			near(t, "pitch length", cam.Pitch().Length(), c.pitchL, 1e-9)
			near(t, "pitch area", cam.Pitch().Area(), c.pitchA, 1e-9)
			near(t, "contour length", cam.Contour().Length(), c.l, 1e-9)
			near(t, "contour area", cam.Contour().Area(), c.a, 1e-9)
			near(t, "turning", cam.Contour().Turning(), turn, 1e-9)
		}
	}
}

// eccentric is the lift of a circle of radius m about a center at distance e from the
// axis under a roller center on a line at offset f: the slider-crank (H. A. Rothbart,
// ed., Cam Design Handbook, 2004, p. 461, 14.2), lowest at cam angle 0.
type eccentric struct{ e, m, f float64 }

func eccentricLift[T taylor.Scalar[T]](p eccentric, deg T) T {
	datum := math.Sqrt((p.m-p.e)*(p.m-p.e) - p.f*p.f)
	gamma := math.Atan2(p.f, datum) // the center stands opposite the roller at lift 0
	// The cam turns clockwise, so the center moves from pi+gamma to pi+gamma-theta.
	sin, cos := deg.Of(math.Pi + gamma).Sub(deg.Radians()).SinCos()
	cx, cy := cos.Scale(p.e), sin.Scale(p.e)
	dy := cy.Scale(-1).Add(cy.Of(p.f))
	return cx.Add(dy.Of(p.m * p.m).Sub(dy.Mul(dy)).Sqrt()).Sub(cx.Of(datum))
}

func (p eccentric) F(_ int, deg taylor.F) taylor.F { return eccentricLift(p, deg) }
func (p eccentric) I(_ int, deg taylor.I) taylor.I { return eccentricLift(p, deg) }

// eccentricCam is the cam that must come out as a circle.
func eccentricCam(p eccentric, roller float64) *Cam {
	f, _ := follower.NewTranslatingRoller(p.m-p.e-roller, roller, p.f, true)
	return &Cam{spec: &spec.Spec{Cam: spec.Cam{BaseRadius: p.m - p.e - roller}}, lift: p, follower: f,
		zones: []motion.Zone{{From: 0, To: 360, Span: 360}}}
}

// Eccentric circles give circles: contour radius m - roller about (-e, 0) turned by
// the offset's angle, constant curvature, and an enclosure that holds it.
func TestEccentricCircles(t *testing.T) {
	for _, p := range []eccentric{{12, 50, 0}, {12, 50, 6}} {
		const roller = 10
		cam := eccentricCam(p, roller)
		gamma := math.Atan2(p.f, cam.follower.(follower.TranslatingRoller).Datum)
		center := plane.Polar(p.e, plane.Angle(gamma+math.Pi))
		con := cam.Contour()
		for deg := 0.0; deg < 360; deg += 7.5 {
			f := con.At(0, deg)
			near(t, "distance from the circle's center", f.P.Dist(center), p.m-roller, 1e-10)
			near(t, "curvature", f.K, 1/(p.m-roller), 1e-10)
			near(t, "curvature rate", f.DK, 0, 1e-10)
			x, y := con.Over(0, taylor.Interval{Lo: deg, Hi: deg + 2}, 3)
			g := con.At(0, deg+1.3)
			if !x.C[0].Has(g.P.X) || !y.C[0].Has(g.P.Y) {
				t.Errorf("the enclosure over %v..%v misses the curve", deg, deg+2)
			}
		}
		near(t, "contour length", con.Length(), 2*math.Pi*(p.m-roller), 1e-9)
		near(t, "contour area", con.Area(), math.Pi*(p.m-roller)*(p.m-roller), 1e-9)
		d := con.LeastDisc(false)
		near(t, "largest disc inside a circle", d.Radius, p.m-roller, 1e-9)
		if out := con.LeastDisc(true); !math.IsInf(out.Radius, 1) {
			t.Errorf("outside a circle every disc fits, got %v", out)
		}
	}
	// Lift of the in-line slider-crank, e = 12, m = 50, at 30, 60, 90, 120, 180 degrees
	// (Rothbart 2004 p. 461, derived to 13 digits), and with the line offset by 6.
	for i, want := range []float64{1.24638973855, 4.90807704255, 10.53864439805, 16.90807704255, 24} {
		deg := []float64{30, 60, 90, 120, 180}[i]
		near(t, "in-line lift", eccentricLift(eccentric{12, 50, 0}, taylor.FVar(deg)).C[0], want, 1e-11)
	}
	for i, want := range []float64{1.237901709038, 4.801062956144, 10.23859508626, 16.48840966165, 24.15732846742} {
		deg := []float64{30, 60, 90, 120, 180}[i]
		near(t, "offset lift", eccentricLift(eccentric{12, 50, 6}, taylor.FVar(deg)).C[0], want, 1e-11)
	}
}

// Simple-harmonic motion of 20 in 180° over a prime radius of 30 gives a limaçon:
// rho = (A²+B²-2AB cos t)^(3/2)/(A²+2B²-3AB cos t), A = 40, B = 10 (analytic geometry
// of the limaçon; derived).
func TestLimacon(t *testing.T) {
	cam := build(t, 20, 10, 0, true, rise(20, 180, "simple-harmonic"), fall(20, 180, "simple-harmonic"))
	for i, want := range []float64{45, 39.06013881753, 38.94044201972, 40.09753733086, 41.66666666667} {
		deg := []float64{0, 60, 90, 120, 180}[i]
		zone, at := cam.cycle.Zone(deg)
		near(t, "radius of curvature", 1/cam.Pitch().At(zone, at).K, want, 1e-10)
	}
	near(t, "largest pressure angle", cam.steepest(1).value, 14.47751218593, 1e-10)
}

// Closed form of the largest pressure angle of an in-line simple-harmonic rise:
// tan a = pi h / (2 beta sqrt(Rp (Rp + h))); prime 50, lift 20, 90° gives
// 18.67842598645° (derived).
func TestHarmonicPressureAngle(t *testing.T) {
	cam := build(t, 40, 10, 0, true, rise(20, 90, "simple-harmonic"), dwell(60), fall(20, 120, "cycloidal"), dwell(90))
	near(t, "largest pressure angle", cam.steepest(1).value, 18.67842598645, 1e-10)
}
