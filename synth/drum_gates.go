package synth

import (
	"fmt"
	"math"

	"lobewright/synth/gate"
)

// drumGates judges a barrel cam.
func (c *Cam) drumGates() []gate.Gate {
	g := []gate.Gate{c.drumPressure(), c.drumUndercut(), c.trackGate(), c.coreGate()}
	if r := c.returnGate(); r != nil {
		g = append(g, *r)
	}
	if r := c.radiusGate(); r != nil {
		g = append(g, *r)
	}
	g = append(g, c.motionGates()...)
	g = append(g, c.drumWall(), c.datumGate())
	if b := c.drumBlank(); b != nil {
		g = append(g, *b)
	}
	g = append(g, c.fluteGates()...)
	return append(g, c.drumReach()...)
}

// drumPressure is gated at the middle of the roller's depth; at the bottom it is larger.
func (c *Cam) drumPressure() gate.Gate {
	b, _ := c.drum()
	g := c.pressureGate()
	p := c.Pitch().largest(every, func(i int, t float64) float64 { return math.Abs(c.slopeIn(i, t)) })
	g.Text = fmt.Sprintf("largest pressure angle, at the middle of the roller's depth; at the groove's bottom it is %.2f°, at the outer radius %.2f°; enlarge radius, lengthen the event or choose a law with less peak velocity",
		b.Slant(p.value, b.BottomRadius()).Deg(), b.Slant(p.value, b.OuterRadius).Deg())
	return g
}

// largestRoller is the largest half width of the groove that no wall is undercut with at a
// place: the root of Wall.Clear, 1 - r A - r² B = 0.
func (c *Cam) largestRoller(zone int, t, along float64) float64 {
	l := c.LiftIn(zone, t)
	v2 := l.V*l.V + along*along
	a, b := along*math.Abs(l.A)/(v2*math.Sqrt(v2)), l.V/v2
	return 2 / (a + math.Sqrt(a*a+4*b*b))
}

// drumUndercut: neither wall may be cut away, by the roller's own turn or by another part of
// the track.
func (c *Cam) drumUndercut() gate.Gate {
	b, _ := c.drum()
	half := c.inset()
	least, where := math.Inf(1), place{}
	for i := range wallDepths {
		along := b.BottomRadius() + b.Depth*float64(i)/(wallDepths-1)
		if p := c.Pitch().largest(every, func(i int, t float64) float64 { return -c.largestRoller(i, t, along) }); -p.value < least {
			least, where = -p.value, p
		}
	}
	g := gate.Gate{ID: "undercut", Value: least, Limit: half, Unit: c.unit(), AtLeast: true, CamAngle: camAngle(where.t), Polar: c.polarAt(where.piece, where.t), Pass: least > half,
		Text: "largest half width of a groove whose walls are cut away nowhere, at any depth; use a smaller roller, enlarge radius or lengthen the event"}
	if !g.Pass {
		return g
	}
	if m := c.overlap(); m.Error < -overlapSlack*b.OuterRadius {
		zone, t := c.cycle.Zone(m.At)
		g.Value, g.Pass, g.CamAngle, g.Polar = half+m.Error, false, m.At, c.polarAt(zone, t)
		g.Text = fmt.Sprintf("another part of the track cuts %.4g %s into the wall there, at %.4g %s from the camshaft axis; enlarge radius or lengthen the event", -m.Error, c.unit(), m.Radius, c.unit())
	}
	return g
}

// overlapSlack is what rounding makes of a wall that touches its own roller, as a share of
// the radius.
const overlapSlack = 1e-9

// trackGate: the groove must stay on the barrel.
func (c *Cam) trackGate() gate.Gate {
	limit := 0.0
	if l := c.spec.Limits.Wall; l != nil {
		limit = *l
	}
	high := c.Pitch().largest(every, func(i int, t float64) float64 { return c.LiftIn(i, t).S })
	low := c.Pitch().largest(every, func(i int, t float64) float64 { return -c.LiftIn(i, t).S })
	track, half := c.spec.Cam.TrackPosition, c.inset()
	below, above := track-low.value-half, c.spec.Cam.Length-track-high.value-half
	value, at, end := below, low, "the datum end"
	if above < below {
		value, at, end = above, high, "the marked face"
	}
	return gate.Gate{ID: "track", Value: value, Limit: limit, Unit: c.unit(), AtLeast: true, CamAngle: camAngle(at.t), Polar: c.polarAt(at.piece, at.t), Pass: value > 0 && value >= limit,
		Text: "material between the groove and " + end + "; move track_position or take a longer barrel"}
}

