// The smallest base radius of a cam.
//
// The problem: pressure angle, curvature, the face and the tools each ask for a base
// circle of some size. Trying radii until the gates pass finds a size that works, not the
// smallest. Bisection finds the smallest only where every larger cam is better and every
// smaller one worse: for curvature nobody has shown that, and for a follower that swings
// about a fixed pivot it is false, because the arm's angle changes with the base radius.
//
// The method: from the smallest sensible radius upwards, the radii are cut into
// intervals. For each interval one cam angle is found at which a limit is broken by every
// radius in it, with the textbook's closed forms evaluated as Taylor enclosures in the
// base radius. An interval that cannot be excluded is halved; where halving no longer
// helps, a radius that meets the limits is looked for within a thousandth, by bisection. If
// there is none the search goes on above, and what was left undecided is said. Of a
// translating flat face the closed form Rb + s + s” is linear in the base radius, and this
// comes down to Rb = least radius - min(s + s”).
//
// Price: some hundred passes over the motion's samples, some hundredths of a second.

package synth

import (
	"fmt"
	"math"

	"lobewright/synth/gate"
	"lobewright/synth/spec"
)

// Limit is one limit on the base radius.
type Limit struct {
	ID       string  // the gate that enforces it
	Least    float64 // smallest base radius that meets it alone, length
	CamAngle float64 // where it binds at that radius, degrees
	Margin   float64 // what is left of it at the answer, in Unit; +Inf when nothing there needs it
	Unit     string
}

// Sizing is the answer to "how small may this cam be".
type Sizing struct {
	BaseRadius               float64 // smallest that meets every limit, length
	Binds                    string  // the limit that binds
	Limits                   []Limit // each limit
	Rows                     []SizingRow
	Excluded                 float64 // every base radius from the smallest sensible one to this one is proven to fail, length
	Floor                    float64 // the smallest sensible base radius: the bore's, or what offset or arm ask for, length
	OffsetFree               bool    // the offset was free, and is now BestOffset
	Scaled                   bool    // pivot and arm grew with the base radius, and are those that follow
	ArmLength, PivotDistance float64 // length
	BestOffset               float64 // the offset the answer holds for, length: the spec's, or the one that allows the smallest base radius
}

// SizingRow is one line of the trade-off.
type SizingRow struct {
	BaseRadius    float64 // length
	PressureAngle float64 // largest of the rises, degrees
	ConvexRadius  float64 // least convex radius of curvature of the contour, length; below 0 when undercut
	Pass          bool    // every limit
}

// largestSize is how many times the lift or the roller no cam is larger than.
const largestSize = 1e4

// Size finds the smallest base radius that meets the limits of the spec, a plate's or a groove's; pivot, arm and
// face of a swinging follower stay where they are. A free offset becomes the one that allows the
// smallest. Fails when limits.radius_of_curvature is not given, when the cam is a barrel, and
// when no radius meets the limits.
func Size(s *spec.Spec) (Sizing, error) { return size(s, 0) }

// SizeScaled is Size with pivot, arm and face of a swinging follower in the proportion to the base radius that
// they have in the spec. Fails also when the follower does not swing.
func SizeScaled(s *spec.Spec) (Sizing, error) {
	if !s.Follower.Swings() {
		return Sizing{}, fmt.Errorf("%s:%d:%d: found follower.kind %s; allowed with pivot and arm in proportion: swinging-roller, swinging-flat", s.File, s.Follower.Place.Line, s.Follower.Place.Column, s.Follower.Kind)
	}
	return size(s, s.Cam.BaseRadius)
}

func size(s *spec.Spec, scaled float64) (Sizing, error) {
	if s.Limits.RadiusOfCurvature == nil {
		return Sizing{}, fmt.Errorf("%s:1:1: found no limits.radius_of_curvature; to size a cam give the least convex radius of the contour, for example limits: {radius_of_curvature: %g}",
			s.File, exampleRadius(s))
	}
	if s.Cam.Kind != "plate" && s.Cam.Kind != "groove" {
		return Sizing{}, fmt.Errorf("%s:%d:%d: found cam.kind %s; allowed for sizing: plate, groove", s.File, s.Cam.Place.Line, s.Cam.Place.Column, s.Cam.Kind)
	}
	c, err := startOfSizing(s)
	if err != nil {
		return Sizing{}, err
	}
	z, ok := newSizer(c, c.samples(), scaled)
	if !ok {
		return Sizing{}, fmt.Errorf("%s:%d:%d: found follower.kind %s; sizing does not know it", s.File, s.Follower.Place.Line, s.Follower.Place.Column, s.Follower.Kind)
	}
	for _, p := range z.rows {
		if outruns(z.kind, float64(p.m.v)) {
			return Sizing{}, fmt.Errorf("%s: at cam angle %.2f° the face swings as fast as the cam turns, which no base radius can do; lengthen the event", s.File, camAngle(p.t))
		}
	}
	if s.Follower.OffsetFree {
		if z, err = z.bestOffset(); err != nil {
			return Sizing{}, err
		}
	}
	out, err := z.size()
	out.OffsetFree, out.BestOffset = s.Follower.OffsetFree, z.cam.spec.Follower.Offset
	return out, err
}

// exampleRadius is a least convex radius of the size that cams have, length.
func exampleRadius(s *spec.Spec) float64 {
	if r := s.Follower.RollerDiameter / 4; r > 0 {
		return r
	}
	return s.Cam.BaseRadius / 8
}

