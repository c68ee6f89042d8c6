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

// An ellipse of half axes 30 (x) and 40 (y) under a flat face.
func TestPairEllipse(t *testing.T) {
	const a, b = 40.0, 30.0
	s := closed(flat(b), func(u taylor.F) taylor.F {
		bc, as := cosine(u).Scale(b), sine(u).Scale(a)
		return bc.Mul(bc).Add(as.Mul(as)).Sqrt().Sub(u.Of(b))
	})
	lifts(t, "P5", s, [][2]float64{{30, 2.78719262151}, {45, 5.355339059327}, {60, 7.749172176354}, {90, 10}})
	for _, r := range [][2]float64{{0, 53.33333333333}, {45, 32.58348047708}, {90, 22.5}} {
		near(t, "P5 radius of curvature", s.radius(r[0]), r[1], printed)
	}
	near(t, "P5 contact", s.contour(45).X, 18, printed)
	near(t, "P5 contact", s.contour(45).Y, 32, printed)
	for deg := 0.0; deg < 360; deg += 5 {
		p := s.contour(deg)
		near(t, "P5 on the ellipse", p.X*p.X/(b*b)+p.Y*p.Y/(a*a), 1, pairTol)
	}
}

// Constant velocity under a flat face is the involute of a circle of radius a = h/β: from
// the string's point on it the contour is exactly Rb + aθ away.
func TestPairInvolute(t *testing.T) {
	a, base := 20/(120/toDeg), 30.0
	near(t, "P6 a", a, 9.549296585514, printed)
	s := closed(flat(base), func(u taylor.F) taylor.F { return u.Scale(a) })
	for _, r := range []struct{ deg, x, y float64 }{
		{0, 30, 9.549296585514}, {60, 11.73006656867, 39.41566444413}, {120, -33.26993343133, 38.52662189647},
	} {
		near(t, "P6 x", s.contour(r.deg).X, r.x, printed)
		near(t, "P6 y", s.contour(r.deg).Y, r.y, printed)
	}
	for deg := 0.0; deg <= 120; deg += 10 {
		want := base + a*deg/toDeg
		near(t, "P6 string", s.contour(deg).Dist(plane.Polar(a, plane.Degrees(deg+90))), want, pairTol)
		near(t, "P6 radius of curvature", s.radius(deg), want, pairTol)
	}
}

// Constant velocity under a knife edge is the Archimedean spiral r = Rb + aθ.
func TestPairArchimedeanSpiral(t *testing.T) {
	a := 20 / (120 / toDeg)
	s := closed(must(follower.NewTranslatingKnife(30, 0, true)), func(u taylor.F) taylor.F { return u.Scale(a) })
	for _, r := range []struct{ deg, alpha, rho float64 }{
		{0, 17.65678715141, 28.83073701843}, {60, 13.42704175849, 39.02010180187}, {120, 10.81247871598, 49.17322065448},
	} {
		near(t, "P7 pressure angle", s.pressure(r.deg), r.alpha, printed)
		near(t, "P7 radius of curvature", s.radius(r.deg), r.rho, printed)
		near(t, "P7 radius", s.contour(r.deg).Radius(), 30+a*r.deg/toDeg, pairTol)
	}
}

// A constant pressure angle is the logarithmic spiral r = r0 exp(θ tan a).
func TestPairLogarithmicSpiral(t *testing.T) {
	const r0 = 30.0
	rate := math.Tan(15 / toDeg)
	s := closed(must(follower.NewTranslatingKnife(r0, 0, true)), func(u taylor.F) taylor.F {
		r := u.Of(r0 * math.Exp(rate*u.C[0])) // r' = rate u' r, u linear
		for k := 1; k <= taylor.Order; k++ {
			r.C[k] = r.C[k-1] * rate * u.C[1] / float64(k)
		}
		return r.Sub(u.Of(r0))
	})
	lifts(t, "P8", s, [][2]float64{{45, 37.02688184817 - r0}, {90, 45.69966597994 - r0}})
	near(t, "P8 radius of curvature", s.radius(90), 47.31177564173, printed)
	for deg := 0.0; deg < 180; deg += 20 {
		near(t, "P8 pressure angle", s.pressure(deg), 15, pairTol)
		near(t, "P8 radius of curvature", s.radius(deg), s.contour(deg).Radius()/math.Cos(15/toDeg), pairTol)
	}
}

