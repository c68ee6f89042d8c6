package follower_test

import (
	"math"
	"testing"

	"lobewright/synth/follower"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
)

// Pairs of which the contour is a known curve other than one eccentric circle: see
// pairs_test.go.

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
