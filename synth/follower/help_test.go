package follower_test

import (
	"math"

	"gonum.org/v1/gonum/integrate/quad"

	"lobewright/synth/follower"
	"lobewright/synth/motion"
	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"pgregory.net/rapid"
)

const toDeg = 180 / math.Pi

// cam is a follower with its motion.
type cam struct {
	kind follower.Kind
	lift func(deg float64) taylor.F // series in degrees about deg
}

// of joins a follower with a cycle.
func of(k follower.Kind, c *motion.Cycle) cam {
	zones := c.Zones()
	return cam{k, func(deg float64) taylor.F {
		i, t := c.Zone(deg)
		return motion.Eval(zones[i], taylor.FVar(t))
	}}
}

func (c cam) base(deg float64) (x, y taylor.F) { return c.kind.F(taylor.FVar(deg), c.lift(deg)) }

// contour is the base curve, or its parallel one radius nearer to the cam: to the left
// of growing cam angle when the cam turns clockwise.
func (c cam) contour(deg float64) plane.Point {
	x, y := c.base(deg)
	inward := plane.Vector{X: x.C[1], Y: y.C[1]}.Unit().Left().Scale(c.kind.Sense())
	return plane.Point{X: x.C[0], Y: y.C[0]}.Add(inward.Scale(c.kind.Radius()))
}

// curvature is the textbook's (x'y” - y'x”)/(x'² + y'²)^(3/2).
func curvature(x, y taylor.F) float64 {
	dx, dy, ddx, ddy := x.Deriv(1), y.Deriv(1), x.Deriv(2), y.Deriv(2)
	return (dx*ddy - dy*ddx) / math.Pow(dx*dx+dy*dy, 1.5)
}

// radius is the base curve's radius of curvature, positive where convex.
func (c cam) radius(deg float64) float64 {
	if f, ok := c.kind.(follower.Face); ok {
		p, phi := f.SupportF(taylor.FVar(deg), c.lift(deg))
		return follower.RadiusOfCurvature(p, phi).C[0]
	}
	return c.kind.Sense() / curvature(c.base(deg))
}

// frame is the base curve's osculating circle.
func (c cam) frame(deg float64) plane.Frame {
	if f, ok := c.kind.(follower.Face); ok {
		p, phi := f.SupportF(taylor.FVar(deg), c.lift(deg))
		fr, _ := follower.FaceFrame(p, phi, 0)
		return fr
	}
	x, y := c.base(deg)
	return plane.Frame{
		P: plane.Point{X: x.C[0], Y: y.C[0]},
		T: plane.Vector{X: x.C[1], Y: y.C[1]}.Unit(),
		K: curvature(x, y),
	}
}

// pressure is the pressure angle in degrees.
func (c cam) pressure(deg float64) float64 {
	s := c.lift(deg)
	return c.kind.PressureAngle(s.C[0], s.C[1]*toDeg).Deg()
}

// touch is Kind.Contact at a cam angle.
func (c cam) touch(deg float64) float64 {
	s := c.lift(deg)
	return c.kind.Contact(s.C[0], s.C[1]*toDeg)
}

// near holds got to want within tol, relative for values above 1.
func near(t rapid.TB, what string, got, want, tol float64) {
	t.Helper()
	if !(math.Abs(got-want) <= tol*math.Max(1, math.Abs(want))) {
		t.Errorf("%s: got %.14g, want %.14g", what, got, want)
	}
}

// event is one event of a cycle; a lift above 0 rises, below 0 falls.
func event(t rapid.TB, lift, over float64, law string) motion.Event {
	t.Helper()
	if lift == 0 {
		return motion.Event{Kind: motion.Dwell, Over: over}
	}
	l, err := motion.Named(law, 0.5)
	if err != nil {
		t.Fatal(err)
	}
	if lift < 0 {
		return motion.Event{Kind: motion.Fall, Lift: -lift, Over: over, Law: l}
	}
	return motion.Event{Kind: motion.Rise, Lift: lift, Over: over, Law: l}
}

func join(t rapid.TB, events ...motion.Event) *motion.Cycle {
	t.Helper()
	c, err := motion.Join(0, 0, events)
	if err != nil {
		t.Fatal(err)
	}
	return c
}

// riseAndBack is a rise, and a fall by the same law over what a half turn leaves.
func riseAndBack(t rapid.TB, h, over float64, law string) *motion.Cycle {
	return join(t, event(t, h, over, law), event(t, 0, 180-over, ""), event(t, -h, over, law), event(t, 0, 180-over, ""))
}

// integral of f over the turn, zone by zone, in degrees.
func integral(c *motion.Cycle, f func(deg float64) float64) float64 {
	sum := 0.0
	for _, z := range c.Zones() {
		sum += quad.Fixed(f, z.From, z.To, 80, quad.Legendre{}, 0)
	}
	return sum
}

// Constructors that a test's own numbers cannot make fail.
func must[T any](k T, err error) T {
	if err != nil {
		panic(err)
	}
	return k
}

func roller(base, radius, offset float64, clockwise bool) follower.TranslatingRoller {
	f, ok := follower.NewTranslatingRoller(base, radius, offset, clockwise)
	if !ok {
		panic("offset past the prime circle")
	}
	return f
}
