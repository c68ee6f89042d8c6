package follow_test

import (
	"math"
	"testing"

	"lobewright/synth/plane"
	"lobewright/tolerance/chain"
	"lobewright/tolerance/follow"
	"pgregory.net/rapid"
)

const deg = math.Pi / 180

// tb is what testing.T and rapid.T share.
type tb interface {
	Helper()
	Errorf(string, ...any)
}

func near(t tb, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol) {
		t.Errorf("%s: got %.15g, want %.15g (off by %.2g, allowed %.2g)", what, got, want, got-want, tol)
	}
}

// arcs cuts the circle into n counterclockwise arcs, the first beginning at polar angle from
// (degrees, about the circle's center).
func arcs(c plane.Circle, from float64, n int) chain.Path {
	at := func(i int) plane.Point {
		return c.Center.Add(plane.Unit(plane.Degrees(from + 360*float64(i%n)/float64(n))).Scale(c.Radius))
	}
	var p chain.Path
	for i := range n {
		p = append(p, chain.Element{Kind: chain.Arc, From: at(i), To: at(i + 1), Center: c.Center, CCW: true})
	}
	return p
}

// eccentric is the eccentric circular cam: crank e, connecting rod m (radius of the
// roller center's path), follower offset f towards +Y, cam turning clockwise.
type eccentric struct{ e, m, f float64 }

func (c eccentric) roller() follow.Roller {
	return follow.Roller{Offset: c.f, Datum: math.Sqrt((c.m-c.e)*(c.m-c.e) - c.f*c.f), Clockwise: true}
}

func (c eccentric) gamma() float64 { return math.Atan2(c.f, c.roller().Datum) }

func (c eccentric) circle() plane.Circle {
	return plane.Circle{Center: plane.Polar(c.e, plane.Angle(c.gamma()+math.Pi)), Radius: c.m}
}

// motion is the slider-crank: the crank pin stands at angle q = γ + π - φ in the
// machine, x = e cos q + √(m² - (f - e sin q)²).
func (c eccentric) motion(phi float64) (s, v, a float64) {
	sin, cos := math.Sincos(c.gamma() + math.Pi - phi*deg)
	y := c.f - c.e*sin
	root := math.Sqrt(c.m*c.m - y*y)
	yp, ypp := c.e*cos, c.e*sin // dq/dφ = -1
	s = c.e*cos + root - c.roller().Datum
	v = c.e*sin - y*yp/root
	a = -c.e*cos - (yp*yp+y*ypp)/root - y*y*yp*yp/(root*root*root)
	return s, v, a
}

// Lifts of the eccentric cams by 30-digit arithmetic: in-line s = -e cos φ +
// √(m² - e² sin²φ) - (m-e), and offset by 6.
func TestEccentricLifts(t *testing.T) {
	for _, c := range []struct {
		cam  eccentric
		want map[float64]float64
	}{
		{eccentric{12, 50, 0}, map[float64]float64{0: 0, 30: 1.24638973855, 60: 4.90807704255, 90: 10.53864439805, 120: 16.90807704255, 180: 24}},
		{eccentric{12, 50, 6}, map[float64]float64{0: 0, 30: 1.237901709038, 60: 4.801062956144, 90: 10.23859508626, 120: 16.48840966165, 180: 24.15732846742}},
	} {
		whole := arcs(c.cam.circle(), 33, 1)[0]
		for phi, want := range c.want {
			got, _, _, touches := c.cam.roller().On(phi, whole)
			near(t, "lift", got, want, 6e-12)
			if !touches {
				t.Errorf("at %g the roller is not on the whole circle", phi)
			}
		}
	}
}

// On any cut of the circle, in either direction of travel, the motion is the
// slider-crank's, and each angle is held by one arc, or by two beside a joint.
func TestEccentricDerivatives(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		m := rapid.Float64Range(10, 200).Draw(t, "rod")
		e := m * rapid.Float64Range(0, 0.6).Draw(t, "crank")
		c := eccentric{e, m, (m - e) * rapid.Float64Range(-0.5, 0.5).Draw(t, "offset")}
		path := arcs(c.circle(), rapid.Float64Range(0, 360).Draw(t, "from"), rapid.IntRange(1, 40).Draw(t, "arcs"))
		if rapid.Bool().Draw(t, "backward") {
			path = path.Reverse()
		}
		phi := rapid.Float64Range(-400, 800).Draw(t, "cam angle")
		s, v, a := c.motion(phi)
		held := 0
		for _, el := range path {
			gs, gv, ga, touches := c.roller().On(phi, el)
			near(t, "lift", gs, s, 1e-10)
			near(t, "velocity", gv, v, 1e-10)
			near(t, "acceleration", ga, a, 1e-9)
			if touches {
				held++
			}
		}
		joint := false
		for _, el := range path {
			past := plane.Wrap360(phi - c.roller().AngleOf(el.From))
			joint = joint || math.Min(past, 360-past) < 2e-9
		}
		if held != 1 && !(joint && held == 2) {
			t.Errorf("%d arcs hold cam angle %g", held, phi)
		}
	})
}

