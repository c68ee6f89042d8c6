package synth

import (
	"fmt"
	"math"

	"lobewright/synth/gate"
	"lobewright/synth/spec"
)

// Gates judges the cam itself: motion, contour, body and the reach of every
// tool. What is written to files is judged where it is written.
func (c *Cam) Gates() []gate.Gate {
	if _, ok := c.drum(); ok {
		return c.drumGates()
	}
	g := []gate.Gate{c.pressureGate()}
	if r := c.returnGate(); r != nil {
		g = append(g, *r)
	}
	g = append(g, c.kindGates()...)
	g = append(g, c.undercutGate())
	if r := c.radiusGate(); r != nil {
		g = append(g, *r)
	}
	g = append(g, c.motionGates()...)
	if c.Grooved() {
		g = append(g, c.grooveGates()...)
	}
	g = append(g, c.wallGate(), c.datumGate())
	if b := c.blankGate(); b != nil {
		g = append(g, *b)
	}
	g = append(g, c.fluteGates()...)
	return append(g, c.reachGates()...)
}

// fluteGates: where the length of the cutting edges is told, they must be as long as the cut is deep.
func (c *Cam) fluteGates() []gate.Gate {
	var g []gate.Gate
	for i, op := range c.spec.Operations {
		if op.FluteLength == 0 {
			continue
		}
		depth := c.spec.Cam.GrooveDepth
		if !c.Grooved() {
			depth = c.spec.Cam.Thickness + op.Breakthrough
		}
		g = append(g, gate.Gate{ID: "flute-length", Of: fmt.Sprintf("%d-%s", i+1, op.Process), Value: depth, Limit: op.FluteLength, Unit: c.unit(), CamAngle: math.NaN(), Polar: math.NaN(),
			Pass: depth <= op.FluteLength, Text: fmt.Sprintf("operation %d: depth of the last cut against the length of the tool's cutting edges; take a longer tool", i+1)})
	}
	return g
}

// polarAt returns the polar angle of the contour at a cam angle of a piece.
func (c *Cam) polarAt(piece int, t float64) float64 {
	if _, ok := c.drum(); ok {
		return camAngle(c.follower.Sense() * t)
	}
	return c.Contour().At(piece, t).P.PolarAngle()
}

func camAngle(t float64) float64 {
	t = math.Mod(t, 360)
	if t < 0 {
		t += 360
	}
	return t
}

func (c *Cam) unit() string { return c.spec.Units.Short() }

// moving reports what the follower does at cam angle t of a zone: +1 rises, -1
// falls, 0 dwells. A zone of a law goes one way; a polynomial between velocities may turn
// back, and so may what was completed or smoothed.
func (c *Cam) moving(zone int, t float64) int {
	z := c.zones[zone]
	switch {
	case z.Dwell:
		return 0
	case z.Event >= 0 && c.spec.Motion.Events[z.Event].Law.Name != spec.Polynomial:
		if c.spec.Motion.Events[z.Event].Kind == spec.Rise {
			return 1
		}
		return -1
	}
	const inside = 1e-6 // of the way to the middle: at a zone's end the velocity may be 0
	if c.LiftIn(zone, t+inside*((z.From+z.To)/2-t)).V >= 0 {
		return 1
	}
	return -1
}

func (c *Cam) steepest(way int) place {
	return c.Pitch().largest(func(i int) bool { return !c.zones[i].Dwell },
		func(i int, t float64) float64 {
			if c.moving(i, t) != way {
				return 0
			}
			return math.Abs(c.PressureAngleIn(i, t).Deg())
		})
}

func (c *Cam) pressureGate() gate.Gate {
	p, limit, what := c.steepest(1), c.spec.Limits.PressureAngle, "rises"
	if fall := c.steepest(-1); c.Grooved() && fall.value > p.value { // a groove drives both ways
		p, what = fall, "falls"
	}
	return gate.Gate{
		ID: "pressure-angle", Value: p.value, Limit: limit, Unit: "deg",
		CamAngle: camAngle(p.t), Polar: c.polarAt(p.piece, p.t), Pass: p.value <= limit,
		Text: "largest pressure angle of the " + what + "; enlarge base_radius, lengthen the event or choose a law with less peak velocity",
	}
}

