package follower_test

import (
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Follower and contour pairs of which both are known in closed form; the printed figures
// were derived with 30 digits. The cam turns clockwise. A contour is held to its exact
// curve to pairTol.
const pairTol = 1e-10

// closed is a cam whose lift is a closed form in the cam angle in radians.
func closed(k follower.Kind, lift func(theta taylor.F) taylor.F) cam {
	return cam{k, func(deg float64) taylor.F { return lift(taylor.FVar(deg).Radians()) }}
}

func cosine(a taylor.F) taylor.F { _, c := a.SinCos(); return c }
func sine(a taylor.F) taylor.F   { s, _ := a.SinCos(); return s }

func flat(base float64) follower.TranslatingFlat {
	return must(follower.NewTranslatingFlat(base, 100, true))
}

// onCircle holds the contour to a circle between two cam angles, and its curvature.
func onCircle(t *testing.T, name string, c cam, from, to float64, center plane.Point, radius float64) {
	t.Helper()
	for k := 1; k < 50; k++ {
		deg := from + (to-from)*float64(k)/50
		near(t, name+": distance from the center", c.contour(deg).Dist(center), radius, pairTol)
		near(t, name+": radius of curvature", c.radius(deg)-c.kind.Radius(), radius, pairTol)
	}
}

// lifts holds lifts at cam angles in degrees.
func lifts(t *testing.T, name string, c cam, rows [][2]float64) {
	t.Helper()
	for _, r := range rows {
		near(t, name, c.lift(r[0]).C[0], r[1], printed)
	}
}

// An eccentric circle of radius 40 about (-12, 0) under a flat face: the Scotch yoke (Rothbart
// 2004 p. 463), simple harmonic.
func TestPairEccentricFlat(t *testing.T) {
	const e, r = 12.0, 40.0
	c := closed(flat(r-e), func(a taylor.F) taylor.F { return a.Of(e).Sub(cosine(a).Scale(e)) })
	lifts(t, "P1", c, [][2]float64{{30, 1.607695154587}})
	for _, q := range []struct{ deg, x, y float64 }{{30, 22.64101615138, 20}, {90, -12, 40}, {135, -40.28427124746, 28.28427124746}} {
		near(t, "P1 x", c.contour(q.deg).X, q.x, printed)
		near(t, "P1 y", c.contour(q.deg).Y, q.y, printed)
	}
	onCircle(t, "P1", c, 0, 360, plane.Point{X: -e}, r)
	near(t, "P1 farthest contact", c.touch(90), e, 1e-14)
	everywhere(t, c, plane.Point{X: -e}, r)
}

// everywhere holds the linkage on one arc, which is the whole contour, to lift,
// velocity and acceleration all round.
func everywhere(t *testing.T, c cam, center plane.Point, contour float64) {
	t.Helper()
	s, pitch := c.kind.Sense(), contour+c.kind.Radius()
	arc := plane.Frame{P: center.Add(plane.Vector{X: pitch}), T: plane.Vector{Y: s}, K: s / pitch}
	for deg := 1.0; deg < 360; deg += 7 {
		r, ok := c.kind.OnArc(deg, arc)
		if !ok {
			t.Fatalf("%T at %g: no contact", c.kind, deg)
		}
		want := c.lift(deg)
		near(t, "lift on the circle", r.Lift, want.C[0], 1e-11)
		near(t, "velocity on the circle", r.Velocity, want.Deriv(1)*toDeg, 1e-11)
		near(t, "acceleration on the circle", r.Acceleration, want.Deriv(2)*toDeg*toDeg, 1e-11)
		near(t, "contact from the center", r.At.Dist(center), pitch, 1e-12)
	}
}

// The same circle under a translating roller, in line and offset: the slider-crank
// (Rothbart 2004 p. 461). Also as a mushroom, and on the circle of the center as a knife.
func TestPairEccentricRoller(t *testing.T) {
	const e, m, rr = 12.0, 50.0, 10.0
	inline := func(a taylor.F) taylor.F {
		es := sine(a).Scale(e)
		return a.Of(m * m).Sub(es.Mul(es)).Sqrt().Sub(cosine(a).Scale(e)).Sub(a.Of(m - e))
	}
	c := closed(roller(m-e-rr, rr, 0, true), inline)
	lifts(t, "P2", c, [][2]float64{{30, 1.24638973855}, {60, 4.90807704255}, {90, 10.53864439805}, {120, 16.90807704255}, {180, 24}})
	near(t, "P2 pressure angle", c.pressure(30), 6.892102579346, printed)
	near(t, "P2 pressure angle", c.pressure(90), 13.88654036263, printed)
	onCircle(t, "P2", c, 0, 360, plane.Point{X: -e}, m-rr)
	everywhere(t, c, plane.Point{X: -e}, m-rr)

	head := closed(must(follower.NewTranslatingMushroom(m-e-rr, rr, 15, 0, true)), inline)
	onCircle(t, "P2 mushroom", head, 0, 360, plane.Point{X: -e}, m-rr)
	everywhere(t, head, plane.Point{X: -e}, m-rr)
	near(t, "P2 mushroom's contact", head.touch(90), rr*e/m, 1e-14) // sin a = e sin θ/M

	edge := closed(must(follower.NewTranslatingKnife(m-e, 0, true)), inline)
	onCircle(t, "P2 knife", edge, 0, 360, plane.Point{X: -e}, m)
	everywhere(t, edge, plane.Point{X: -e}, m)

	// Offset 6 towards +Y: seen from the center of the circle, which at lift 0 is on the
	// line from the roller center through the axis.
	const f = 6.0
	k := roller(m-e-rr, rr, f, true)
	gamma := math.Atan2(f, k.Datum)
	center := plane.Polar(e, plane.Angle(gamma+math.Pi))
	offset := closed(k, func(a taylor.F) taylor.F {
		b := a.Of(gamma).Sub(a)
		y := sine(b).Scale(e).Add(a.Of(f))
		return a.Of(m * m).Sub(y.Mul(y)).Sqrt().Sub(cosine(b).Scale(e)).Sub(a.Of(k.Datum))
	})
	lifts(t, "P2b", offset, [][2]float64{{30, 1.237901709038}, {60, 4.801062956144}, {90, 10.23859508626}, {120, 16.48840966165}, {180, 24.15732846742}})
	onCircle(t, "P2b", offset, 0, 360, center, m-rr)
	everywhere(t, offset, center, m-rr)
}

// asin and acos of a series, by their tangents.
func asin(a taylor.F) taylor.F { return a.Div(a.Of(1).Sub(a.Mul(a)).Sqrt()).Atan() }
func acos(a taylor.F) taylor.F { return a.Of(math.Pi / 2).Sub(asin(a)) }

// swingOn returns the swing, degrees above rest, of an arm or face on an eccentric
// circle: from the pivot at distance C, the circle's center at distance q and bearing b
// off the center line; then part, the angle between them at the pivot.
func swingOn(c, e, start, rest float64, part func(q taylor.F) taylor.F) func(a taylor.F) taylor.F {
	return func(a taylor.F) taylor.F {
		at := a.Of(start).Sub(a) // the center's angle in the machine
		x, y := a.Of(c).Sub(cosine(at).Scale(e)), sine(at).Scale(e)
		q := x.Mul(x).Add(y.Mul(y)).Sqrt()
		return y.Div(x).Atan().Add(part(q)).Sub(a.Of(rest)).Scale(toDeg)
	}
}

// The circle of radius 40 under a roller of 10 on an arm of 80, pivot at 100: the
// four-bar.
func TestPairEccentricSwingingRoller(t *testing.T) {
	const c, l, m, e, rr = 100.0, 80.0, 50.0, 12.0, 10.0
	k := must(follower.NewSwingingRoller(m-e-rr, rr, l, c, true, true))
	const gamma = 48.4185393751
	start := math.Atan2(l*math.Sin(k.Rest), c-l*math.Cos(k.Rest)) // of the roller center at lift 0
	near(t, "P3 start", start*toDeg, gamma, printed)
	near(t, "P3 rest", k.Rest*toDeg, 20.81220680813, printed)
	s := closed(k, swingOn(c, e, start+math.Pi, k.Rest, func(q taylor.F) taylor.F {
		return acos(q.Mul(q).Add(q.Of(l*l - m*m)).Div(q.Scale(2 * l)))
	}))
	lifts(t, "P3", s, [][2]float64{{30, .9942015589556}, {90, 8.409995428514}, {150, 16.47762982111}, {180, 17.45455461135}, {270, 7.274626210219}})
	center := plane.Polar(e, plane.Angle(start+math.Pi))
	onCircle(t, "P3", s, 0, 360, center, m-rr)
	everywhere(t, s, center, m-rr)
}

// The circle of radius 40 under a face through its pivot at 100: the inverted
// slider-crank.
func TestPairEccentricSwingingFlat(t *testing.T) {
	const c, r, e = 100.0, 40.0, 12.0
	k := must(follower.NewSwingingFlat(r-e, 0, 0, 150, c, true, true))
	near(t, "P4 rest", 90-k.Rest*toDeg, 16.26020470831, printed)
	s := closed(k, swingOn(c, e, k.Rest+math.Pi, math.Pi/2-k.Rest, func(q taylor.F) taylor.F {
		return asin(q.Of(r).Div(q))
	}))
	lifts(t, "P4", s, [][2]float64{{30, .9058126076484}, {90, 6.474715427456}, {150, 12.93911899507}, {180, 14.80518740435}, {270, 8.421322634523}})
	center := plane.Polar(e, plane.Angle(k.Rest+math.Pi))
	onCircle(t, "P4", s, 0, 360, center, r)
	everywhere(t, s, center, r)
}