// A straight flank of an in-line follower: the line at distance p from the axis with
// normal at cam angle n gives x = p/cos(φ-n).
func TestLine(t *testing.T) {
	const p, n = 40.0, 70.0
	foot := plane.Polar(p, plane.Degrees(n))
	along := plane.Unit(plane.Degrees(n + 90))
	line := chain.Element{Kind: chain.Line, From: foot.Add(along.Scale(-15)), To: foot.Add(along.Scale(20))}
	r := follow.Roller{Datum: 38, Clockwise: true}
	for phi := 52.0; phi <= 94; phi += 3 {
		x := (phi - n) * deg
		sec, tan := 1/math.Cos(x), math.Tan(x)
		s, v, a, touches := r.On(phi, line)
		near(t, "lift", s, p*sec-38, 1e-12)
		near(t, "velocity", v, p*sec*tan, 1e-12)
		near(t, "acceleration", a, p*sec*(tan*tan+sec*sec), 1e-11)
		if want := x >= -math.Atan(15/p) && x <= math.Atan(20/p); touches != want {
			t.Errorf("at %g: touches %v, want %v", phi, touches, want)
		}
	}
}

// Through an inflection: on arcs that bend off the line by either hand, the motion goes
// over into that of the line in proportion to their curvature.
func TestInflection(t *testing.T) {
	r := follow.Roller{Datum: 40, Offset: 3, Clockwise: true}
	from, heading := plane.Point{X: 41, Y: 2}, plane.Unit(plane.Degrees(80))
	line := chain.Element{Kind: chain.Line, From: from, To: from.Add(heading.Scale(10))}
	phi := r.AngleOf(line.PointAt(0.4))
	s0, v0, a0, _ := r.On(phi, line)
	bent := func(k float64) (s, v, a float64) {
		chord := heading.Turn(plane.Angle(10 * k / 2)).Scale(2 / k * math.Sin(10*k/2))
		e := chain.Element{Kind: chain.Arc, From: from, To: from.Add(chord), Center: from.Add(heading.Left().Scale(1 / k)), CCW: k > 0}
		s, v, a, touches := r.On(phi, e)
		if !touches {
			t.Errorf("k = %g: the arc is not touched", k)
		}
		return (s - s0) / k, (v - v0) / k, (a - a0) / k
	}
	s1, v1, a1 := bent(1e-4)
	if !(a1 < -100) {
		t.Fatalf("acceleration by curvature %g: a left turn should brake the follower", a1)
	}
	for _, size := range []float64{1e-5, 1e-6, 1e-7, 1e-8} {
		for _, k := range []float64{size, -size} {
			s, v, a := bent(k)
			near(t, "lift by curvature", s, s1, 0.02*math.Abs(s1)+1e-12/size)
			near(t, "velocity by curvature", v, v1, 0.02*math.Abs(v1)+1e-11/size)
			near(t, "acceleration by curvature", a, a1, 0.02*math.Abs(a1)+1e-10/size)
		}
	}
}

// The cam turning counterclockwise, with everything mirrored about the X axis, moves
// its follower alike.
func TestMirrored(t *testing.T) {
	rapid.Check(t, func(t *rapid.T) {
		c := eccentric{rapid.Float64Range(1, 20).Draw(t, "crank"), 50, rapid.Float64Range(-20, 20).Draw(t, "offset")}
		e := arcs(c.circle(), rapid.Float64Range(0, 360).Draw(t, "from"), 5)[2]
		m := e
		for _, p := range []*plane.Point{&m.From, &m.To, &m.Center} {
			p.Y = -p.Y
		}
		m.CCW = false
		r := c.roller()
		q := follow.Roller{Offset: -r.Offset, Datum: r.Datum}
		phi := rapid.Float64Range(0, 360).Draw(t, "cam angle")
		s, v, a, touches := r.On(phi, e)
		s2, v2, a2, touches2 := q.On(phi, m)
		if s != s2 || v != v2 || a != a2 || touches != touches2 {
			t.Errorf("clockwise %v %v %v %v, counterclockwise %v %v %v %v", s, v, a, touches, s2, v2, a2, touches2)
		}
	})
}

// An arc whose end radii differ by a grid's mismatch starts and ends at its own points.
func TestMismatchedArc(t *testing.T) {
	r := follow.Roller{Datum: 38, Offset: -4, Clockwise: true}
	for _, sweep := range []float64{3, 40, 100, 170, 200, 330} {
		c := plane.Point{X: -6, Y: 5}
		e := chain.Element{Kind: chain.Arc, Center: c, CCW: true,
			From: c.Add(plane.Unit(0).Scale(50)), To: c.Add(plane.Unit(plane.Degrees(sweep)).Scale(50.002))}
		for _, p := range []plane.Point{e.From, e.To} {
			s, _, _, touches := r.On(r.AngleOf(p), e)
			near(t, "roller center's distance", math.Hypot(s+r.Datum, r.Offset), p.Radius(), 1e-6)
			if !touches {
				t.Errorf("sweep %g: the end is not on the arc", sweep)
			}
		}
	}
}

func TestOutOfReach(t *testing.T) {
	near := chain.Element{Kind: chain.Line, From: plane.Point{X: 1, Y: 0}, To: plane.Point{X: 1, Y: 1}}
	if _, _, _, touches := (follow.Roller{Offset: 5, Datum: 30}).On(10, near); touches {
		t.Error("a line nearer to the axis than the follower's line is touched")
	}
	if got := (follow.Roller{Offset: 5}).AngleOf(plane.Point{X: 1}); !math.IsNaN(got) {
		t.Errorf("angle %g for a point out of reach, want NaN", got)
	}
	e := arcs(plane.Circle{Center: plane.Point{X: 30}, Radius: 5}, 0, 4)[0]
	if _, _, _, touches := (follow.Roller{Datum: 30, Clockwise: true}).On(90, e); touches {
		t.Error("a circle off the follower's line is touched")
	}
}