// Simple harmonic motion over a half turn, in line: the pitch curve is a limaçon
// r = A - B cos θ.
func TestPairLimacon(t *testing.T) {
	const prime, h = 30.0, 20.0
	s := closed(roller(prime-8, 8, 0, true), func(u taylor.F) taylor.F { return u.Of(h / 2).Sub(cosine(u).Scale(h / 2)) })
	for _, r := range [][2]float64{{0, 45}, {60, 39.06013881753}, {90, 38.94044201972}, {120, 40.09753733086}, {180, 41.66666666667}} {
		near(t, "P9 radius of curvature", s.radius(r[0]), r[1], printed)
	}
	at := math.Acos(10.0/40) * toDeg // where r' / r = B sin θ/(A - B cos θ) is largest
	near(t, "P9 largest pressure angle", s.pressure(at), 14.47751218593, printed)
}

// The three-arc cam: base radius 25, flank arc, nose of radius 8 at distance 27, half
// the action 60°.
func TestPairThreeArcs(t *testing.T) {
	const rb, rn, a, e = 25.0, 8.0, 60 / toDeg, 27.0
	rf := (e*e - 2*e*rb*math.Cos(a) + rb*rb - rn*rn) / (2*(rb-rn) - 2*e*math.Cos(a))
	near(t, "P10 flank", rf, 87.85714285714, printed)
	flankAt, noseAt := plane.Point{X: -(rf - rb)}, plane.Polar(e, a)

	change := 17.02604856602
	near(t, "P10 change", math.Asin(e*math.Sin(a)/(rf-rn))*toDeg, change, printed)
	flank := closed(flat(rb), func(u taylor.F) taylor.F { return u.Of(rf - rb).Sub(cosine(u).Scale(rf - rb)) })
	nose := closed(flat(rb), func(u taylor.F) taylor.F { return cosine(u.Of(a).Sub(u)).Scale(e).Add(u.Of(rn - rb)) })
	onCircle(t, "P10 flat on the flank", flank, 0, change, flankAt, rf)
	onCircle(t, "P10 flat on the nose", nose, change, 60, noseAt, rn)
	lifts(t, "P10 flat", flank, [][2]float64{{5, .2391904056617}, {10, .9549412392326}, {15, 2.141805204687}, {change, 2.754919499106}})
	lifts(t, "P10 flat", nose, [][2]float64{{change, 2.754919499106}, {20, 3.683199964212}, {40, 8.37170076122}, {60, 10}})
	everywhere(t, flank, flankAt, rf)
	everywhere(t, nose, noseAt, rn)

	const rr = 12.0
	change = 41.8683439788
	flank = closed(roller(rb, rr, 0, true), func(u taylor.F) taylor.F {
		y := sine(u).Scale(rf - rb)
		return u.Of((rf + rr) * (rf + rr)).Sub(y.Mul(y)).Sqrt().Sub(cosine(u).Scale(rf - rb)).Sub(u.Of(rb + rr))
	})
	nose = closed(roller(rb, rr, 0, true), func(u taylor.F) taylor.F {
		b := u.Of(a).Sub(u)
		y := sine(b).Scale(e)
		return u.Of((rn + rr) * (rn + rr)).Sub(y.Mul(y)).Sqrt().Add(cosine(b).Scale(e)).Sub(u.Of(rb + rr))
	})
	onCircle(t, "P10 roller on the flank", flank, 0, change, flankAt, rf)
	onCircle(t, "P10 roller on the nose", nose, change, 60, noseAt, rn)
	lifts(t, "P10 roller", flank, [][2]float64{{5, .08880028194471}, {10, .3566072434346}, {20, 1.449079258952}, {30, 3.346467508209}, {change, 6.80863818888}})
	lifts(t, "P10 roller", nose, [][2]float64{{change, 6.80863818888}, {60, 10}})
	near(t, "P10 velocity", flank.lift(change).C[1]*toDeg, 20.28168994699, printed)
	near(t, "P10 acceleration before", flank.lift(change).Deriv(2)*toDeg*toDeg, 36.86931967102, printed)
	near(t, "P10 acceleration after", nose.lift(change).Deriv(2)*toDeg*toDeg, -65.82129823562, printed)
}