func (c *Cam) returnGate() *gate.Gate {
	if c.spec.Limits.PressureAngleReturn == nil {
		return nil
	}
	p, limit := c.steepest(-1), *c.spec.Limits.PressureAngleReturn
	return &gate.Gate{
		ID: "pressure-angle-return", Value: p.value, Limit: limit, Unit: "deg",
		CamAngle: camAngle(p.t), Polar: c.polarAt(p.piece, p.t), Pass: p.value <= limit,
		Text: "largest pressure angle of the falls; enlarge base_radius or lengthen the fall",
	}
}

// undercutGate compares the roller with the largest disc that fits inside the
// pitch curve everywhere. A smaller disc than the roller means the contour loops,
// comes to a cusp, or is cut away from elsewhere on the cam. Under a flat face the
// contour's radius of curvature must stay above 0.
func (c *Cam) undercutGate() gate.Gate {
	if _, ok := c.face(); ok {
		return c.faceUndercut()
	}
	d, r := c.Pitch().LeastDisc(false), c.inset()
	why := "the pitch curve turns too sharply there"
	if d.Neck {
		why = fmt.Sprintf("the roller already overlaps the flank at cam angle %.2f°", camAngle(d.Other))
	}
	text := "largest roller that fits inside the pitch curve everywhere"
	if d.Radius <= r {
		text = fmt.Sprintf("a roller of radius %.4g cannot follow the pitch curve: %s, and the contour would lose the lift there%s; use a smaller roller or a larger base_radius", r, why, c.stays())
	}
	return gate.Gate{
		ID: "undercut", Value: d.Radius, Limit: r, Unit: c.unit(), AtLeast: true,
		CamAngle: camAngle(d.At), Polar: d.Point.PolarAngle(), Pass: d.Radius > r, Text: text,
	}
}

func (c *Cam) faceUndercut() gate.Gate {
	r, at := c.leastRound()
	g := gate.Gate{ID: "undercut", Value: r, Unit: c.unit(), AtLeast: true, CamAngle: camAngle(at.t), Polar: c.polarAt(at.piece, at.t), Pass: r > 0,
		Text: "least radius of curvature of the contour under the face, negative where it would loop"}
	if !g.Pass {
		g.Text = "the contour would loop there, and the face would not touch it" + c.stays() + "; enlarge base_radius or lengthen the event"
	}
	return g
}

func (c *Cam) radiusGate() *gate.Gate {
	if c.spec.Limits.RadiusOfCurvature == nil {
		return nil
	}
	r, at := c.leastRound()
	limit := *c.spec.Limits.RadiusOfCurvature
	return &gate.Gate{
		ID: "radius-of-curvature", Value: r, Limit: limit, Unit: c.unit(), AtLeast: true,
		CamAngle: camAngle(at.t), Polar: c.polarAt(at.piece, at.t), Pass: r >= limit,
		Text: "least convex radius of curvature of the contour; enlarge base_radius or lengthen the event",
	}
}

// motionGates judge the peaks of the motion at the camshaft's speed.
func (c *Cam) motionGates() []gate.Gate {
	peaks, w, u := c.Peaks(), c.Omega(), c.LiftUnit()
	var g []gate.Gate
	add := func(id string, limit *float64, value, at float64, unit, text string) {
		if limit != nil {
			zone, t := c.cycle.Zone(at)
			g = append(g, gate.Gate{ID: id, Value: value, Limit: *limit, Unit: unit, CamAngle: camAngle(at),
				Polar: c.polarAt(zone, t), Pass: value <= *limit, Text: text})
		}
	}
	l := c.spec.Limits
	add("velocity", l.Velocity, peaks.V*w, peaks.VAt, u+"/s", "peak velocity of the follower at the camshaft's speed")
	add("acceleration", l.Acceleration, peaks.A*w*w, peaks.AAt, u+"/s²", "peak acceleration of the follower at the camshaft's speed")
	text := "peak jerk of the follower at the camshaft's speed"
	if math.IsInf(peaks.J, 1) {
		text = "the acceleration jumps, so the jerk has no bound; choose a law without a jump"
	}
	add("jerk", l.Jerk, peaks.J*w*w*w, peaks.JAt, u+"/s³", text)
	return g
}