// coreGate: material must be left under the groove.
func (c *Cam) coreGate() gate.Gate {
	b, _ := c.drum()
	m, limit := c.spec.Cam, 0.0
	if l := c.spec.Limits.Wall; l != nil {
		limit = *l
	}
	core, what := b.BottomRadius(), "the core"
	under := func(r float64, name string) {
		if left := b.BottomRadius() - r; left < core {
			core, what = left, name
		}
	}
	if m.Bore != nil {
		under(m.Bore.Diameter/2, "the bore")
		if k := m.Bore.Keyway; k != nil {
			under(math.Hypot(m.Bore.Diameter/2+k.Depth, k.Width/2), "the keyway")
		}
	}
	for i, h := range m.Holes {
		under(h.Radius+h.Diameter/2, fmt.Sprintf("hole %d", i+1))
	}
	return gate.Gate{ID: "groove-floor", Value: core, Limit: limit, Unit: c.unit(), AtLeast: true, CamAngle: math.NaN(), Polar: math.NaN(), Pass: core > 0 && core >= limit,
		Text: "material between the groove's bottom and " + what + "; take a larger radius or a shallower groove"}
}

// drumWall is the least material between any two of bore, keyway and holes.
func (c *Cam) drumWall() gate.Gate {
	limit := 0.0
	if l := c.spec.Limits.Wall; l != nil {
		limit = *l
	}
	w := c.bodyWalls(wall{thick: math.Inf(1), between: "no two features", t: math.NaN(), polar: math.NaN()})
	return gate.Gate{ID: "wall", Value: w.thick, Limit: limit, Unit: c.unit(), AtLeast: true, CamAngle: math.NaN(), Polar: w.polar, Pass: w.thick > 0 && w.thick >= limit,
		Text: "least material in the barrel's face, between " + w.between}
}

// drumBlank: the barrel is turned to its outer radius before the groove is cut.
func (c *Cam) drumBlank() *gate.Gate {
	if c.spec.Blank == nil {
		return nil
	}
	have, want := c.spec.Blank.Diameter/2, c.spec.Cam.Radius
	return &gate.Gate{ID: "blank", Value: want, Limit: have, Unit: c.unit(), CamAngle: math.NaN(), Polar: math.NaN(), Pass: math.Abs(have-want) <= widthSlack*want,
		Text: "outer radius of the barrel against the radius of the blank, which must be turned to it before the groove is cut"}
}

// drumReach: a tool as wide as the groove is exact; a narrower one leaves the walls off by its
// shift, which must stay within half the profile zone.
func (c *Cam) drumReach() []gate.Gate {
	var g []gate.Gate
	width := 2 * c.inset()
	for i, op := range c.spec.Operations {
		of := fmt.Sprintf("%d-%s", i+1, op.Process)
		fits := op.Process == "mill" && op.Axes == "cylinder" && op.ToolDiameter <= width*(1+widthSlack)
		x := gate.Gate{ID: "reach", Of: of, Value: op.ToolDiameter, Limit: width, Unit: c.unit(), CamAngle: math.NaN(), Polar: math.NaN(), Pass: fits,
			Text: fmt.Sprintf("operation %d: diameter of the tool against the width of the groove, %.6g %s (roller and clearance)", i+1, width, c.unit())}
		if op.Process != "mill" || op.Axes != "cylinder" {
			x.Text = fmt.Sprintf("operation %d: a barrel's groove cannot be cut by %s on %s: mill it on axes: cylinder", i+1, op.Process, op.Axes)
		}
		g = append(g, x)
		if !fits || op.ToolDiameter >= width*(1-widthSlack) {
			continue
		}
		g = append(g, c.wallError(op.ToolDiameter/2, i, of))
	}
	return g
}

func (c *Cam) wallError(tool float64, i int, of string) gate.Gate {
	parallel, rotary := c.Misses(tool)
	chosen, limit := parallel, c.spec.Tolerance.Profile/2
	if c.spec.Operations[i].Shift == "rotary" {
		chosen = rotary
	}
	zone, t := c.cycle.Zone(chosen.At)
	return gate.Gate{ID: "wall-error", Of: of, Value: math.Abs(chosen.Error), Limit: limit, Unit: c.unit(), CamAngle: chosen.At, Polar: c.polarAt(zone, t), Pass: math.Abs(chosen.Error) <= limit,
		Text: fmt.Sprintf("operation %d: largest error of walls cut by a tool %.4g %s narrower than the groove, exact at the middle of the depth: %+.3g %s with shift: parallel (axial axis and a linear axis across it), %+.3g %s with shift: rotary (axial and rotary axis), at %.4g %s from the camshaft axis; positive is material left; take a tool nearer to the groove's width",
			i+1, 2*(c.inset()-tool), c.unit(), parallel.Error, c.unit(), rotary.Error, c.unit(), chosen.Radius, c.unit())}
}