// size sizes the cam with the follower as it is.
func (z *sizer) size() (Sizing, error) {
	limits, top := z.limits(), z.top()
	out := Sizing{Floor: z.floor()}
	out.Excluded = out.Floor
	for _, l := range limits {
		least, proven, ok := z.first([]sizeLimit{l}, out.Floor, top)
		if !ok {
			return out, fmt.Errorf("%s: no base radius up to %.6g meets limit %s", z.cam.spec.File, top, l.id)
		}
		_, _, at := z.margin(l, least)
		out.Limits = append(out.Limits, Limit{ID: l.id, Least: least, CamAngle: camAngle(at)})
		out.Excluded = math.Max(out.Excluded, proven)
	}
	base, proven, ok := z.first(limits, out.Excluded, top)
	if !ok {
		return out, fmt.Errorf("%s: no base radius up to %.6g meets all limits at once", z.cam.spec.File, top)
	}
	out.BaseRadius, out.Excluded, out.Binds = base, proven, "bore or offset"
	if below := base * (1 - 1e-6); below > out.Floor {
		for _, l := range limits {
			if m, _, _ := z.margin(l, below); !(m >= 0) {
				out.Binds = l.id
				break
			}
		}
	}
	if err := z.settle(&out); err != nil {
		return out, err
	}
	from, to := standing(z.kind, z.scaled)
	for _, f := range []float64{0.7, 0.8, 0.9, 1, 1.1, 1.25, 1.5, 2} {
		if r := f * base; r > from && r < to {
			out.Rows = append(out.Rows, z.row(limits, r))
		}
	}
	return out, nil
}

// settle builds the cam of the answer and reads what its gates leave. Gates that are no
// matter of one cam angle are said here when they fail: a roller that bridges two flanks, a
// neck too narrow for a tool, a pivot or an arm in the way.
func (z *sizer) settle(out *Sizing) error {
	s := *z.cam.spec
	s.Cam.BaseRadius = out.BaseRadius
	if z.scaled > 0 {
		unit := out.BaseRadius / z.scaled
		s.Follower.ArmLength, s.Follower.PivotDistance = unit*s.Follower.ArmLength, unit*s.Follower.PivotDistance
		s.Follower.Face.From, s.Follower.Face.To = unit*s.Follower.Face.From, unit*s.Follower.Face.To
		out.Scaled, out.ArmLength, out.PivotDistance = true, s.Follower.ArmLength, s.Follower.PivotDistance
	}
	c, err := z.cam.with(&s)
	if err != nil {
		return err
	}
	gates := append([]gate.Gate{c.pressureGate(), *c.radiusGate(), c.undercutGate()}, append(c.kindGates(), c.reachGates()...)...)
	if c.Grooved() {
		gates = append(gates, c.grooveGates()[0])
	}
	if g := c.returnGate(); g != nil {
		gates = append(gates, *g)
	}
	for _, g := range gates {
		if !g.Pass {
			return fmt.Errorf("%s: at base radius %.6g, which meets the limits of angle and curvature, gate %s still fails: %s", s.File, out.BaseRadius, g.ID, g.Text)
		}
	}
	for i, l := range out.Limits {
		out.Limits[i].Margin = math.Inf(1)
		for _, g := range gates {
			if g.ID != l.ID {
				continue
			}
			left := g.Limit - g.Value
			if g.AtLeast {
				left = -left
			}
			out.Limits[i].Margin, out.Limits[i].Unit = math.Min(out.Limits[i].Margin, left), g.Unit
		}
	}
	return nil
}

// with is the cam with another body or follower: s differs from its spec in nothing that
// the motion depends on.
func (c *Cam) with(s *spec.Spec) (*Cam, error) {
	out := *c
	out.spec, out.made = s, &curves{of: map[float64]*Curve{}}
	var err error
	out.follower, err = newFollower(s)
	return &out, err
}

// floor is the smallest base radius that leaves room for the bore and on which the
// follower can stand.
func (z *sizer) floor() float64 {
	from, _ := standing(z.kind, z.scaled)
	f := from + sizeSlack*(math.Abs(from)+z.kind.Radius())
	if b := z.cam.spec.Cam.Bore; b != nil {
		f = math.Max(f, b.Diameter/2)
		if b.Keyway != nil {
			f = math.Max(f, math.Hypot(b.Diameter/2+b.Keyway.Depth, b.Keyway.Width/2))
		}
	}
	return math.Max(f, z.scale()/1000)
}

// scale is a length of the cam that does not change with the base radius.
func (z *sizer) scale() float64 {
	if z.cam.Swings() {
		return z.cam.spec.Follower.PivotDistance
	}
	if r := z.kind.Radius(); r > 0 {
		return r
	}
	return z.cam.cycle.MaxLift()
}

func (z *sizer) top() float64 {
	_, to := standing(z.kind, z.scaled)
	return math.Min(to*(1-sizeSlack), largestSize*math.Max(z.scale(), z.cam.cycle.MaxLift()))
}

// row is the trade-off at one base radius.
func (z *sizer) row(limits []sizeLimit, base float64) SizingRow {
	steep, _, _ := z.lowest(func(p sizeSample) bool { return p.rises }, func(m moved[real]) float64 {
		x := z.float(real(base), m)
		return -math.Abs(math.Atan2(float64(x.n), float64(x.d))) * 180 / math.Pi
	})
	_, face := z.cam.face()
	round, _, _ := z.lowest(always, func(m moved[real]) float64 {
		x := z.float(real(base), m)
		if face {
			return float64(x.rho)
		}
		return -float64(x.turn / (x.q * x.q.Sqrt()))
	})
	if !face {
		round = -1/round - z.cam.inset()
	}
	return SizingRow{BaseRadius: base, PressureAngle: 0 - steep, ConvexRadius: round, Pass: z.met(limits, base)}
}