func (c *Cam) datumGate() gate.Gate {
	g := gate.Gate{ID: "angular-datum", Limit: 1, AtLeast: true, CamAngle: math.NaN(), Polar: math.NaN(),
		Text: "features that fix the cam's angle on the shaft: a keyway, or a hole off the axis"}
	b := c.spec.Cam
	if b.Bore != nil && b.Bore.Keyway != nil {
		g.Value++
	}
	for _, h := range b.Holes {
		if h.Radius > 0 {
			g.Value++
		}
	}
	g.Pass = g.Value >= 1
	switch {
	case g.Pass:
	case b.NoDatum:
		g.Pass, g.Limit = true, 0
		g.Text = "none, as the spec says outright (datum: none)"
	default:
		g.Text = "nothing fixes the cam's angle on the shaft; give cam.bore.keyway, or a hole off the axis, or say cam: {datum: none}"
	}
	return g
}

// blankGate: the blank must hold the contour.
func (c *Cam) blankGate() *gate.Gate {
	if c.spec.Blank == nil {
		return nil
	}
	con := c.Contour()
	far := con.largest(every, func(i int, t float64) float64 { return con.At(i, t).P.Radius() })
	if r := c.spec.Cam.OutsideDiameter / 2; c.Grooved() {
		far.value = r
	}
	limit := c.spec.Blank.Diameter / 2
	return &gate.Gate{
		ID: "blank", Value: far.value, Limit: limit, Unit: c.unit(), CamAngle: camAngle(far.t),
		Polar: c.polarAt(far.piece, far.t), Pass: far.value <= limit,
		Text: "largest radius of the contour against the radius of the blank; take a larger blank",
	}
}

// reachGates: one an operation. The tool's center runs at the largest of its
// offsets (radius + stock), and must be able to touch the contour everywhere from there.
func (c *Cam) reachGates() []gate.Gate {
	if len(c.spec.Operations) == 0 {
		return nil
	}
	if c.Grooved() {
		return c.slotGates()
	}
	con := c.Contour()
	d := con.LeastDisc(true)
	var g []gate.Gate
	for i, op := range c.spec.Operations {
		need := 0.0
		for _, o := range Offsets(op) {
			need = math.Max(need, o)
		}
		x := gate.Gate{
			ID: "reach", Of: fmt.Sprintf("%d-%s", i+1, op.Process), Value: need, Limit: d.Radius, Unit: c.unit(), CamAngle: camAngle(d.At), Polar: d.Point.PolarAngle(),
			Pass: need < d.Radius,
			Text: fmt.Sprintf("operation %d (%s): tool radius with stock against the largest that reaches every flank", i+1, op.Process),
		}
		if math.IsInf(d.Radius, 1) {
			x.CamAngle, x.Polar = math.NaN(), math.NaN()
		}
		if !x.Pass {
			u := con.Leaves(need)
			x.Text = fmt.Sprintf("operation %d (%s): a tool that needs radius %.4g cannot reach; it would leave %.4g %s of material at cam angle %.2f° (polar %.2f°); use a smaller tool or less stock",
				i+1, op.Process, need, u.Depth, c.unit(), camAngle(u.At), u.Point.PolarAngle())
		}
		g = append(g, x)
	}
	return g
}

// Offsets returns the distance of the tool center from the contour in each pass
// of an operation, length.
func Offsets(op spec.Operation) []float64 {
	if op.Process == "wire" {
		return op.Offsets
	}
	o := make([]float64, len(op.Stock))
	for i, s := range op.Stock {
		o[i] = op.ToolDiameter/2 + s
	}
	return o
}