// The tangent cam, whose flank is straight (Rothbart 2004 p. 467): base radius 30, roller
// radius 17.5, 600 rpm. The linkage on a line, k = 0.
func TestPairTangentCam(t *testing.T) {
	const rb, rr = 30.0, 17.5
	omega := 600 * math.Pi / 30
	c := closed(roller(rb, rr, 0, true), func(u taylor.F) taylor.F {
		return u.Of(rb + rr).Div(cosine(u)).Sub(u.Of(rb + rr))
	})
	change := 25.64732291209
	lifts(t, "P11", c, [][2]float64{{change, 5.19140242063}})
	for deg := 0.0; deg < 26; deg += 5 {
		near(t, "P11 on the tangent", c.contour(deg).X, rb, pairTol)
		near(t, "P11 curvature", c.frame(deg).K, 0, pairTol)
	}
	line := plane.Frame{P: plane.Point{X: rb + rr, Y: 3}, T: plane.Vector{Y: 1}}
	for _, r := range []struct{ deg, s, v, a float64 }{{0, 0, 0, 187.5224836207}, {change, 5.19140242063, 25.29902147137, 303.9258902522}} {
		got, ok := c.kind.OnArc(r.deg, line)
		if !ok {
			t.Fatal("no contact on the line")
		}
		near(t, "P11 lift", got.Lift, r.s, printed)
		near(t, "P11 velocity", got.Velocity, r.v, printed)
		near(t, "P11 acceleration, m/s²", got.Acceleration*omega*omega/1000, r.a, printed)
	}
	nose := plane.Polar(23.61096825865, plane.Degrees(75))
	arc := plane.Frame{P: nose.Add(plane.Vector{X: 23.88903174135 + rr}), T: plane.Vector{Y: 1}, K: 1 / (23.88903174135 + rr)}
	for _, r := range []struct{ deg, a float64 }{{change, -57.56089887449}, {75, -146.386701194}} {
		got, ok := c.kind.OnArc(r.deg, arc)
		if !ok {
			t.Fatal("no contact on the nose")
		}
		near(t, "P11 nose acceleration, m/s²", got.Acceleration*omega*omega/1000, r.a, printed)
	}
}

// A Reuleaux triangle of width 30 that turns about a vertex, in a flat yoke, here with 10
// all round so that there is a base circle: the contour is a corner or a side of it,
// moved out by 10, and its radius of curvature 10 or 40. At 10 less, the corners are
// where the contour's curvature is infinite.
func TestPairReuleaux(t *testing.T) {
	const w, out = 30.0, 10.0
	pieces := []struct {
		from, to, rho float64
		lift          func(u taylor.F) taylor.F
	}{
		{0, 60, w + out, func(u taylor.F) taylor.F { return u.Of(w) }}, // the far arc, about the vertex itself
		{60, 120, out, func(u taylor.F) taylor.F { return cosine(u.Sub(u.Of(60 / toDeg))).Scale(w) }},
		{120, 180, w + out, func(u taylor.F) taylor.F {
			return u.Of(w).Sub(cosine(u.Of(180 / toDeg).Sub(u)).Scale(w))
		}},
		{180, 240, out, func(u taylor.F) taylor.F { return u.Of(0) }},
	}
	far := plane.Polar(w, plane.Degrees(60)) // the corner after the far arc
	near(t, "P12 support", pieces[0].lift(taylor.FVar(30 / toDeg)).C[0], 30, printed)
	near(t, "P12 support", pieces[1].lift(taylor.FVar(90 / toDeg)).C[0], 25.98076211353, printed)
	near(t, "P12 support", pieces[1].lift(taylor.FVar(120 / toDeg)).C[0], 15, printed)
	near(t, "P12 support", pieces[2].lift(taylor.FVar(150 / toDeg)).C[0], 4.019237886467, printed)
	centers := []plane.Point{{}, far, plane.Polar(w, 0), {}}
	for i, p := range pieces {
		c := closed(flat(out), p.lift)
		onCircle(t, "P12", c, p.from, p.to, centers[i], p.rho)
		// The sharp triangle itself is the parallel inside: its corners are cusps of the curve.
		for k := 1; k < 10; k++ {
			deg := p.from + (p.to-p.from)*float64(k)/10
			sp, phi := c.kind.(follower.Face).SupportF(taylor.FVar(deg), c.lift(deg))
			fr, rho := follower.FaceFrame(sp, phi, -out)
			near(t, "P12 sharp radius", rho, p.rho-out, pairTol)
			near(t, "P12 sharp tangent", fr.T.Angle().Deg(), plane.Angle(math.Remainder((deg+90)/toDeg, 2*math.Pi)).Deg(), pairTol)
			near(t, "P12 sharp point", fr.P.Dist(centers[i]), p.rho-out, pairTol)
		}
	}
}
