// Package follow says what a follower does on a written path of lines
// and arcs: its lift, velocity and acceleration, and how far they are from the
// design.
//
// The obvious way, sampling the path's deviation and differentiating it, loses the
// acceleration in noise, and the deviation in micrometers says little of it: an arc
// chain within 1 µm may shake the follower with a fifth of its design acceleration.
// But on an arc of the roller center's path the arc's center is fixed in the
// cam, so cam, roller and follower are for that stretch a slider-crank, and on a line
// its limit: lift and derivatives are closed forms. They are written here in the
// curvature k, so that a line is the arc with k = 0 and an inflection is no exception.
package follow

import (
	"math"

	"lobewright/synth/plane"
	"lobewright/synth/taylor"
	"lobewright/tolerance/chain"
)

// Roller is a translating follower and the turning direction of its cam. In the
// machine its roller center moves along +X on the line y = Offset; at lift 0 it
// stands at x = Datum. Seen from the cam, points of the machine turn by +θ when
// the cam turns clockwise, by -θ when it turns counterclockwise.
type Roller struct {
	Offset    float64 // length, positive towards +Y
	Datum     float64 // length, √((base radius + roller radius)² - Offset²)
	Clockwise bool
}

// sense returns by which sign machine points turn in the cam frame.
func (r Roller) sense() float64 {
	if r.Clockwise {
		return 1
	}
	return -1
}

// AngleOf returns the cam angle in degrees, 0 <= angle < 360, at which a point of
// the cam frame lies on the follower's line ahead of the camshaft; NaN for a point
// nearer to the axis than the line is.
func (r Roller) AngleOf(p plane.Point) float64 {
	ahead := math.Sqrt((p.Radius() - r.Offset) * (p.Radius() + r.Offset))
	turn := plane.Angle(math.Atan2(p.Y, p.X) - math.Atan2(r.Offset, ahead))
	return plane.Wrap360(r.sense() * turn.Deg())
}

// On returns lift (length), velocity and acceleration (length per rad and rad²) of
// the follower at cam angle theta (degrees, any) while its roller center is on the
// element e of the roller center's path, and whether it is there at that angle. The
// element may run either way. Exact on the arc (to about 1e-13 of the radius); of an
// arc whose end radii differ, on the arc through both ends with their mean radius,
// which is within a second-order amount of the one whose radius goes over linearly.
//
// Outside the element's range the result is that of the prolonged arc; where the
// follower's line misses the circle altogether it is zeros.
func (r Roller) On(theta float64, e chain.Element) (lift, v, a float64, touches bool) {
	s, ok := r.stretch(e)
	if !ok {
		return 0, 0, 0, false
	}
	lift, v, a, ok = r.at(s, theta)
	return lift, v, a, ok && s.holds(theta)
}

// stretch is an element as the follower meets it, with growing cam angle.
type stretch struct {
	start        plane.Point  // A: where it begins
	tangent      plane.Vector // T: unit direction of travel there
	k            float64      // curvature, 1/length, positive turning left
	from, extent float64      // cam angle at which it is entered, and how long it lasts, degrees
	backward     bool         // the element ran against growing cam angle
}

// angleSlack is how far, in degrees, an angle found from a point may be off by
// rounding, with a wide margin.
const angleSlack = 1e-9

func (s stretch) holds(theta float64) bool {
	past := plane.Wrap360(theta - s.from)
	return past <= s.extent+angleSlack || past >= 360-angleSlack
}

func (r Roller) closing() float64 { return closing }

func (r Roller) closes(first, last plane.Point) bool { return closed(first, last) }

// stretch prepares an element; false where a point of it never comes to the
// follower's line, or where the path runs along that line.
func (r Roller) stretch(e chain.Element) (stretch, bool) {
	s := r.prepared(e)
	ahead := r.ahead(s)
	if ahead < 0 {
		s = r.prepared(e.Reverse())
		s.backward = true
		ahead = r.ahead(s)
	}
	return s, ahead > 0 && !math.IsNaN(s.extent)
}

// ahead returns the part of the tangent at the start that goes with the turning of
// the machine about the cam: positive on a path that is met with growing cam angle.
func (r Roller) ahead(s stretch) float64 {
	turn := plane.Degrees(-r.sense() * s.from)
	return r.sense() * s.tangent.Turn(turn).Y
}

func (r Roller) prepared(e chain.Element) stretch {
	s := stretch{start: e.From, tangent: startTangent(e), k: e.Curvature(), from: r.AngleOf(e.From)}
	s.extent = plane.Wrap360(r.AngleOf(e.To) - s.from)
	if math.Abs(e.Sweep()) > math.Pi && s.extent < angleSlack {
		s.extent += 360 // a full circle about the camshaft
	}
	return s
}

// startTangent returns the direction of travel at the start of the arc through both
// ends with the mean radius: half the sweep off the chord. For a full circle, whose
// chord says nothing, it is square to the radius.
func startTangent(e chain.Element) plane.Vector {
	const leastSine = 1e-3 // the chord's direction is then good to 1e-13
	half := e.Sweep() / 2
	if e.Kind != chain.Arc || math.Abs(half) > 1 && math.Abs(math.Sin(half)) < leastSine {
		return e.StartTangent()
	}
	return e.To.Sub(e.From).Unit().Turn(plane.Angle(-half))
}

// at returns the motion on the prolonged stretch at cam angle theta, degrees.
//
// In the machine frame, with A and T turned there, p = (x, Offset) on the arc means
//
//	T × (p-A) = k/2 |p-A|²
//
// which with X = x - Ax and Y = Offset - Ay is the quadratic
//
//	k/2 X² + Ty X + (k/2 Y² - Tx Y) = 0
//
// At a root Ty + kX is the Y part of the tangent at the contact. On a path met with
// growing cam angle it has the sign of the machine's turning about the cam, which
// picks the root; of its two forms the one that does not cancel is used, and for k = 0
// that is always the one that does not divide by k.
func (r Roller) at(s stretch, theta float64) (lift, v, a float64, ok bool) {
	sense := r.sense()
	sin, cos := taylor.FVar(float64(plane.Degrees(theta))).Scale(sense).SinCos()
	intoX := func(x, y float64) taylor.F { return cos.Scale(x).Add(sin.Scale(y)) }
	intoY := func(x, y float64) taylor.F { return cos.Scale(y).Sub(sin.Scale(x)) }
	ax, ay := intoX(s.start.X, s.start.Y), intoY(s.start.X, s.start.Y)
	tx, ty := intoX(s.tangent.X, s.tangent.Y), intoY(s.tangent.X, s.tangent.Y)
	y := ay.Of(r.Offset).Sub(ay)
	c := y.Mul(y).Scale(s.k / 2).Sub(tx.Mul(y))
	square := ty.Mul(ty).Sub(c.Scale(2 * s.k))
	if !(square.C[0] > 0) {
		return 0, 0, 0, false
	}
	root := square.Sqrt().Scale(sense)
	var x taylor.F
	if ty.C[0]*sense > 0 {
		x = c.Scale(-2).Div(ty.Add(root))
	} else {
		x = root.Sub(ty).Scale(1 / s.k)
	}
	f := ax.Add(x)
	lift, v, a = f.C[0]-r.Datum, f.Deriv(1), f.Deriv(2)
	return lift, v, a, !math.IsNaN(a) && !math.IsInf(a, 0)
}
